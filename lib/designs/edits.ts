import type { AnalogSpec, DesignSpec, Family, MethodName, ResponseKind } from '@/dsp'

/*
 * What happens to the rest of a statement when one word changes: the parts that the new word needs are filled with sensible values,
 * the parts that it has no use for are let go. Whether the result makes a filter is for dsp to say.
 */

export const defaultSpec: DesignSpec = {
  format: 1,
  analog: { family: 'butterworth', response: 'lowpass', order: 4, edgesHz: [120] },
  sampleRateHz: 1200,
  how: { method: 'bilinear', hold: 'edges' },
  budget: { magnitudeDb: 0.1, phaseDegrees: 1, removeDelay: false },
}

export function withFamily(spec: DesignSpec, family: Family): DesignSpec {
  const { response, order, edgesHz, rippleDb, attenuationDb, normalization } = spec.analog
  const ripple = family === 'chebyshev1' || family === 'elliptic' ? { rippleDb: rippleDb ?? 0.5 } : {}
  const attenuation = family === 'chebyshev2' || family === 'elliptic' ? { attenuationDb: attenuationDb ?? 60 } : {}
  const normal = family === 'bessel' ? { normalization: normalization ?? ('magnitude' as const) } : {}
  return withAnalog(spec, { family, response, order, edgesHz, ...ripple, ...attenuation, ...normal })
}

export function withResponse(spec: DesignSpec, response: ResponseKind): DesignSpec {
  const { analog } = spec
  const wasBand = analog.edgesHz.length === 2
  const isBand = response === 'bandpass' || response === 'bandstop'
  const [first = 1, second = first] = analog.edgesHz
  if (isBand === wasBand) return withAnalog(spec, { ...analog, response })
  if (isBand) {
    // The one edge there was becomes the upper one, and the band reaches two octaves down.
    return withAnalog(spec, { ...analog, response, edgesHz: [first / 4, first] })
  }
  return withAnalog(spec, { ...analog, response, edgesHz: [response === 'lowpass' ? second : first] })
}

export function withMethod(spec: DesignSpec, method: MethodName): DesignSpec {
  if (spec.how.method === method) return spec
  return { ...spec, how: method === 'bilinear' ? { method, hold: 'edges' } : { method } }
}

export function withHold(spec: DesignSpec, hold: 'edges' | 'none' | number): DesignSpec {
  return { ...spec, how: { method: 'bilinear', hold } }
}

export function withEdge(spec: DesignSpec, index: 0 | 1, hertz: number): DesignSpec {
  const edgesHz = spec.analog.edgesHz.map((edge, at) => (at === index ? hertz : edge))
  return withAnalog(spec, { ...spec.analog, edgesHz })
}

export function withAnalog(spec: DesignSpec, analog: AnalogSpec): DesignSpec {
  return { ...spec, analog }
}

/** The frequency that a newly chosen "held at a frequency" starts with: the edge, or the geometric centre of the band. */
export function usualHoldHz(spec: DesignSpec): number {
  const [first = 1, second = first] = spec.analog.edgesHz
  return Math.sqrt(first * second)
}
