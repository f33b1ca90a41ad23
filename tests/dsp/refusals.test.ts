import { describe, expect, it } from 'vitest'
import {
  checkAnalogSpec,
  checkDiscretization,
  DesignError,
  designAnalog,
  designFromSpec,
  discretize,
  type AnalogSpec,
  type Method,
} from '@/dsp'

const LOWPASS: AnalogSpec = { family: 'butterworth', response: 'lowpass', order: 4, edgesHz: [100] }
const BAND: AnalogSpec = { family: 'butterworth', response: 'bandpass', order: 4, edgesHz: [100, 200] }
const ELLIPTIC: AnalogSpec = {
  family: 'elliptic',
  response: 'lowpass',
  order: 4,
  edgesHz: [100],
  rippleDb: 1,
  attenuationDb: 40,
}
const BILINEAR: Method = { method: 'bilinear', hold: 'edges' }

function refusal(action: () => unknown): DesignError {
  try {
    action()
  } catch (error) {
    if (error instanceof DesignError) return error
    throw error
  }
  throw new Error('nothing was refused')
}

/** Puts a nearest value where the refused one stood. */
function mend(spec: AnalogSpec, field: string, nearest: number | string | undefined): AnalogSpec {
  const [, name = '', index] = field.split('.')
  if (nearest === undefined) throw new Error(`${field} names no nearest value`)
  if (name !== 'edgesHz') return { ...spec, [name]: nearest }
  const edges = [...spec.edgesHz]
  edges[Number(index)] = Number(nearest)
  return { ...spec, edgesHz: edges }
}

/** Mends until accepted; a specification may be wrong in more than one place. */
function accepted(spec: AnalogSpec, check: (spec: AnalogSpec) => void): AnalogSpec {
  let current = spec
  for (let round = 0; round < 6; round += 1) {
    const before = current
    try {
      check(before)
      return before
    } catch (error) {
      if (!(error instanceof DesignError)) throw error
      current = mend(before, error.field, error.nearest)
    }
  }
  throw new Error('never accepted')
}

const { NaN: NOT_A_NUMBER, POSITIVE_INFINITY: INFINITE } = Number

