import { DesignError } from './errors'
import { selectivity } from './prototypes/elliptic'
import type { AnalogSpec, Method } from './spec'

/*
 * Every refusal of a specification, in one place: a code, the field, the reason in the unit that was typed, and the nearest value
 * that works. Whatever passes here yields finite numbers.
 */

export const MAX_ORDER = 24
/** Range of edges for which order 24 stays well inside double precision: (2π·10⁹)²⁴ ≈ 10²³⁵. */
const EDGE_RANGE_HZ = [1e-6, 1e9] as const
/** Narrower bands leave too few digits between the poles. */
const LEAST_RELATIVE_WIDTH = 1e-6
/** Below this part of the rate the coefficients of a section no longer tell its poles from z = 1. */
const LEAST_PART_OF_RATE = 1e-6
const RIPPLE_RANGE_DB = [1e-6, 60] as const
const ATTENUATION_RANGE_DB = [1e-3, 300] as const
/** Least k′ of an elliptic filter: its stop edge then lies 5·10⁻¹⁰ of the pass edge away from it. */
const LEAST_COMPLEMENT = 3e-5

/** A number as a sentence shows it: six significant digits, no exponent where it can be helped. */
export function show(value: number): string {
  if (!Number.isFinite(value) || value === 0) return String(value)
  const rounded = Number(value.toPrecision(6))
  return Math.abs(rounded) >= 1e-4 && Math.abs(rounded) < 1e9 ? String(rounded) : rounded.toExponential()
}

const hertz = (value: number) => `${show(value)} Hz`
const decibels = (value: number) => `${show(value)} dB`

/** The nearest number of six significant digits that is not above (or not below) `value`. */
function tidy(value: number, direction: 'down' | 'up'): number {
  const unit = 10 ** (Math.floor(Math.log10(value)) - 5)
  const steps = direction === 'down' ? Math.floor(value / unit) : Math.ceil(value / unit)
  return Number((steps * unit).toPrecision(6))
}

const clamp = (value: number, [least, most]: readonly [number, number]) => Math.min(Math.max(value, least), most)

function checkOrder(order: number): void {
  if (Number.isInteger(order) && order >= 1 && order <= MAX_ORDER) return
  const nearest = Number.isNaN(order) ? 4 : clamp(Math.round(order), [1, MAX_ORDER])
  throw new DesignError(
    'order-out-of-range',
    'analog.order',
    `The order is a whole number from 1 to ${MAX_ORDER}; ${order} was given.`,
    nearest,
  )
}

const isBand = (spec: AnalogSpec) => spec.response === 'bandpass' || spec.response === 'bandstop'

const edgeName = (spec: AnalogSpec, index: number) =>
  isBand(spec) ? (index === 0 ? 'low edge' : 'high edge') : 'corner'

function checkEdges(spec: AnalogSpec): void {
  const edges = spec.edgesHz
  const count = isBand(spec) ? 2 : 1
  const [low, high] = edges
  if (edges.length !== count) {
    const wanted = count === 2 ? 'a band takes two edges, low and high' : 'low-pass and high-pass take one corner'
    const nearest = count === 2 && low !== undefined && low > 0 ? 2 * low : undefined
    throw new DesignError(
      'edge-count',
      `analog.edgesHz.${count === 2 ? Math.min(edges.length, 1) : 1}`,
      `${edges.length === 1 ? '1 edge was' : `${edges.length} edges were`} given; ${wanted}.`,
      nearest,
    )
  }
  edges.forEach((edge, index) => {
    const [least, most] = EDGE_RANGE_HZ
    if (edge >= least && edge <= most) return
    const nearest = Number.isNaN(edge) ? 100 : clamp(edge, EDGE_RANGE_HZ)
    if (edge <= 0) {
      throw new DesignError(
        'edge-out-of-range',
        `analog.edgesHz.${index}`,
        `The ${edgeName(spec, index)} must lie above 0 Hz; ${hertz(edge)} was given.`,
        nearest,
      )
    }
    throw new DesignError(
      'edge-out-of-range',
      `analog.edgesHz.${index}`,
      `${hertz(least)} ≤ ${edgeName(spec, index)} ≤ ${hertz(most)}; ${hertz(edge)} was given.`,
      nearest,
    )
  })
  if (low === undefined || high === undefined) return
  const leastHigh = low * (1 + LEAST_RELATIVE_WIDTH)
  if (high <= low) {
    throw new DesignError(
      'edges-out-of-order',
      'analog.edgesHz.1',
      `The high edge must lie above the low edge, ${hertz(low)}; ${hertz(high)} was given.`,
      leastAbove(leastHigh),
    )
  }
  if (high < leastHigh) {
    throw new DesignError(
      'edges-too-close',
      'analog.edgesHz.1',
      `A band of ${high - low} Hz at ${hertz(low)} is too narrow to compute; it takes at least a millionth of the edge.`,
      leastAbove(leastHigh),
    )
  }
}

