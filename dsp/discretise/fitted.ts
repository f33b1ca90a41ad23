import { fromHalf, fullCount, valueAt, type HalfForm } from '../forms/zeros-poles-gain'
import { levenbergMarquardt, type Stop } from '../numeric/levenberg-marquardt'
import { bestGain, fitProblem } from './fitted-problem'
import { productOf, rootsOf, type FitTarget, type Product } from './fitted-product'
import { fitWeights, targetOf } from './fitted-target'
import { magnitudeMatched } from './magnitude-matched'
import { vectorFit } from './vector-fit'

/** A form on the z-plane as a fit judges it. */
export interface FittedForm {
  readonly form: HalfForm
  /** Samples by which it comes later than the original; 0 unless a delay was left free. */
  readonly delay: number
  /** Weighted sum of squares of the complex error over the grid of the target. */
  readonly cost: number
  /** The largest weighted complex error. */
  readonly worst: number
  readonly endedEarly: boolean
}

export interface FittedVersion extends FittedForm {
  /** 'fit', or the name of the version that the fit couldn't better. */
  readonly kept: 'fit' | 'bilinear' | 'matched-z'
}

/** Linearisations that a fit from each start is given first, and those of the best ones after that. */
const FIRST_STEPS = 4
const MOST_STEPS = 40
/** Steps that lower the sum of squares by less than this part of it end a fit. */
const TOLERANCE = 5e-3
/** A fit this good, in root mean square, is good enough to be ended: 0.0004 dB and 0.003°. */
const GOOD = 5e-5
/** A fit worse than this is worth a second way to it. */
const POOR = 0.004
/** Points × unknowns² that all linearisations of one fit may come to, some 40 ms of work. */
const WORK = 1.4e7

/** Error of a z-plane form against the target with its best real gain under a given delay. */
export function judged(form: HalfForm, target: FitTarget, delay: number, keepGain = false): FittedForm {
  const filter = fromHalf('z', keepGain ? form : { ...form, gain: 1 })
  const count = target.omega.length
  const re = new Float64Array(count)
  const im = new Float64Array(count)
  let above = 0
  let below = 0
  for (let k = 0; k < count; k++) {
    const omega = target.omega[k]!
    const value = valueAt(filter, { re: Math.cos(omega), im: Math.sin(omega) })
    const [c, s] = [Math.cos(delay * omega), Math.sin(delay * omega)]
    re[k] = value.re * c - value.im * s
    im[k] = value.re * s + value.im * c
    const weight = target.weight[k]! ** 2
    above += weight * (re[k]! * target.re[k]! + im[k]! * target.im[k]!)
    below += weight * (re[k]! * re[k]! + im[k]! * im[k]!)
  }
  const gain = keepGain || above === 0 ? 1 : above / below
  let cost = 0
  let worst = 0
  for (let k = 0; k < count; k++) {
    const error = target.weight[k]! * Math.hypot(gain * re[k]! - target.re[k]!, gain * im[k]! - target.im[k]!)
    cost += error * error
    worst = Math.max(worst, error)
  }
  return { form: keepGain ? form : { ...form, gain }, delay, cost, worst, endedEarly: false }
}

const formOf = (product: Product, target: FitTarget): FittedForm =>
  judged(rootsOf(product, target), target, product.delay)

/**
 * Fits from several starts, and goes on from the best.
 *
 * @param starts forms on the z-plane; those with another number of poles than `order` are left out
 * @param order poles of the result
 * @param good root mean square of the weighted error at which a fit is ended
 * @returns null when no start has the order
 */
function fitFrom(starts: readonly HalfForm[], order: number, target: FitTarget, good = GOOD): FittedForm | null {
  const problem = fitProblem(target)
  const size = 2 * order + 1 + (target.freeDelay ? 1 : 0)
  let left = Math.max(2, Math.floor(WORK / (target.omega.length * size * size)))
  const enough = good * good * target.omega.length
  const poor = Math.max(enough, POOR * POOR * target.omega.length)
  const stop = (steps: number): Stop => ({ steps: Math.min(steps, left), tolerance: TOLERANCE, cost: enough })
  const usable = starts
    .filter((form) => fullCount(form.poles) === order)
    .map((form) => bestGain(productOf(form, order, target), target))
  const ranked = usable
    .map((state) => ({ state, cost: problem.cost(state) }))
    .sort((a, b) => a.cost - b.cost)
    // With little work to spare only the best starts are tried.
    .slice(0, Math.max(1, Math.floor(left / (2 * FIRST_STEPS))))
    .map(({ state }) => {
      const fit = levenbergMarquardt(problem, state, stop(FIRST_STEPS))
      left -= fit.steps
      return fit
    })
    .sort((a, b) => a.cost - b.cost)
  let best: { state: Product; cost: number } | undefined
  for (const start of ranked.slice(0, 2)) {
    if (best !== undefined && (best.cost <= poor || left < 2)) break
    const fit = levenbergMarquardt(
      problem,
      start.state,
      stop(best === undefined ? Math.min(MOST_STEPS, Math.ceil(left * 0.75)) : MOST_STEPS),
    )
    left -= fit.steps
    if (best === undefined || fit.cost < best.cost) best = fit
  }
  return best === undefined ? null : { ...formOf(best.state, target), endedEarly: left <= 1 && best.cost > enough }
}

