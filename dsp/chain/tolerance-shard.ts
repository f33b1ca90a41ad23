import { DesignError } from '../errors'
import { modulus } from '../numeric/complex'
import { analogSections, type AnalogSection } from './analog-sections'
import { drawChannel } from './tolerance-draw'
import type { ComputedChain } from './chain'
import type { ToleranceShard } from './tolerance'

/**
 * The frequencies of a tolerance run: spaced evenly in their logarithm over the kept band, both ends exact.
 *
 * @param points 2 or more
 * @returns hertz, from `kept.fromHz` (a thousandth of `kept.toHz` where that is 0) to `kept.toHz`
 */
export function toleranceFrequencies(chain: Pick<ComputedChain, 'spec'>, points = 512): Float64Array {
  const { fromHz, toHz } = chain.spec.kept
  const low = fromHz > 0 ? fromHz : toHz / 1000
  if (!(Number.isInteger(points) && points >= 2)) {
    throw new DesignError('too-few-points', 'points', 'A tolerance run takes two frequencies or more.', 2)
  }
  const grid = Float64Array.from({ length: points }, (_, n) => low * (toHz / low) ** (n / (points - 1)))
  grid[points - 1] = toHz
  return grid
}

/**
 * A factor of a section's numerator or denominator as 1 − x² + j·x·damping (order 2) or 1 + j·x (order 1), x being the frequency over the
 * factor's own. Only its departure matters, so that its constant is left out.
 */
interface Factor {
  readonly section: number
  readonly isZero: boolean
  readonly order: 1 | 2
  /** x at 1 Hz; negative for a real zero in the right half plane. */
  readonly perHertz: number
  readonly damping: number
  /** 1 over the nominal factor at each frequency. */
  readonly re: Float64Array
  readonly im: Float64Array
}

/** Least |factor|² that a zero is taken to have: 200 dB down, so that two zeros crossing each other stay a finite number. */
const LEAST_POWER = 1e-20

function factor(
  shape: Pick<Factor, 'section' | 'isZero' | 'order' | 'perHertz' | 'damping'>,
  frequenciesHz: Float64Array,
): Factor {
  const re = new Float64Array(frequenciesHz.length)
  const im = new Float64Array(frequenciesHz.length)
  frequenciesHz.forEach((hertz, n) => {
    const x = hertz * shape.perHertz
    const real = shape.order === 2 ? (1 - x) * (1 + x) : 1
    const imaginary = shape.order === 2 ? x * shape.damping : x
    const power = real * real + imaginary * imaginary
    re[n] = power < LEAST_POWER ? 1 / Math.sqrt(LEAST_POWER) : real / power
    im[n] = power < LEAST_POWER ? 0 : -imaginary / power
  })
  return { ...shape, re, im }
}

function factorsOf(sections: readonly AnalogSection[], frequenciesHz: Float64Array): readonly Factor[] {
  const perRadian = 2 * Math.PI
  return sections.flatMap(({ order, f0Hz, q, zeros }, section) => [
    factor({ section, isZero: false, order, perHertz: 1 / f0Hz, damping: q === null ? 1 : 1 / q }, frequenciesHz),
    ...zeros.flatMap((zero) => {
      const size = modulus(zero)
      if (size === 0 || zero.im < 0) return []
      const shape =
        zero.im > 0
          ? ({ order: 2, perHertz: perRadian / size, damping: (-2 * zero.re) / size } as const)
          : ({ order: 1, perHertz: -perRadian / zero.re, damping: 1 } as const)
      return [factor({ section, isZero: true, ...shape }, frequenciesHz)]
    }),
  ])
}

/** What zeros at the origin, and a band-pass held to unity at f0, do at every frequency alike. */
function levelOf(sections: readonly AnalogSection[], drawn: Float64Array): number {
  let level = 1
  sections.forEach(({ response, zeros }, index) => {
    for (const zero of zeros) if (zero.re === 0 && zero.im === 0) level /= drawn[2 * index]!
    if (response === 'band-pass') level /= drawn[2 * index + 1]!
  })
  return level
}

/**
 * The running product of (factor drawn / factor nominal) for poles and its inverse for zeros. `turns` counts how often the product went
 * around: two angles within ±180° whose sum isn't show it in the signs of their imaginary parts, which saves an arctangent a factor.
 */
interface Product {
  readonly re: Float64Array
  readonly im: Float64Array
  readonly turns: Float64Array
}

