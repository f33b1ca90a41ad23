import { roundedStep, roundedTo } from '@/components/plot/ticks'
import type { ChainSpec, FoldPath } from '@/dsp'
import { formatFixed, formatHz } from '@/lib/format/quantity'
import { downWords, ordinal } from './words'

/* Tracing one output frequency: where it may stand, how keys move it, and what is written of it. */

/** A step that a hand can point at and that reads well: a few hundred over half the output rate. */
const traceStepHz = (outputRateHz: number): number => roundedStep(outputRateHz / 2 / 250)

export function tracedAt(hertz: number, outputRateHz: number): number {
  const highest = outputRateHz / 2
  return Math.min(highest, Math.max(0, roundedTo(hertz, traceStepHz(outputRateHz))))
}

/** Where a key moves the trace: null clears it, undefined means that the key is none of its keys. */
export function tracedByKey(
  key: string,
  isLarge: boolean,
  now: number | null,
  { spec, outputRateHz }: { readonly spec: Pick<ChainSpec, 'kept'>; readonly outputRateHz: number },
): number | null | undefined {
  const step = traceStepHz(outputRateHz)
  const moved = (steps: number) =>
    now === null ? tracedAt(spec.kept.toHz / 2, outputRateHz) : tracedAt(now + steps * step, outputRateHz)
  switch (key) {
    case 'ArrowRight':
    case 'ArrowUp':
      return moved(isLarge ? 10 : 1)
    case 'ArrowLeft':
    case 'ArrowDown':
      return moved(isLarge ? -10 : -1)
    case 'PageUp':
      return moved(25)
    case 'PageDown':
      return moved(-25)
    case 'Home':
      return 0
    case 'End':
      return outputRateHz / 2
    case 'Escape':
      return null
    default:
      return undefined
  }
}

/** One line for each input that lands there: input, strip, how it runs, where it folds first, its level. */
export const traceRows = (
  paths: readonly FoldPath[],
  stageName: (stageId: string | null) => string | null,
): readonly (readonly string[])[] =>
  paths.map(({ inputHz, strip, mirrored, foldsAtStageId, levelDb }) => [
    formatHz(inputHz, 7),
    strip === 0 ? 'base band' : ordinal(strip + 1),
    strip === 0 ? '—' : mirrored ? 'backwards' : 'forwards',
    stageName(foldsAtStageId) ?? '—',
    strip === 0 ? (Number.isFinite(levelDb) ? `${formatFixed(levelDb, 2)}\u2009dB` : 'nothing') : downWords(levelDb),
  ])