/** A hair above, since the comparison it must pass is itself rounded. */
const leastAbove = (value: number) => value * (1 + 4 * Number.EPSILON)

type Level = 'rippleDb' | 'attenuationDb'

function checkLevel(spec: AnalogSpec, level: Level): number {
  const value = spec[level]
  const ripple = level === 'rippleDb'
  const name = ripple ? 'ripple' : 'attenuation'
  const range = ripple ? RIPPLE_RANGE_DB : ATTENUATION_RANGE_DB
  const usual = ripple ? 0.5 : 60
  if (value === undefined) {
    const what = ripple ? 'a pass-band ripple' : 'a stop-band attenuation'
    throw new DesignError(
      `missing-${name}`,
      `analog.${level}`,
      `This family needs ${what} in dB; ${decibels(usual)} is usual.`,
      usual,
    )
  }
  if (value >= range[0] && value <= range[1]) return value
  const nearest = Number.isNaN(value) ? usual : clamp(value, range)
  throw new DesignError(
    `${name}-out-of-range`,
    `analog.${level}`,
    `${decibels(range[0])} ≤ ${name} ≤ ${decibels(range[1])}; ${decibels(value)} was given.`,
    nearest,
  )
}

const canBuild = (order: number, ripple: number, attenuation: number) =>
  attenuation > ripple && selectivity(order, ripple, attenuation).complement >= LEAST_COMPLEMENT

/** The least attenuation above the ripple for which the filter can be computed, by bisection. */
function leastAttenuation(order: number, ripple: number): number {
  let [low, high] = [ripple, ATTENUATION_RANGE_DB[1] as number]
  for (let round = 0; round < 60; round += 1) {
    const middle = (low + high) / 2
    if (canBuild(order, ripple, middle)) high = middle
    else low = middle
  }
  return tidy(high, 'up')
}

function checkElliptic(spec: AnalogSpec, ripple: number, attenuation: number): void {
  if (canBuild(spec.order, ripple, attenuation)) return
  if (attenuation <= ripple) {
    throw new DesignError(
      'attenuation-below-ripple',
      'analog.attenuationDb',
      `The attenuation, ${decibels(attenuation)}, must be more than the ripple, ${decibels(ripple)}; are the two swapped?`,
      leastAttenuation(spec.order, ripple),
    )
  }
  const message =
    'At this order the stop band would begin within a billionth of the pass edge; there is nothing left to compute.'
  for (let order = spec.order - 1; order >= 1; order -= 1) {
    if (canBuild(order, ripple, attenuation))
      throw new DesignError('transition-too-sharp', 'analog.order', message, order)
  }
  throw new DesignError('transition-too-sharp', 'analog.attenuationDb', message, leastAttenuation(spec.order, ripple))
}

/**
 * Whether an analog specification makes a filter.
 *
 * @throws DesignError with field `analog.order`, `analog.edgesHz.0`, `analog.edgesHz.1`, `analog.rippleDb`, `analog.attenuationDb` or
 * `analog.normalization`, and the nearest value that works
 */
export function checkAnalogSpec(spec: AnalogSpec): void {
  checkOrder(spec.order)
  checkEdges(spec)
  const ripple = spec.family === 'chebyshev1' || spec.family === 'elliptic' ? checkLevel(spec, 'rippleDb') : undefined
  const attenuation =
    spec.family === 'chebyshev2' || spec.family === 'elliptic' ? checkLevel(spec, 'attenuationDb') : undefined
  if (ripple !== undefined && attenuation !== undefined) checkElliptic(spec, ripple, attenuation)
  if (spec.normalization !== undefined && !['magnitude', 'delay', 'phase'].includes(spec.normalization)) {
    throw new DesignError(
      'normalization-unknown',
      'analog.normalization',
      'The edge is set by magnitude, delay or phase.',
      'magnitude',
    )
  }
}

export function checkRate(sampleRateHz: number): void {
  const range = [2 * EDGE_RANGE_HZ[0], EDGE_RANGE_HZ[1] / LEAST_PART_OF_RATE] as const
  if (sampleRateHz > range[0] && sampleRateHz <= range[1]) return
  const nearest = Number.isNaN(sampleRateHz) ? 1000 : clamp(sampleRateHz, [2 * range[0], range[1]])
  throw new DesignError(
    'rate-out-of-range',
    'sampleRateHz',
    `${hertz(range[0])} < sampling rate ≤ ${hertz(range[1])}; ${hertz(sampleRateHz)} was given.`,
    nearest,
  )
}

