import fc from 'fast-check'
import { DesignError, designFromSpec, ENGINE_VERSION, type AnalogSpec, type Method, type DesignSpec } from '@/dsp'
import { checksumOf, coefficientsOf } from '@/lib/designs/coefficients'
import type { ExportSource } from '@/lib/exports'

const budget = { magnitudeDb: 0.1, phaseDegrees: 1, removeDelay: false }

/** A saved version of that spec as the server would export it. */
export function sourceOf(
  spec: DesignSpec,
  text: { title?: string; note?: string; drawingNumber?: string } = {},
): ExportSource {
  const design = designFromSpec(spec)
  return {
    design: {
      drawingNumber: text.drawingNumber ?? 'HMF-LP-012',
      title: text.title ?? 'Deck accelerometer, logger low-pass',
      projectName: 'Harrow Mill footbridge',
    },
    version: {
      number: 3,
      note: text.note ?? 'Rate raised after the second site visit',
      savedAt: '2026-12-01T09:42:00.000Z',
      savedBy: 'demo designer',
      state: 'draft',
      parentNumber: 2,
      engineVersion: ENGINE_VERSION,
      checksum: checksumOf(design),
      spec,
    },
    kept: coefficientsOf(design),
  }
}

export const lowPass = (change: Partial<AnalogSpec> = {}, sampleRateHz = 1200): DesignSpec => ({
  format: 1,
  analog: { family: 'butterworth', response: 'lowpass', order: 4, edgesHz: [120], ...change },
  sampleRateHz,
  how: { method: 'bilinear', hold: 'edges' },
  budget,
})

const families: readonly Partial<AnalogSpec>[] = [
  { family: 'butterworth' },
  { family: 'chebyshev1', rippleDb: 0.5 },
  { family: 'chebyshev2', attenuationDb: 50 },
  { family: 'elliptic', rippleDb: 0.2, attenuationDb: 60 },
  { family: 'bessel', normalization: 'magnitude' },
  { family: 'critically-damped' },
]
const responses: readonly Partial<AnalogSpec>[] = [
  { response: 'lowpass', edgesHz: [120] },
  { response: 'highpass', edgesHz: [40] },
  { response: 'bandpass', edgesHz: [60, 180] },
  { response: 'bandstop', edgesHz: [90, 130] },
]
const methods: readonly Method[] = [
  { method: 'bilinear', hold: 'edges' },
  { method: 'bilinear', hold: 'none' },
  { method: 'bilinear', hold: 100 },
  { method: 'impulse-invariant' },
  { method: 'matched-z' },
  { method: 'step-invariant' },
]

/** Every family × response × method × a few orders, without those that dsp refuses. */
export function everyKind(orders: readonly number[]): readonly DesignSpec[] {
  const specs: DesignSpec[] = []
  for (const family of families)
    for (const response of responses)
      for (const how of methods)
        for (const order of orders) specs.push({ ...lowPass({ ...family, ...response, order }), how })
  return specs.filter(makesFilter)
}

export function makesFilter(spec: DesignSpec): boolean {
  try {
    designFromSpec(spec)
    return true
  } catch (error) {
    if (error instanceof DesignError) return false
    throw error
  }
}

/** Specs of every kind with random numbers; most of them make a filter. */
export const anySpec: fc.Arbitrary<DesignSpec> = fc
  .record({
    family: fc.constantFrom(...families),
    response: fc.constantFrom('lowpass', 'highpass', 'bandpass', 'bandstop'),
    order: fc.integer({ min: 1, max: 12 }),
    sampleRateHz: fc.constantFrom(200, 1000, 1200, 44_100, 48_000.5),
    lowPart: fc.double({ min: -4, max: -0.5, noNaN: true }),
    width: fc.double({ min: 1.2, max: 4, noNaN: true }),
    how: fc.constantFrom(...methods.filter((how) => !('hold' in how && typeof how.hold === 'number'))),
  })
  .map(({ family, response, order, sampleRateHz, lowPart, width, how }) => {
    const low = sampleRateHz * 10 ** lowPart
    const edgesHz =
      response === 'lowpass' || response === 'highpass' ? [low] : [low, Math.min(low * width, sampleRateHz * 0.45)]
    return { ...lowPass({ ...family, response, order, edgesHz }, sampleRateHz), how }
  })
