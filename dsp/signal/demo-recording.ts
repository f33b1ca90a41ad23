import { DesignError } from '../errors'
import { seededNoise, seededUniform } from '../numeric/random'

export interface DemoOptions {
  readonly sampleRateHz: number
  readonly durationSeconds: number
  readonly seed?: number
}

export interface DemoRecording {
  /** Acceleration in m/s². */
  readonly samples: Float64Array
  readonly sampleRateHz: number
  readonly unit: 'm/s²'
  readonly title: string
}

interface Mode {
  readonly frequencyHz: number
  /** Part of critical damping. */
  readonly damping: number
  /** Peak acceleration in m/s² that an average footfall leaves. */
  readonly share: number
}

/** The deck's vertical modes; each rings on after a footfall and dies away at 2πfζ per second. */
const MODES: readonly Mode[] = [
  { frequencyHz: 1.9, damping: 0.006, share: 0.05 },
  { frequencyHz: 5.2, damping: 0.009, share: 0.04 },
  { frequencyHz: 13.7, damping: 0.012, share: 0.03 },
  { frequencyHz: 41, damping: 0.02, share: 0.02 },
]

const SWAY_HZ = 0.4
const SWAY = 0.06
const PICKUP_HZ = 50
const PICKUP = 0.012
const SENSOR_NOISE = 0.004
const STEPS_PER_SECOND = 1.8
const MOST_SAMPLES = 50_000_000

/**
 * A damped oscillator that is pushed now and then, advanced exactly from sample to sample by the rotation e^{(−ζ + j√(1−ζ²))·2πf/fs}.
 * Modes at or above half the rate are left out, as a converter with its filter in front would not record them.
 */
function addMode(samples: Float64Array, sampleRateHz: number, mode: Mode, pushes: ReadonlyMap<number, number>): void {
  const w = 2 * Math.PI * mode.frequencyHz
  if (mode.frequencyHz >= 0.45 * sampleRateHz) return
  const decay = Math.exp((-mode.damping * w) / sampleRateHz)
  const angle = (w * Math.sqrt(1 - mode.damping ** 2)) / sampleRateHz
  const c = decay * Math.cos(angle)
  const s = decay * Math.sin(angle)
  let re = 0
  let im = 0
  for (let n = 0; n < samples.length; n++) {
    const push = pushes.get(n)
    if (push !== undefined) im += push * mode.share
    samples[n]! += im
    const next = c * re - s * im
    im = s * re + c * im
    re = next
  }
}

/** People cross in groups: strength of each footfall by the sample at which it falls. */
function footfalls(count: number, sampleRateHz: number, seed: number): Map<number, number> {
  const uniform = seededUniform(seed)
  const pushes = new Map<number, number>()
  let seconds = 0.4
  while (seconds * sampleRateHz < count) {
    const steps = 6 + Math.floor(uniform() * 24)
    const strength = 0.5 + uniform()
    const pace = STEPS_PER_SECOND * (0.9 + 0.2 * uniform())
    for (let step = 0; step < steps; step++) {
      const at = Math.round(seconds * sampleRateHz)
      if (at < count) pushes.set(at, (pushes.get(at) ?? 0) + strength * (0.7 + 0.6 * uniform()))
      seconds += (1 + 0.06 * (uniform() - 0.5)) / pace
    }
    seconds += 1 + 4 * uniform()
  }
  return pushes
}

/**
 * A recording made up for trying filters on: the vertical acceleration of a footbridge deck, in m/s².
 *
 * It is the sum of a slow sway at 0.4 Hz whose strength and phase wander, four modes at 1.9, 5.2, 13.7 and 41 Hz that are struck by
 * footfalls of groups of people (about 1.8 steps a second, uneven in time and strength) and die away, a 50 Hz pickup from the mains,
 * and white sensor noise of 4 mm/s² rms. What lies above 0.45 of the rate is left out. The same seed gives the same recording.
 *
 * @returns round(rate · duration) samples in m/s²
 * @throws DesignError `not-positive` for a rate or duration of 0 or less, `too-long` above 50 million samples
 */
export function footbridgeDemo(options: DemoOptions): DemoRecording {
  const { sampleRateHz, durationSeconds, seed = 1 } = options
  if (!(sampleRateHz > 0) || !Number.isFinite(sampleRateHz)) {
    throw new DesignError('not-positive', 'sampleRateHz', 'The sampling rate must be above 0 Hz.', 1000)
  }
  if (!(durationSeconds > 0) || !Number.isFinite(durationSeconds)) {
    throw new DesignError('not-positive', 'durationSeconds', 'The recording must last longer than 0 s.', 60)
  }
  const count = Math.max(1, Math.round(sampleRateHz * durationSeconds))
  if (count > MOST_SAMPLES) {
    throw new DesignError(
      'too-long',
      'durationSeconds',
      'The demo recording has 50 million samples at most.',
      MOST_SAMPLES / sampleRateHz,
    )
  }
  const samples = new Float64Array(count)
  const pushes = footfalls(count, sampleRateHz, seed)
  for (const mode of MODES) addMode(samples, sampleRateHz, mode, pushes)

  const noise = seededNoise(seed + 1)
  const wander = seededNoise(seed + 2)
  // The sway's two quadratures each wander with a time constant of 20 s about a steady part.
  const keep = Math.exp(-1 / (20 * sampleRateHz))
  const stir = Math.sqrt(1 - keep * keep)
  let cosine = 0
  let sine = 0
  for (let n = 0; n < count; n++) {
    const seconds = n / sampleRateHz
    cosine = keep * cosine + stir * wander()
    sine = keep * sine + stir * wander()
    let value = samples[n]! + SENSOR_NOISE * noise()
    if (SWAY_HZ < 0.45 * sampleRateHz) {
      const angle = 2 * Math.PI * SWAY_HZ * seconds
      value += SWAY * ((1 + 0.3 * cosine) * Math.sin(angle) + 0.3 * sine * Math.cos(angle))
    }
    if (PICKUP_HZ < 0.45 * sampleRateHz) value += PICKUP * Math.sin(2 * Math.PI * PICKUP_HZ * seconds + 0.3)
    samples[n] = value
  }
  return { samples, sampleRateHz, unit: 'm/s²', title: 'Footbridge deck, vertical' }
}
