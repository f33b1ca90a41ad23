import { MAX_ORDER, show } from '../check'
import { DesignError } from '../errors'
import { fromHalf, magnitudeAt } from '../forms/zeros-poles-gain'
import { toLowpass } from '../transforms/bands'
import { lossToEpsilonSquared } from './chebyshev'
import { ellipticOrder, selectivity } from './elliptic'
import { prototypeOf } from './family'
import { checkRequirement, type CheckedRequirement, type OrderRequirement } from './order-check'
import type { Family, ResponseKind } from '../spec'

/** The least order, and the edges that a specification of that order takes. */
export interface LeastOrder {
  readonly response: ResponseKind
  readonly order: number
  /** For AnalogSpec.edgesHz: −3 dB edges, or the ripple edge (Chebyshev I, elliptic), or the stop edge (Chebyshev II). */
  readonly edgesHz: number[]
  /** Which required edge the filter meets to the last digit. */
  readonly metExactly: 'pass' | 'stop'
  /** What is to spare at the other edge. */
  readonly room: {
    readonly at: 'pass' | 'stop'
    /** At 'stop': attenuation beyond what is asked that the order can give there. At 'pass': ripple not used. */
    readonly db: number
    /** By how much the limit is reached before (stop) or after (pass) the required edge; the tighter of two. */
    readonly hz: number
  }
}

/*
 * All is done in the low-pass variable Ω with the pass edge at 1 and the stop edge at Ωs > 1 (Oppenheim & Schafer 7.1; Weinberg 1962),
 * after the edges have been warped when the filter is digital.
 */

interface Axis {
  /** Frequency variable of an edge in Hz, and back. */
  readonly forward: (hz: number) => number
  readonly back: (variable: number) => number
}

function axisOf({ sampleRateHz }: CheckedRequirement): Axis {
  if (sampleRateHz === undefined) return { forward: (hz) => hz, back: (variable) => variable }
  return {
    forward: (hz) => Math.tan((Math.PI * hz) / sampleRateHz),
    back: (variable) => (Math.atan(variable) * sampleRateHz) / Math.PI,
  }
}

/** Ω of the tighter stop edge. */
function stopEdge({ response, pass, stop }: CheckedRequirement, { forward }: Axis): number {
  const [p1 = 0, p2 = 0] = pass.map(forward)
  const edges = stop.map(forward)
  const ratio = (edge: number) => {
    switch (response) {
      case 'lowpass':
        return edge / p1
      case 'highpass':
        return p1 / edge
      case 'bandpass':
        return Math.abs(edge * edge - p1 * p2) / ((p2 - p1) * edge)
      case 'bandstop':
        return ((p2 - p1) * edge) / Math.abs(edge * edge - p1 * p2)
    }
  }
  return Math.min(...edges.map(ratio))
}

/** The edges in Hz that lie at ±Ω. */
function edgesAt(omega: number, { response, pass }: CheckedRequirement, { forward, back }: Axis): number[] {
  const [p1 = 0, p2 = 0] = pass.map(forward)
  if (response === 'lowpass') return [back(omega * p1)]
  if (response === 'highpass') return [back(p1 / omega)]
  const width = response === 'bandpass' ? omega * (p2 - p1) : (p2 - p1) / omega
  const high = (width + Math.sqrt(width * width + 4 * p1 * p2)) / 2
  return [back((p1 * p2) / high), back(high)]
}

/** A family at one order: where its edge lies in Ω when the requirement is met, and where it reaches the other limit. */
interface Fit {
  readonly edge: number
  readonly other: number
  readonly roomDb: number
}

/** A trifle below, so that a requirement met exactly by an order isn't pushed to the next by rounding. */
const roundUp = (order: number) => Math.max(1, Math.ceil(order * (1 - 1e-12)))

/** Loss in dB of a monotone prototype at Ω. */
function lossOf(family: Family, order: number): (omega: number) => number {
  const prototype = prototypeOf({ family, response: 'lowpass', order, edgesHz: [1] })
  const filter = fromHalf('s', toLowpass(prototype, 1))
  return (omega) => -20 * Math.log10(magnitudeAt(filter, { re: 0, im: omega }))
}

/** Where a monotone loss reaches a level, by bisection on lg Ω down to neighbouring doubles. */
function whereLossIs(db: number, loss: (omega: number) => number): number {
  let [low, high] = [1e-12, 1e60]
  for (let round = 0; round < 200; round += 1) {
    const middle = Math.sqrt(low) * Math.sqrt(high)
    if (middle <= low || middle >= high) break
    if (loss(middle) < db) low = middle
    else high = middle
  }
  return Math.sqrt(low) * Math.sqrt(high)
}

function fitMonotone(family: Family, order: number, stop: number, need: CheckedRequirement): Fit {
  const loss = lossOf(family, order)
  const atRipple = whereLossIs(need.rippleDb, loss)
  return {
    edge: 1 / atRipple,
    other: whereLossIs(need.attenuationDb, loss) / atRipple,
    roomDb: loss(stop * atRipple) - need.attenuationDb,
  }
}