describe('analog specifications', () => {
  it.each([
    [{ ...LOWPASS, order: 0 }, 'order-out-of-range', 'analog.order', 1],
    [{ ...LOWPASS, order: -3 }, 'order-out-of-range', 'analog.order', 1],
    [{ ...LOWPASS, order: 25 }, 'order-out-of-range', 'analog.order', 24],
    [{ ...LOWPASS, order: 2.6 }, 'order-out-of-range', 'analog.order', 3],
    [{ ...LOWPASS, order: NOT_A_NUMBER }, 'order-out-of-range', 'analog.order', 4],
    [{ ...LOWPASS, order: INFINITE }, 'order-out-of-range', 'analog.order', 24],
    [{ ...LOWPASS, edgesHz: [] }, 'edge-count', 'analog.edgesHz.1', undefined],
    [{ ...LOWPASS, edgesHz: [100, 200] }, 'edge-count', 'analog.edgesHz.1', undefined],
    [{ ...BAND, edgesHz: [100] }, 'edge-count', 'analog.edgesHz.1', 200],
    [{ ...BAND, edgesHz: [] }, 'edge-count', 'analog.edgesHz.0', undefined],
    [{ ...LOWPASS, edgesHz: [0] }, 'edge-out-of-range', 'analog.edgesHz.0', 1e-6],
    [{ ...LOWPASS, edgesHz: [-5] }, 'edge-out-of-range', 'analog.edgesHz.0', 1e-6],
    [{ ...LOWPASS, edgesHz: [NOT_A_NUMBER] }, 'edge-out-of-range', 'analog.edgesHz.0', 100],
    [{ ...LOWPASS, edgesHz: [INFINITE] }, 'edge-out-of-range', 'analog.edgesHz.0', 1e9],
    [{ ...BAND, edgesHz: [100, NOT_A_NUMBER] }, 'edge-out-of-range', 'analog.edgesHz.1', 100],
    [{ ...BAND, edgesHz: [200, 100] }, 'edges-out-of-order', 'analog.edgesHz.1', undefined],
    [{ ...BAND, edgesHz: [100, 100] }, 'edges-out-of-order', 'analog.edgesHz.1', undefined],
    [{ ...BAND, edgesHz: [100, 100.00001] }, 'edges-too-close', 'analog.edgesHz.1', undefined],
    [{ ...LOWPASS, family: 'chebyshev1' }, 'missing-ripple', 'analog.rippleDb', 0.5],
    [{ ...LOWPASS, family: 'chebyshev1', rippleDb: 0 }, 'ripple-out-of-range', 'analog.rippleDb', 1e-6],
    [{ ...LOWPASS, family: 'chebyshev1', rippleDb: -1 }, 'ripple-out-of-range', 'analog.rippleDb', 1e-6],
    [{ ...LOWPASS, family: 'chebyshev1', rippleDb: NOT_A_NUMBER }, 'ripple-out-of-range', 'analog.rippleDb', 0.5],
    [{ ...LOWPASS, family: 'chebyshev1', rippleDb: 100 }, 'ripple-out-of-range', 'analog.rippleDb', 60],
    [{ ...LOWPASS, family: 'chebyshev2' }, 'missing-attenuation', 'analog.attenuationDb', 60],
    [{ ...LOWPASS, family: 'chebyshev2', attenuationDb: 0 }, 'attenuation-out-of-range', 'analog.attenuationDb', 1e-3],
    [
      { ...LOWPASS, family: 'chebyshev2', attenuationDb: 4000 },
      'attenuation-out-of-range',
      'analog.attenuationDb',
      300,
    ],
    [{ ...ELLIPTIC, attenuationDb: NOT_A_NUMBER }, 'attenuation-out-of-range', 'analog.attenuationDb', 60],
    [{ ...ELLIPTIC, attenuationDb: 1 }, 'attenuation-below-ripple', 'analog.attenuationDb', undefined],
    [{ ...ELLIPTIC, rippleDb: 40, attenuationDb: 1 }, 'attenuation-below-ripple', 'analog.attenuationDb', undefined],
    [{ ...ELLIPTIC, order: 24, rippleDb: 3, attenuationDb: 6 }, 'transition-too-sharp', 'analog.order', undefined],
  ] as [AnalogSpec, string, string, number | undefined][])('%o is refused as %s', (spec, code, field, nearest) => {
    const error = refusal(() => checkAnalogSpec(spec))
    expect(error).toMatchObject({ name: 'DesignError', code, field })
    if (nearest !== undefined) expect(error.nearest).toBe(nearest)
    expect(error.message.length).toBeGreaterThan(20)
    // designAnalog and discretize refuse the same way.
    expect(refusal(() => designAnalog(spec)).code).toBe(code)
    expect(refusal(() => discretize(spec, 1000, BILINEAR)).code).toBe(code)
    if (error.nearest !== undefined) {
      const mended = accepted(spec, checkAnalogSpec)
      const filter = designAnalog(mended)
      expect(Number.isFinite(filter.gain)).toBe(true)
    }
  })

  it('says which number is wrong, and in hertz', () => {
    const error = refusal(() => checkAnalogSpec({ ...BAND, edgesHz: [200, 150] }))
    expect(error.message).toContain('200 Hz')
    expect(error.message).toContain('150 Hz')
    expect(refusal(() => checkAnalogSpec({ ...ELLIPTIC, rippleDb: 40, attenuationDb: 1 })).message).toContain('swapped')
  })

  it('ignores levels that the family doesn’t use', () => {
    expect(() => checkAnalogSpec({ ...LOWPASS, rippleDb: 3, attenuationDb: 1 })).not.toThrow()
  })

  it('refuses a normalization it doesn’t know', () => {
    const spec = { ...LOWPASS, family: 'bessel' as const }
    const odd: AnalogSpec = Object.assign({ ...spec }, { normalization: 'loudness' })
    expect(refusal(() => checkAnalogSpec(odd))).toMatchObject({
      code: 'normalization-unknown',
      field: 'analog.normalization',
    })
    for (const normalization of ['magnitude', 'delay', 'phase'] as const) checkAnalogSpec({ ...spec, normalization })
  })
})

