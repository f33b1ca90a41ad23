import fc from 'fast-check'
import {
  DesignError,
  designFromSpec,
  ENGINE_VERSION,
  type AnalogSpec,
  type DesignSpec,
  type FamilyDesign,
  type FirDesign,
  type FirSpec,
  type Method,
  type OwnDesign,
} from '@/dsp'
import { checksumOf, coefficientsOf, type StoredFamily } from '@/lib/designs/coefficients'
import type { ExportSource } from '@/lib/exports'

const budget = { magnitudeDb: 0.1, phaseDegrees: 1, removeDelay: false }

interface Texts {
  readonly title?: string
  readonly note?: string
  readonly drawingNumber?: string
}

/** A saved version of that spec as the server would export it. */
export function sourceOf(spec: FamilyDesign, text?: Texts): ExportSource & { readonly kept: StoredFamily }
export function sourceOf(spec: DesignSpec, text?: Texts): ExportSource
export function sourceOf(spec: DesignSpec, text: Texts = {}): ExportSource {
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

export const lowPass = (change: Partial<AnalogSpec> = {}, sampleRateHz = 1200): FamilyDesign => ({
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
export function everyKind(orders: readonly number[]): readonly FamilyDesign[] {
  const specs: FamilyDesign[] = []
  for (const family of families)
    for (const response of responses)
      for (const how of methods)
        for (const order of orders) specs.push({ ...lowPass({ ...family, ...response, order }), how })
  return specs.filter(makesFilter)
}

export function makesFilter(spec: FamilyDesign): boolean {
  try {
    designFromSpec(spec)
    return true
  } catch (error) {
    if (error instanceof DesignError) return false
    throw error
  }
}

/** Specs of every kind with random numbers; most of them make a filter. */
export const anySpec: fc.Arbitrary<FamilyDesign> = fc
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

export const firDesign = (change: Partial<FirSpec> = {}, sampleRateHz = 1200): FirDesign => ({
  format: 1,
  fir: {
    kind: 'equiripple',
    response: 'lowpass',
    taps: 41,
    bands: [
      { fromHz: 0, toHz: 120, gain: 1 },
      { fromHz: 200, toHz: sampleRateHz / 2, gain: 0 },
    ],
    ...change,
  },
  sampleRateHz,
  budget,
})

/** Symmetric of odd and of even number, antisymmetric, without symmetry; few taps and many. */
export const firKinds: readonly FirDesign[] = [
  firDesign(),
  firDesign({ taps: 40 }),
  firDesign({ kind: 'windowed', window: 'kaiser', attenuationDb: 70, taps: 151 }),
  firDesign({ kind: 'windowed', window: 'hann', taps: 7 }),
  firDesign({ kind: 'minimum-phase', taps: 31 }),
  firDesign({ response: 'differentiator', taps: 31, bands: [{ fromHz: 0, toHz: 450, gain: 1 }] }),
  firDesign({
    kind: 'half-band',
    window: 'kaiser',
    attenuationDb: 60,
    taps: 31,
    bands: [
      { fromHz: 0, toHz: 200, gain: 1 },
      { fromHz: 400, toHz: 600, gain: 0 },
    ],
  }),
]

/** A sensor of 90 Hz on a soft mount, in each of the ways that an original can be given. */
const natural = 2 * Math.PI * 90
const damping = 0.35
const responseAt = (hertz: number): readonly [number, number, number] => {
  const part = hertz / 90
  const [re, im] = [1 - part * part, 2 * damping * part]
  return [hertz, -10 * Math.log10(re * re + im * im), (-180 / Math.PI) * Math.atan2(im, re)]
}
const half = natural * Math.sqrt(1 - damping * damping)
const own = (target: OwnDesign['own'], how: Method): OwnDesign => ({
  format: 1,
  own: target,
  sampleRateHz: 1200,
  how,
  budget,
})
export const ownRoots = own(
  {
    given: 'roots',
    name: 'sensor on its mount',
    zeros: [],
    poles: [
      { re: -damping * natural, im: half },
      { re: -damping * natural, im: -half },
    ],
    gain: natural * natural,
  },
  { method: 'bilinear', hold: 90 },
)
export const ownPolynomials = own(
  {
    given: 'polynomials',
    name: 'sensor on its mount',
    numerator: [natural * natural],
    denominator: [1, 2 * damping * natural, natural * natural],
  },
  { method: 'matched-z' },
)
export const ownMeasured = own(
  { given: 'measured', name: 'sensor on the table', rows: Array.from({ length: 60 }, (_, k) => responseAt(1 + 6 * k)) },
  { method: 'fitted', upToHz: 300, order: 2 },
)
export const ownKinds: readonly OwnDesign[] = [ownRoots, ownPolynomials, ownMeasured]

export const fittedLowPass: FamilyDesign = { ...lowPass(), how: { method: 'fitted', upToHz: 400 } }
