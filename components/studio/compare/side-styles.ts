import type { Stroke } from '@/components/plot/scene'
import type { MarkerShape } from '@/components/plot/trace-style'

export interface SideStyle {
  readonly stroke: Stroke & { readonly dash: readonly number[] }
  readonly marker: MarkerShape
}

/** How the sides are told apart, by place: ink, dash and marker together. The base is thin, dashed and square. */
const styles = [
  { stroke: { ink: 'slate', widthPixels: 1.6, dash: [7, 4] }, marker: 'square' },
  { stroke: { ink: 'spruce', widthPixels: 1.9, dash: [] }, marker: 'circle' },
  { stroke: { ink: 'ochre', widthPixels: 1.8, dash: [2, 4] }, marker: 'triangle' },
  { stroke: { ink: 'plum', widthPixels: 1.8, dash: [11, 4, 2, 4] }, marker: 'diamond' },
] as const satisfies readonly SideStyle[]

export const sideStyle = (place: number): SideStyle => styles[place] ?? styles[0]