describe('digital versions', () => {
  it.each([
    [LOWPASS, NOT_A_NUMBER, BILINEAR, 'rate-out-of-range', 'sampleRateHz'],
    [LOWPASS, 0, BILINEAR, 'rate-out-of-range', 'sampleRateHz'],
    [LOWPASS, -1000, BILINEAR, 'rate-out-of-range', 'sampleRateHz'],
    [LOWPASS, INFINITE, BILINEAR, 'rate-out-of-range', 'sampleRateHz'],
    [LOWPASS, 200, BILINEAR, 'edge-above-half-rate', 'analog.edgesHz.0'],
    [LOWPASS, 150, BILINEAR, 'edge-above-half-rate', 'analog.edgesHz.0'],
    [BAND, 400, BILINEAR, 'edge-above-half-rate', 'analog.edgesHz.1'],
    [BAND, 190, BILINEAR, 'edge-above-half-rate', 'analog.edgesHz.0'],
    [LOWPASS, 2e8, BILINEAR, 'edge-too-low-for-rate', 'analog.edgesHz.0'],
    [LOWPASS, 1000, { method: 'bilinear', hold: 0 }, 'hold-out-of-range', 'how.hold'],
    [LOWPASS, 1000, { method: 'bilinear', hold: -1 }, 'hold-out-of-range', 'how.hold'],
    [LOWPASS, 1000, { method: 'bilinear', hold: 500 }, 'hold-out-of-range', 'how.hold'],
    [LOWPASS, 1000, { method: 'bilinear', hold: NOT_A_NUMBER }, 'hold-out-of-range', 'how.hold'],
    [
      { ...LOWPASS, response: 'highpass' },
      1000,
      { method: 'impulse-invariant' },
      'passes-beyond-half-rate',
      'how.method',
    ],
    [{ ...BAND, response: 'bandstop' }, 1000, { method: 'impulse-invariant' }, 'passes-beyond-half-rate', 'how.method'],
    [ELLIPTIC, 1000, { method: 'impulse-invariant' }, 'not-strictly-proper', 'how.method'],
    [{ ...ELLIPTIC, family: 'chebyshev2' }, 1000, { method: 'impulse-invariant' }, 'not-strictly-proper', 'how.method'],
    [LOWPASS, 1000, { method: 'fitted', upToHz: 500 }, 'fit-out-of-range', 'how.upToHz'],
    [LOWPASS, 1000, { method: 'fitted', upToHz: 0 }, 'fit-out-of-range', 'how.upToHz'],
    [LOWPASS, 1000, { method: 'fitted', upToHz: NOT_A_NUMBER }, 'fit-out-of-range', 'how.upToHz'],
    [LOWPASS, 1000, { method: 'fitted', upToHz: 400, order: 25 }, 'order-out-of-range', 'how.order'],
    [BAND, 1000, { method: 'fitted', upToHz: 50 }, 'fit-below-pass-band', 'how.upToHz'],
  ] as [AnalogSpec, number, Method, string, string][])(
    '%o at %f Hz by %o is refused as %s',
    (spec, rate, how, code, field) => {
      const error = refusal(() => checkDiscretization(spec, rate, how))
      expect(error).toMatchObject({ code, field })
      expect(refusal(() => discretize(spec, rate, how)).code).toBe(code)
      expect(error.nearest).toBeDefined()
      // The nearest value is one that works.
      if (field === 'how.method') discretize(spec, rate, BILINEAR)
      if (field === 'how.upToHz') discretize(spec, rate, { method: 'fitted', upToHz: Number(error.nearest) })
      if (field === 'how.hold') discretize(spec, rate, { method: 'bilinear', hold: Number(error.nearest) })
      if (field === 'sampleRateHz')
        expect(() => checkDiscretization({ ...spec, edgesHz: [1e-6] }, Number(error.nearest), how)).not.toThrow(
          /sampling rate/,
        )
      if (field.startsWith('analog')) accepted(spec, (mended) => checkDiscretization(mended, rate, how))
    },
  )

  it('speaks hertz and names half the rate', () => {
    const error = refusal(() => checkDiscretization({ ...LOWPASS, edgesHz: [600] }, 1000, BILINEAR))
    expect(error.message).toContain('0 < corner < 500 Hz (half the rate)')
    expect(error.nearest).toBe(499.5)
    expect(refusal(() => checkDiscretization(BAND, 400, BILINEAR)).message).toContain(
      '0 < high edge < 200 Hz (half the rate)',
    )
  })

  it('says why impulse invariance makes no sense, and what works', () => {
    const highpass = refusal(() =>
      checkDiscretization({ ...LOWPASS, response: 'highpass' }, 1000, { method: 'impulse-invariant' }),
    )
    expect(highpass.message).toMatch(/fold/)
    const even = refusal(() => checkDiscretization(ELLIPTIC, 1000, { method: 'impulse-invariant' }))
    expect(even.message).toMatch(/odd order/i)
    expect(even.nearest).toBe('bilinear')
    expect(() => discretize({ ...ELLIPTIC, order: 5 }, 1000, { method: 'impulse-invariant' })).not.toThrow()
  })

  it('passes a refusal through designFromSpec', () => {
    const spec = {
      format: 1 as const,
      analog: LOWPASS,
      sampleRateHz: 150,
      how: { method: 'bilinear' as const, hold: 'edges' as const },
      budget: { magnitudeDb: 0.1, phaseDegrees: 1, removeDelay: false },
    }
    expect(refusal(() => designFromSpec(spec)).field).toBe('analog.edgesHz.0')
    const design = designFromSpec({ ...spec, sampleRateHz: 1000 })
    expect(design.diagnostics).toEqual(design.digital.diagnostics)
    expect(design.analog).toEqual(designAnalog(LOWPASS))
    expect(design.digital).toEqual(discretize(LOWPASS, 1000, BILINEAR))
  })
})

