import type {
  AnalogSpec,
  DepartureBudget,
  FamilyDesign,
  FirDesign,
  FirSpec,
  Method,
  OwnDesign,
  RequirementSheet,
} from '@/dsp'

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

export const spec = (analog: AnalogSpec, sampleRateHz: number, how: Method, budget = usualBudget): FamilyDesign => ({
  format: 1,
  analog,
  sampleRateHz,
  how,
  budget,
})

export const firSpec = (fir: FirSpec, sampleRateHz: number, sheet: RequirementSheet): FirDesign => ({
  format: 1,
  fir,
  sampleRateHz,
  budget: usualBudget,
  sheet,
})

/** A sensor on its mount by its roots: flat, up to a damped resonance of its own. */
export const mounted = (name: string, ownHz: number, damping: number, sampleRateHz: number, how: Method): OwnDesign => {
  const omega = 2 * Math.PI * ownHz
  const im = omega * Math.sqrt(1 - damping ** 2)
  return {
    format: 1,
    own: {
      given: 'roots',
      name,
      zeros: [],
      poles: [
        { re: -damping * omega, im },
        { re: -damping * omega, im: -im },
      ],
      gain: omega ** 2,
    },
    sampleRateHz,
    how,
    budget: usualBudget,
  }
}

export const fittedTo = (upToHz: number): Method => ({ method: 'fitted', upToHz })
