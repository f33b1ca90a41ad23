import type { AnalogSpec, DepartureBudget, Method, DesignSpec } from '@/dsp'

/*
 * Short ways to write a spec, for the demo's many.
 */

const usualBudget: DepartureBudget = { magnitudeDb: 0.1, phaseDegrees: 1, removeDelay: false }
/** For channels that are compared with each other: a common delay does no harm there. */
export const delayFreeBudget: DepartureBudget = { magnitudeDb: 0.1, phaseDegrees: 0.5, removeDelay: true }

export const heldAt = (hertz: number): Method => ({ method: 'bilinear', hold: hertz })
export const heldAtEdges: Method = { method: 'bilinear', hold: 'edges' }
export const notHeld: Method = { method: 'bilinear', hold: 'none' }
export const matchedZ: Method = { method: 'matched-z' }
export const impulseInvariant: Method = { method: 'impulse-invariant', restoreGain: true }

export const spec = (analog: AnalogSpec, sampleRateHz: number, how: Method, budget = usualBudget): DesignSpec => ({
  format: 1,
  analog,
  sampleRateHz,
  how,
  budget,
})