describe('the limits themselves', () => {
  it('holds at the least corner, the least width and order 24 without NaN and inside the circle', () => {
    const hows: Method[] = [
      BILINEAR,
      { method: 'matched-z' },
      { method: 'step-invariant' },
      { method: 'impulse-invariant' },
    ]
    const edges: [AnalogSpec['response'], readonly number[]][] = [
      ['lowpass', [1e-6]],
      ['highpass', [0.499]],
      ['bandpass', [1e-5, 1.00002e-5]],
      ['bandpass', [1e-6, 0.499]],
      ['bandstop', [0.2, 0.2000002001]],
    ]
    for (const family of [
      'butterworth',
      'chebyshev1',
      'chebyshev2',
      'elliptic',
      'bessel',
      'critically-damped',
    ] as const) {
      for (const [response, edgesHz] of edges) {
        for (const order of family === 'butterworth' || family === 'elliptic' ? [1, 23] : [24]) {
          const spec: AnalogSpec = { family, response, order, edgesHz, rippleDb: 0.1, attenuationDb: 60 }
          for (const how of hows) {
            try {
              const filter = discretize(spec, 1, how)
              for (const { re, im } of [...filter.poles, ...filter.zeros])
                expect(Number.isFinite(re) && Number.isFinite(im)).toBe(true)
              for (const { re, im } of filter.poles) expect(Math.hypot(re, im)).toBeLessThan(1)
              for (const section of filter.sections)
                for (const value of Object.values(section)) expect(Number.isFinite(value)).toBe(true)
              expect(Number.isFinite(filter.gain)).toBe(true)
            } catch (error) {
              // What can't be computed is refused in words; any other failure is one.
              if (!(error instanceof DesignError)) throw error
              expect(['passes-beyond-half-rate', 'not-strictly-proper', 'poles-reach-circle', 'not-finite']).toContain(
                error.code,
              )
            }
          }
        }
      }
    }
  }, 120_000)

  it('order 24 band-pass (48 poles) at 1e-5 of the rate is computed by every method', () => {
    const spec: AnalogSpec = { family: 'butterworth', response: 'bandpass', order: 24, edgesHz: [1e-5, 1.5e-5] }
    for (const how of [
      BILINEAR,
      { method: 'matched-z' },
      { method: 'step-invariant' },
      { method: 'impulse-invariant' },
    ] as Method[]) {
      const filter = discretize(spec, 1, how)
      expect(filter.poles.length).toBe(48)
      expect(filter.sections.length).toBe(24)
    }
  })
})
