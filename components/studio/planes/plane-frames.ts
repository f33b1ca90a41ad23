import { written } from '@/components/plot/scene'
import type { Complex, Filter } from '@/dsp'
import { modulus } from './root-groups'

/* Where a plane's numbers fall on its square. */

export interface PlaneFrame {
  readonly size: number
  readonly perPixel: number
  x(re: number): number
  y(im: number): number
}

export const PLANE_SIZE = 192

function frameAbout(centreRe: number, centrePixel: number, perPixel: number): PlaneFrame {
  return {
    size: PLANE_SIZE,
    perPixel,
    x: (re) => written(centrePixel + (re - centreRe) / perPixel),
    y: (im) => written(PLANE_SIZE / 2 - im / perPixel),
  }
}

export interface SPlaneFrame extends PlaneFrame {
  /** Modulus of the outermost root shown, rad/s. */
  readonly reach: number
  /** Power of ten, a multiple of three, that the axes are written in. */
  readonly exponent: number
}

/** The left half has nearly all the room: no pole may stand on the right. */
export function sPlaneFrame({ poles, zeros }: Pick<Filter<'s'>, 'poles' | 'zeros'>): SPlaneFrame {
  const largestPole = Math.max(0, ...poles.map(modulus))
  // Zeros far up the axis would squeeze the poles together; those are pointed at instead.
  const nearZeros = zeros.map(modulus).filter((radius) => radius <= 1.8 * largestPole)
  const reach = Math.max(largestPole, ...nearZeros) || 1
  return {
    ...frameAbout(0, PLANE_SIZE * 0.75, (reach * 2.5) / PLANE_SIZE),
    reach,
    exponent: 3 * Math.floor(Math.log10(reach) / 3 + 1e-9),
  }
}

export type ZPlaneSpan = 'circle' | 'poles'

/** The whole unit circle, or as much as the poles take up: at high rates they huddle together at z = 1. */
export function zPlaneFrame(poles: readonly Complex[], span: ZPlaneSpan): PlaneFrame {
  if (span === 'circle' || poles.length === 0) return frameAbout(0, PLANE_SIZE / 2, 2.6 / PLANE_SIZE)
  const left = Math.min(...poles.map((pole) => pole.re))
  const right = Math.max(...poles.map((pole) => pole.re))
  const tall = Math.max(...poles.map((pole) => Math.abs(pole.im)))
  // Half as much again around them; a single real pole shows its distance to the circle.
  const nearest = Math.min(...poles.map((pole) => 1 - modulus(pole)))
  const half = 1.5 * Math.max((right - left) / 2, tall, Math.abs(nearest), 1e-9)
  return frameAbout((left + right) / 2, PLANE_SIZE / 2, (2 * half) / PLANE_SIZE)
}

/** Farther out than this a circle is drawn as the straight line it then is, for the sake of the renderer. */
const LARGEST_RADIUS_PIXELS = 20_000

/** The unit circle as path data. */
export function unitCircle(frame: PlaneFrame): string {
  const radius = 1 / frame.perPixel
  if (radius > LARGEST_RADIUS_PIXELS) return `M${frame.x(1)} 0V${frame.size}`
  const r = written(radius)
  return `M${frame.x(-1)} ${frame.y(0)}A${r} ${r} 0 1 1 ${frame.x(1)} ${frame.y(0)}A${r} ${r} 0 1 1 ${frame.x(-1)} ${frame.y(0)}`
}