interface FitOptions {
  /** Upper end of the fit, rad per sample. */
  readonly upTo: number
  readonly freeDelay: boolean
  readonly order: number | undefined
}

/** The delay in samples with which a version comes nearest to the target, by least squares on its phase error where it isn't weak. */
function likelyDelay(form: HalfForm, target: FitTarget): number {
  const filter = fromHalf('z', { ...form, gain: form.gain === 0 ? 1 : form.gain })
  let before = 0
  let turns = 0
  let above = 0
  let below = 0
  for (let k = 0; k < target.omega.length; k++) {
    const omega = target.omega[k]!
    const { re, im } = valueAt(filter, { re: Math.cos(omega), im: Math.sin(omega) })
    const angle = Math.atan2(im * target.re[k]! - re * target.im[k]!, re * target.re[k]! + im * target.im[k]!)
    if (k > 0) turns -= Math.round((angle - before) / (2 * Math.PI))
    before = angle
    above -= omega * (angle + 2 * Math.PI * turns)
    below += omega * omega
  }
  return below > 0 ? above / below : 0
}

/**
 * The fitted version: the digital filter whose complex response is nearest to the analog one from 0 up to a frequency, errors weighted as
 * fitWeights says. It has as many poles as the original unless an order is stated, and zeros exactly where the original has them on
 * the axis inside the band. Starts are the bilinear, the matched-z and the magnitude-matched version; poles and zeros are then moved
 * together by damped Gauss–Newton steps in coordinates that can't leave the unit circle. The result is never worse than the rivals, in the
 * criterion and in the largest weighted error: where the fit doesn't better both, it is the better rival itself.
 *
 * @param form the original in rad per sample
 * @param rivals its bilinear version, held at the edges where there are any, and its matched-z version
 */
export function fittedVersion(form: HalfForm, rivals: readonly HalfForm[], options: FitOptions): FittedVersion {
  const analog = fromHalf('s', form)
  const order = options.order ?? analog.poles.length
  const target = targetOf(analog, options.upTo, options.freeDelay, order)
  const named = rivals.map((rival, index) => {
    const delays = options.freeDelay ? [0, likelyDelay(rival, target)] : [0]
    const [better] = delays.map((delay) => judged(rival, target, delay, true)).sort((a, b) => a.cost - b.cost)
    return { ...better!, kept: index === 0 ? ('bilinear' as const) : ('matched-z' as const) }
  })
  const sameOrder = order === analog.poles.length
  const least = Math.min(...named.map(({ cost }) => cost)) / target.omega.length
  const good = Math.min(GOOD, 0.1 * Math.sqrt(least))
  const starts = sameOrder ? [...rivals, magnitudeMatched(form)] : vectorFit(target, order)
  const fit = fitFrom(starts, order, target, good)
  if (fit === null) return named[0]!
  if (!sameOrder || named.every((rival) => fit.cost <= rival.cost && fit.worst <= rival.worst))
    return { ...fit, kept: 'fit' }
  const [best] = named.sort((a, b) => a.worst - b.worst)
  return best!
}

/** A fit of measured values that agrees to this, in root mean square, is ended. */
const GOOD_ON_VALUES = 1e-10
/** Least 1 − |z|² of a pole when nothing is known of an original: it then rings for a million samples or so. */
const LEAST_MARGIN = 1e-6

/**
 * The digital filter nearest to values of a response, from starts found by vector fitting.
 *
 * @param values the response on rising angles in rad per sample
 * @param order poles; fewer than there are values
 */
export function fitValues(
  values: Pick<FitTarget, 'omega' | 're' | 'im' | 'upTo' | 'freeDelay'>,
  order: number,
): FittedVersion {
  const weight = fitWeights(values.re.map((re, k) => Math.hypot(re, values.im[k]!)))
  const target: FitTarget = { ...values, weight, pinned: { atZero: 0, angles: [] }, leastMargin: LEAST_MARGIN }
  const fit = fitFrom(vectorFit(target, order), order, target, GOOD_ON_VALUES)
  return { ...fit!, kept: 'fit' }
}