function checkEdgesAgainstRate(spec: AnalogSpec, sampleRateHz: number): void {
  const half = sampleRateHz / 2
  spec.edgesHz.forEach((edge, index) => {
    const name = edgeName(spec, index)
    if (edge >= half) {
      // A low edge goes a little further down, so that the high edge still finds room above it.
      const nearest = tidy(half * (isBand(spec) && index === 0 ? 0.99 : 0.999), 'down')
      throw new DesignError(
        'edge-above-half-rate',
        `analog.edgesHz.${index}`,
        `0 < ${name} < ${hertz(half)} (half the rate); ${hertz(edge)} was given.`,
        nearest,
      )
    }
    if (edge < LEAST_PART_OF_RATE * sampleRateHz) {
      throw new DesignError(
        'edge-too-low-for-rate',
        `analog.edgesHz.${index}`,
        `${hertz(LEAST_PART_OF_RATE * sampleRateHz)} (a millionth of the rate) ≤ ${name}; ${hertz(edge)} was given. A lower rate helps too.`,
        leastAbove(LEAST_PART_OF_RATE * sampleRateHz),
      )
    }
  })
}

function checkImpulseInvariant(spec: AnalogSpec): void {
  const refuse = (code: string, why: string) => new DesignError(code, 'how.method', why, 'bilinear')
  if (spec.response === 'highpass' || spec.response === 'bandstop') {
    const name = spec.response === 'highpass' ? 'high-pass' : 'band-stop'
    throw refuse(
      'passes-beyond-half-rate',
      `Sampling the impulse response folds all that passes above half the rate into the band, and a ${name} filter passes all of it; the bilinear transform works.`,
    )
  }
  if ((spec.family === 'chebyshev2' || spec.family === 'elliptic') && spec.order % 2 === 0) {
    throw refuse(
      'not-strictly-proper',
      'With an even order this family never falls to zero at high frequencies: its impulse response holds a Dirac pulse that can’t be sampled. An odd order or the bilinear transform works.',
    )
  }
}

/** Whether a frequency can be held by the bilinear transform; `usualHz` is offered instead of one that isn't positive. */
export function checkHold(hold: number | 'edges' | 'none', sampleRateHz: number, usualHz: number): void {
  if (typeof hold !== 'number' || (hold > 0 && hold < sampleRateHz / 2)) return
  throw new DesignError(
    'hold-out-of-range',
    'how.hold',
    `0 < held frequency < ${hertz(sampleRateHz / 2)} (half the rate); ${hertz(hold)} was given.`,
    hold > 0 ? tidy(sampleRateHz * 0.4995, 'down') : usualHz,
  )
}

/** The nearest end of a fit that works, as a part of the rate. */
const USUAL_END_OF_FIT = 0.45

/**
 * Whether a fit can end where it is to end.
 *
 * @param fromHz what the fit must reach beyond, such as the low end of the pass band
 */
export function checkFit(how: Extract<Method, { method: 'fitted' }>, sampleRateHz: number, fromHz: number): void {
  if (how.order !== undefined && !(Number.isInteger(how.order) && how.order >= 1 && how.order <= MAX_ORDER)) {
    throw new DesignError(
      'order-out-of-range',
      'how.order',
      `A fitted version has 1 to ${MAX_ORDER} poles where their number is stated; ${how.order} was given.`,
      Number.isNaN(how.order) ? 4 : clamp(Math.round(how.order), [1, MAX_ORDER]),
    )
  }
  const { upToHz } = how
  const half = sampleRateHz / 2
  const usual = tidy(USUAL_END_OF_FIT * sampleRateHz, 'down')
  if (!(upToHz > 0 && upToHz < half)) {
    throw new DesignError(
      'fit-out-of-range',
      'how.upToHz',
      `0 < end of the fit < ${hertz(half)} (half the rate); ${hertz(upToHz)} was given.`,
      usual,
    )
  }
  if (upToHz > fromHz) return
  // Where the pass band begins too near half the rate, the middle of what is left.
  throw new DesignError(
    'fit-below-pass-band',
    'how.upToHz',
    `The fit must reach into the pass band, which begins at ${hertz(fromHz)}; ${hertz(upToHz)} was given.`,
    2 * fromHz < half ? 2 * fromHz : (fromHz + half) / 2,
  )
}

/**
 * Whether a specification can be brought to this sampling rate by this method.
 *
 * @throws DesignError as checkAnalogSpec, and with field `sampleRateHz`, `analog.edgesHz.0`, `analog.edgesHz.1`, `how.hold`,
 * `how.upToHz`, `how.order` or `how.method`
 */
export function checkDiscretization(spec: AnalogSpec, sampleRateHz: number, how: Method): void {
  checkAnalogSpec(spec)
  checkRate(sampleRateHz)
  checkEdgesAgainstRate(spec, sampleRateHz)
  switch (how.method) {
    case 'bilinear':
      return checkHold(how.hold, sampleRateHz, spec.edgesHz[0] ?? 1)
    case 'impulse-invariant':
      return checkImpulseInvariant(spec)
    case 'matched-z':
    case 'step-invariant':
      return
    case 'fitted':
      return checkFit(
        how,
        sampleRateHz,
        spec.response === 'highpass' || spec.response === 'bandpass' ? (spec.edgesHz[0] ?? 0) : 0,
      )
  }
}
