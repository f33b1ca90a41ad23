import { fftOf } from '../../numeric/fft'

/** Lines of one period of stored samples: amplitude and phase of a·cos(2πkn/N + φ). */
export interface Lines {
  readonly re: Float64Array
  readonly im: Float64Array
}

/** @param period a power of two samples @returns N/2 + 1 lines, a tone's own amplitude on its line */
export function linesOf(period: Float64Array): Lines {
  const { length } = period
  const spectrum = new Float64Array(2 * length)
  fftOf(length).realForward(period, spectrum)
  const half = length / 2
  const scale = (k: number): number => (k === 0 || k === half ? 1 : 2) / length
  return {
    re: Float64Array.from({ length: half + 1 }, (_, k) => spectrum[2 * k]! * scale(k)),
    im: Float64Array.from({ length: half + 1 }, (_, k) => spectrum[2 * k + 1]! * scale(k)),
  }
}

/** Lines to either side over which noise is taken to be even. */
const NEAR = 4

/** Root mean square of the amplitudes about each line. */
export function floorOf({ re, im }: Lines): Float64Array {
  return re.map((_, line) => {
    let sum = 0
    let count = 0
    for (let k = Math.max(1, line - NEAR); k <= Math.min(line + NEAR, re.length - 2); k++) {
      sum += re[k]! ** 2 + im[k]! ** 2
      count += 1
    }
    return Math.sqrt(sum / Math.max(count, 1))
  })
}

export interface PhasePoint {
  readonly hertz: number
  /** In (−π, π]. */
  readonly measured: number
  /** Continuous. */
  readonly computed: number
  /** Most that the measured phase may be off: what the method adds, and the deviation of the noise. */
  readonly method: number
  readonly deviation: number
}

export interface Slope {
  readonly computedSeconds: number
  readonly measuredSeconds: number
  readonly methodSeconds: number
  readonly deviationSeconds: number
}

const turn = 2 * Math.PI
const wrapped = (angle: number): number => angle - turn * Math.round(angle / turn)

/**
 * Delay as the slope of phase over a cluster of tones, by least squares, of what was measured and of what was computed, at the same tones. The
 * measured phase is unwrapped from the middle outwards, each tone foretold by the slope up to there: distances double, so that the slope
 * gains a digit with each. Between the two nearest a delay is told from 0 up to most of the period; it isn't taken from the computed one.
 *
 * @param points two or more, rising in frequency
 * @param periodSeconds of the record
 */
export function slopeOf(points: readonly PhasePoint[], periodSeconds: number): Slope {
  const middle = points[Math.floor(points.length / 2)]!
  const outwards = [...points].sort((a, b) => Math.abs(a.hertz - middle.hertz) - Math.abs(b.hertz - middle.hertz))
  const known: { readonly x: number; readonly y: number }[] = []
  let slope = 0
  for (const { hertz, measured } of outwards) {
    const x = turn * (hertz - middle.hertz)
    if (known.length === 0) {
      known.push({ x, y: measured })
      continue
    }
    const [first] = known
    const raw = measured - first!.y
    if (known.length === 1) {
      // Of all slopes that fit, the one whose delay lies from an eighth of the period ahead to seven eighths behind.
      const delay = -raw / x
      const every = Math.abs(turn / x)
      slope = -(delay - every * Math.floor((delay + periodSeconds / 8) / every))
    }
    const foretold = slope * x
    const y = first!.y + foretold + wrapped(raw - foretold)
    known.push({ x, y })
    const square = known.reduce((sum, point) => sum + point.x * point.x, 0)
    slope = known.reduce((sum, point) => sum + point.x * (point.y - first!.y), 0) / square
  }
  const count = known.length
  const mean = known.reduce((sum, point) => sum + point.x, 0) / count
  const spread = known.reduce((sum, point) => sum + (point.x - mean) ** 2, 0)
  const weights = known.map(({ x }) => (x - mean) / spread)
  const sum = (values: readonly number[]): number => values.reduce((total, value) => total + value, 0)
  return {
    computedSeconds: -sum(outwards.map(({ computed }, k) => weights[k]! * computed)),
    measuredSeconds: -sum(known.map(({ y }, k) => weights[k]! * y)),
    methodSeconds: sum(outwards.map(({ method }, k) => Math.abs(weights[k]!) * method)),
    deviationSeconds: Math.sqrt(sum(outwards.map(({ deviation }, k) => (weights[k]! * deviation) ** 2))),
  }
}