/** The attenuation an elliptic filter of this order reaches at Ωs with this ripple. */
function ellipticAttenuation(order: number, stop: number, rippleDb: number): number {
  let [low, high] = [rippleDb, 3000]
  for (let round = 0; round < 100; round += 1) {
    const middle = (low + high) / 2
    if (middle <= low || middle >= high) break
    if (ellipticOrder(stop, rippleDb, middle) < order) low = middle
    else high = middle
  }
  return (low + high) / 2
}

function fit(family: Family, order: number, stop: number, need: CheckedRequirement): Fit {
  const { rippleDb, attenuationDb } = need
  const pass = Math.sqrt(lossToEpsilonSquared(rippleDb))
  const ratio = Math.sqrt(lossToEpsilonSquared(attenuationDb)) / pass
  const lossAt = (epsilon: number) => (10 / Math.LN10) * Math.log1p(epsilon * epsilon)
  switch (family) {
    case 'butterworth':
      return {
        edge: pass ** (-1 / order),
        other: ratio ** (1 / order),
        roomDb: lossAt(pass * stop ** order) - attenuationDb,
      }
    case 'chebyshev1':
      return {
        edge: 1,
        other: Math.cosh(Math.acosh(ratio) / order),
        roomDb: lossAt(pass * Math.cosh(order * Math.acosh(stop))) - attenuationDb,
      }
    case 'chebyshev2': {
      // The stop edge is exact; the loss at the pass edge is that of ε_stop/Tₙ(Ωs).
      const atPass = (pass * ratio) / Math.cosh(order * Math.acosh(stop))
      return { edge: stop, other: stop / Math.cosh(Math.acosh(ratio) / order), roomDb: rippleDb - lossAt(atPass) }
    }
    case 'elliptic':
      return {
        edge: 1,
        other: 1 / selectivity(order, rippleDb, attenuationDb).k,
        roomDb: ellipticAttenuation(order, stop, rippleDb) - attenuationDb,
      }
    case 'bessel':
    case 'critically-damped':
      return fitMonotone(family, order, stop, need)
  }
}

function leastOrder(family: Family, stop: number, need: CheckedRequirement): number {
  const ratio = Math.sqrt(lossToEpsilonSquared(need.attenuationDb) / lossToEpsilonSquared(need.rippleDb))
  switch (family) {
    case 'butterworth':
      return roundUp(Math.log(ratio) / Math.log(stop))
    case 'chebyshev1':
    case 'chebyshev2':
      return roundUp(Math.acosh(ratio) / Math.acosh(stop))
    case 'elliptic':
      return roundUp(ellipticOrder(stop, need.rippleDb, need.attenuationDb))
    case 'bessel':
    case 'critically-damped':
      for (let order = 1; order <= MAX_ORDER; order += 1) {
        if (fitMonotone(family, order, stop, need).roomDb >= -1e-9) return order
      }
      return Number.POSITIVE_INFINITY
  }
}

/** Attenuation at Ωs that order 24 reaches, found where the least order comes down to 24. */
function attainable(family: Family, stop: number, need: CheckedRequirement): number {
  let [low, high] = [need.rippleDb, need.attenuationDb]
  for (let round = 0; round < 50; round += 1) {
    const middle = (low + high) / 2
    if (leastOrder(family, stop, { ...need, attenuationDb: middle }) <= MAX_ORDER) low = middle
    else high = middle
  }
  return Math.floor(low * 1000) / 1000
}

/**
 * Least order of a family that meets a requirement, the edges to design it with, which required edge is met exactly, and how much room
 * the other has. Butterworth, Bessel and critically damped filters meet the pass edge and have their room at the stop edge, as have
 * Chebyshev I and elliptic ones; Chebyshev II filters meet the stop edge and have it at the pass edge. Closed forms (Weinberg 1962;
 * Orfanidis 2006 for elliptic), a search for Bessel and critically damped. A band-pass or band-stop is centred on its pass edges.
 *
 * @returns order 1–24, edges in Hz
 * @throws DesignError with field `passHz`, `stopHz`, `rippleDb`, `attenuationDb` or `sampleRateHz`; `order-too-high` (field
 * `attenuationDb`, nearest: what order 24 attains) when no order up to 24 does it
 */
export function minimumOrder(family: Family, requirement: OrderRequirement): LeastOrder {
  const need = checkRequirement(requirement)
  const axis = axisOf(need)
  const stop = stopEdge(need, axis)
  const order = stop > 1 ? leastOrder(family, stop, need) : Number.POSITIVE_INFINITY
  if (order > MAX_ORDER) {
    const best = stop > 1 ? attainable(family, stop, need) : need.rippleDb
    throw new DesignError(
      'order-too-high',
      'attenuationDb',
      `No order up to ${MAX_ORDER} of this family attenuates by ${show(need.attenuationDb)} dB there; ${show(best)} dB is within reach.`,
      best,
    )
  }
  const { edge, other, roomDb } = fit(family, order, stop, need)
  const metExactly = family === 'chebyshev2' ? 'stop' : 'pass'
  const at = metExactly === 'pass' ? 'stop' : 'pass'
  const required = at === 'stop' ? need.stop : need.pass
  const reached = edgesAt(other, need, axis)
  const distances = required.map((hz, index) => Math.abs(hz - (reached[index] ?? hz)))
  return {
    response: need.response,
    order,
    edgesHz: edgesAt(edge, need, axis),
    metExactly,
    room: { at, db: Math.max(0, roomDb), hz: Math.min(...distances) },
  }
}