function multiplyBy(
  { re, im, turns }: Product,
  { isZero, order, re: nominalRe, im: nominalIm }: Factor,
  frequenciesHz: Float64Array,
  perHertz: number,
  damping: number,
): void {
  const isSecond = order === 2
  for (let n = 0; n < frequenciesHz.length; n += 1) {
    const x = frequenciesHz[n]! * perHertz
    let a = isSecond ? (1 - x) * (1 + x) : 1
    let b = isSecond ? x * damping : x
    if (isZero && a * a + b * b < LEAST_POWER) {
      a = Math.sqrt(LEAST_POWER)
      b = 0
    }
    const c = nominalRe[n]!
    const d = nominalIm[n]!
    let ratioRe = a * c - b * d
    let ratioIm = a * d + b * c
    if (isZero) {
      const power = ratioRe * ratioRe + ratioIm * ratioIm
      ratioRe /= power
      ratioIm /= -power
    }
    const p = re[n]!
    const q = im[n]!
    const nextIm = p * ratioIm + q * ratioRe
    if (q >= 0) {
      if (ratioIm >= 0 && nextIm < 0) turns[n]! += 1
    } else if (ratioIm < 0 && nextIm > 0) turns[n]! -= 1
    re[n] = p * ratioRe - q * ratioIm
    im[n] = nextIm
  }
}

function checkChannels(fromChannel: number, toChannel: number, channels: number): void {
  const isWhole = Number.isInteger(fromChannel) && Number.isInteger(toChannel)
  if (isWhole && fromChannel >= 0 && fromChannel <= toChannel && toChannel <= channels) return
  throw new DesignError(
    'channel-out-of-range',
    'tolerance.channels',
    `Channels ${fromChannel} to ${toChannel} are not a part of the run’s ${channels}.`,
    channels,
  )
}

/**
 * Departure of channels from the nominal response, as drawn by `drawChannel`. Only what varies is computed: the product over the sections
 * of H drawn / H nominal, each in closed form. Zeros move with their section's f0. Channel k depends on the seed and k alone, so that any
 * split of a run into shards gives the same bits (in one engine; sines, logarithms and arctangents may differ between two).
 *
 * @param frequenciesHz 0 or above
 * @param fromChannel first channel
 * @param toChannel the one after the last
 * @returns channel-major: magnitude in dB, phase in degrees without jumps of 360°. Where a zero lies on the axis its factor counts as at
 *   least 200 dB down, so that every value is finite
 * @throws DesignError `channel-out-of-range`
 */
export function toleranceShard(
  chain: Pick<ComputedChain, 'spec' | 'stages'>,
  frequenciesHz: Float64Array,
  fromChannel: number,
  toChannel: number,
): ToleranceShard {
  const settings = chain.spec.tolerance
  checkChannels(fromChannel, toChannel, settings.channels)
  const sections = analogSections(chain)
  const factors = factorsOf(sections, frequenciesHz)
  const points = frequenciesHz.length
  const drawn = new Float64Array(2 * sections.length)
  const product = { re: new Float64Array(points), im: new Float64Array(points), turns: new Float64Array(points) }
  const magnitudeDb = new Float64Array((toChannel - fromChannel) * points)
  const phaseDegrees = new Float64Array(magnitudeDb.length)
  const decibels = 10 / Math.LN10
  const degrees = 180 / Math.PI
  for (let channel = fromChannel, at = 0; channel < toChannel; channel += 1, at += points) {
    drawChannel(settings, sections, channel, drawn)
    product.re.fill(1)
    product.im.fill(0)
    product.turns.fill(0)
    for (const one of factors) {
      const perHertz = one.perHertz / drawn[2 * one.section]!
      multiplyBy(
        product,
        one,
        frequenciesHz,
        perHertz,
        one.isZero ? one.damping : one.damping / drawn[2 * one.section + 1]!,
      )
    }
    const { re, im, turns } = product
    const levelDb = 2 * decibels * Math.log(levelOf(sections, drawn))
    for (let n = 0; n < points; n += 1) {
      const real = re[n]!
      const imaginary = im[n]!
      magnitudeDb[at + n] = levelDb - decibels * Math.log(real * real + imaginary * imaginary)
      phaseDegrees[at + n] = 0 - (Math.atan2(imaginary, real) * degrees + 360 * turns[n]!)
    }
  }
  return { fromChannel, toChannel, magnitudeDb, phaseDegrees }
}
