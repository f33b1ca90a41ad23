import { describe, expect, it } from 'vitest'
import { designAnalog, discretize, type AnalogSpec } from '@/dsp'
import { bilinearFactor, bilinearTransform } from '@/dsp/discretise/bilinear'
import { fromHalf, halve } from '@/dsp/forms/zeros-poles-gain'
import { toTransferFunction } from '@/dsp'
import textbook from '../reference/textbook_examples.json'
import cookbook from '../reference/cookbook_biquads.json'
import { analogAt, decibels, digitalAt, relative, rootsAt, size } from '../helpers/dsp'
import type { Complex } from '@/dsp'

const example = (id: string) => {
  const found = textbook.examples.find((entry) => entry.id === id)
  if (found === undefined) throw new Error(`no example ${id}`)
  return found
}

/** Roots of a·s² + b·s + c. */
function quadraticRoots(a: number, b: number, c: number): Complex[] {
  const square = b * b - 4 * a * c
  if (square >= 0) {
    const larger = -(b + Math.sign(b || 1) * Math.sqrt(square)) / 2
    return larger === 0
      ? [
          { re: 0, im: 0 },
          { re: 0, im: 0 },
        ]
      : [
          { re: larger / a, im: 0 },
          { re: c / larger, im: 0 },
        ]
  }
  return [
    { re: -b / (2 * a), im: Math.sqrt(-square) / (2 * a) },
    { re: -b / (2 * a), im: -Math.sqrt(-square) / (2 * a) },
  ]
}

const analogOf = (zeros: readonly Complex[], poles: readonly Complex[], gain: number) =>
  fromHalf('s', { zeros: halve(zeros), poles: halve(poles), gain })

describe('textbook examples', () => {
  it('Oppenheim & Schafer: Butterworth of order 6 by the bilinear transform', () => {
    // os_bilinear_butterworth, Td = 1: sections and gain recomputed with Ωc = 0.766 rad and with the exact corner.
    const { results } = example('os_bilinear_butterworth')
    for (const [corner, sections, gain] of [
      [0.766, results.sections_recomputed_0766, results.gain_recomputed_0766],
      [Number(results.cutoff_exact_meeting_stopband), results.sections_recomputed_exact, results.gain_recomputed_exact],
    ] as const) {
      const analog = designAnalog({
        family: 'butterworth',
        response: 'lowpass',
        order: 6,
        edgesHz: [corner / (2 * Math.PI)],
      })
      const digital = bilinearTransform(analog, 1, 'none')
      expect(digital.gain / Number(gain)).toBeCloseTo(1, 6)
      expect(digital.zeros).toEqual(Array.from({ length: 6 }, () => ({ re: -1, im: 0 })))
      for (const { a1, a2 } of sections ?? []) {
        const match = digital.poles.some(
          (pole) => Math.abs(-2 * pole.re - a1) < 1e-6 && Math.abs(size(pole) ** 2 - a2) < 1e-6,
        )
        expect(match, `section ${a1} ${a2}`).toBe(true)
      }
    }
  })

  it('Proakis & Manolakis: one pole with its 3 dB at 0.2π', () => {
    const { results } = example('pm_single_pole_bilinear')
    const filter = discretize({ family: 'butterworth', response: 'lowpass', order: 1, edgesHz: [100] }, 1000, {
      method: 'bilinear',
      hold: 'edges',
    })
    const [section] = filter.sections
    expect(section?.b0).toBeCloseTo(Number(results.b0), 7)
    expect(section?.b1).toBeCloseTo(Number(results.b0), 7)
    expect(section?.a1).toBeCloseTo(Number(results.a1), 7)
  })

  it('Proakis & Manolakis: resonator', () => {
    const { results } = example('pm_resonator_bilinear')
    const analog = analogOf([{ re: -0.1, im: 0 }], quadraticRoots(1, 0.2, 16.01), 1)
    const { b, a } = toTransferFunction(bilinearTransform(analog, 2, 'none'))
    for (const [k, value] of [0.1249619, 0.0060957025, -0.1188662].entries()) expect(b[k]).toBeCloseTo(value, 7)
    for (const [k, value] of [1, 0.00060957025, 0.95123438].entries()) expect(a[k]).toBeCloseTo(value, 7)
    expect(Number(results.pole_radius)).toBeCloseTo(Math.sqrt(a[2] ?? 0), 7)
  })

  it('Lyons: two-pole Chebyshev at 100 Hz', () => {
    const { inputs } = example('lyons_bilinear')
    expect(inputs.fs_hz).toBe(100)
    const analog = analogOf([], quadraticRoots(1, 137.94536, 17410.145), 17410.145)
    const { b, a } = toTransferFunction(bilinearTransform(analog, 100, 'none'))
    for (const [k, value] of [0.204827122, 0.409654244, 0.204827122].entries()) expect(b[k]).toBeCloseTo(value, 9)
    for (const [k, value] of [1, -0.531530896, 0.350839385].entries()) expect(a[k]).toBeCloseTo(value, 9)
  })
})

describe('second-order sections of the Audio EQ Cookbook', () => {
  // tests/reference/cookbook_biquads.json; the analog originals are those of the cookbook with s normalised to the held frequency.
  const prototypes: Record<string, (q: number, a: number) => { above: readonly number[]; below: readonly number[] }> = {
    lowpass: (q) => ({ above: [0, 0, 1], below: [1, 1 / q, 1] }),
    highpass: (q) => ({ above: [1, 0, 0], below: [1, 1 / q, 1] }),
    bandpass_0db_peak: (q) => ({ above: [0, 1 / q, 0], below: [1, 1 / q, 1] }),
    bandpass_skirt: (q) => ({ above: [0, 1, 0], below: [1, 1 / q, 1] }),
    notch: (q) => ({ above: [1, 0, 1], below: [1, 1 / q, 1] }),
    allpass: (q) => ({ above: [1, -1 / q, 1], below: [1, 1 / q, 1] }),
    peaking: (q, a) => ({ above: [1, a / q, 1], below: [1, 1 / (a * q), 1] }),
    lowshelf: (q, a) => ({ above: [a, a ** 1.5 / q, a * a], below: [a, Math.sqrt(a) / q, 1] }),
    highshelf: (q, a) => ({ above: [a * a, a ** 1.5 / q, a], below: [1, Math.sqrt(a) / q, a] }),
  }

  it.each(cookbook.rows.map((row) => [row.type, row.f0_hz, row] as const))('%s at %f Hz', (type, f0, row) => {
    const amplitude = 10 ** ((row.gain_db ?? 0) / 40)
    // S = 1 gives the shelves Q = 1/√2.
    const original = prototypes[type]?.(row.Q ?? Math.SQRT1_2, amplitude)
    if (original === undefined) throw new Error(`no analog original for ${type}`)
    const omega = 2 * Math.PI * f0
    const [n2 = 0, n1 = 0, n0 = 0] = original.above
    const [d2 = 0, d1 = 0, d0 = 0] = original.below
    const scaled = (roots: Complex[]) => roots.map(({ re, im }) => ({ re: re * omega, im: im * omega }))
    const zeros = n2 !== 0 ? scaled(quadraticRoots(n2, n1, n0)) : n1 !== 0 ? [{ re: 0, im: 0 }] : []
    const lead = n2 !== 0 ? n2 : n1 !== 0 ? n1 * omega : n0 * omega * omega
    const analog = analogOf(zeros, scaled(quadraticRoots(d2, d1, d0)), lead / d2)
    const { b, a } = toTransferFunction(bilinearTransform(analog, row.fs_hz, f0))
    row.value.b.forEach((value, k) => expect(Math.abs((b[k] ?? 0) - value), `b${k}`).toBeLessThan(2e-12))
    row.value.a.forEach((value, k) => expect(Math.abs((a[k] ?? 0) - value), `a${k}`).toBeLessThan(2e-12))
  })
})

const SPECS: readonly AnalogSpec[] = [
  { family: 'butterworth', response: 'lowpass', order: 5, edgesHz: [120] },
  { family: 'chebyshev1', response: 'highpass', order: 4, edgesHz: [120], rippleDb: 1 },
  { family: 'chebyshev2', response: 'bandpass', order: 6, edgesHz: [100, 200], attenuationDb: 50 },
  { family: 'elliptic', response: 'bandstop', order: 5, edgesHz: [100, 200], rippleDb: 0.5, attenuationDb: 60 },
  { family: 'bessel', response: 'lowpass', order: 8, edgesHz: [90] },
  { family: 'critically-damped', response: 'bandpass', order: 3, edgesHz: [60, 240] },
]

describe('what is held', () => {
  it.each(SPECS)('edges: $family $response has its analog levels at its edges', (spec) => {
    const analog = designAnalog(spec)
    const digital = discretize(spec, 1000, { method: 'bilinear', hold: 'edges' })
    for (const edge of spec.edgesHz) {
      const wanted = decibels(analogAt(analog, edge))
      expect(decibels(digitalAt(digital, (2 * Math.PI * edge) / 1000))).toBeCloseTo(wanted, 8)
    }
  })

  it.each(SPECS)('one frequency: $family $response agrees there in magnitude and phase', (spec) => {
    const analog = designAnalog(spec)
    for (const held of [0.001, 37, 120, 480]) {
      const digital = discretize(spec, 1000, { method: 'bilinear', hold: held })
      const got = digitalAt(digital, (2 * Math.PI * held) / 1000)
      const wanted = analogAt(analog, held)
      expect(Math.hypot(got.re - wanted.re, got.im - wanted.im)).toBeLessThan(1e-9 * Math.max(1e-3, size(wanted)))
    }
  })

  it.each(SPECS)('at any frequency $family $response is the analog one at c·tan(ω/2)', (spec) => {
    const analog = designAnalog(spec)
    for (const hold of ['none', 77] as const) {
      const digital = discretize(spec, 1000, { method: 'bilinear', hold })
      const c = bilinearFactor(1000, hold) * 1000
      for (const omega of [0.01, 0.5, 1, 2, 3]) {
        const wanted = rootsAt(analog, { re: 0, im: c * Math.tan(omega / 2) })
        if (size(wanted) > 1e-6) expect(relative(digitalAt(digital, omega), wanted)).toBeLessThan(1e-9)
      }
    }
  })

  it('holding the corner of a low-pass is holding its edges', () => {
    const spec = SPECS[0]
    if (spec === undefined) throw new Error('no spec')
    const edges = discretize(spec, 1000, { method: 'bilinear', hold: 'edges' })
    const corner = discretize(spec, 1000, { method: 'bilinear', hold: 120 })
    edges.poles.forEach((pole, k) => {
      expect(pole.re).toBeCloseTo(corner.poles[k]?.re ?? 0, 14)
      expect(pole.im).toBeCloseTo(corner.poles[k]?.im ?? 0, 14)
    })
  })

  it('holding nothing lowers the corner: 120 Hz comes out at atan', () => {
    const digital = discretize({ family: 'butterworth', response: 'lowpass', order: 3, edgesHz: [120] }, 1000, {
      method: 'bilinear',
      hold: 'none',
    })
    const where = 2 * Math.atan((2 * Math.PI * 120) / 1000 / 2)
    expect(where).toBeLessThan((2 * Math.PI * 120) / 1000)
    expect(decibels(digitalAt(digital, where))).toBeCloseTo(-10 * Math.log10(2), 10)
  })
})

describe('zeros at infinity', () => {
  it('come to z = −1 exactly, and a diagnostic says how many', () => {
    for (const spec of SPECS) {
      const digital = discretize(spec, 1000, { method: 'bilinear', hold: 'edges' })
      const analog = designAnalog(spec)
      const expected = analog.poles.length - analog.zeros.length
      expect(digital.zeros.length).toBe(digital.poles.length)
      expect(digital.zeros.filter((zero) => zero.re === -1 && zero.im === 0).length).toBe(expected)
      const note = digital.diagnostics.find((entry) => entry.code === 'zeros-at-half-rate')
      expect(note?.value).toBe(expected === 0 ? undefined : expected)
    }
  })
})

describe('diagnostics', () => {
  const codes = (spec: AnalogSpec, rate: number) =>
    discretize(spec, rate, { method: 'bilinear', hold: 'edges' }).diagnostics.map((entry) => entry.code)

  it('cautions above 45 % of the rate, and not below', () => {
    const spec: AnalogSpec = { family: 'butterworth', response: 'bandpass', order: 2, edgesHz: [100, 460] }
    const found = discretize(spec, 1000, { method: 'bilinear', hold: 'edges' }).diagnostics.find(
      (entry) => entry.code === 'edge-near-half-rate',
    )
    expect(found).toMatchObject({ severity: 'caution', field: 'analog.edgesHz.1', value: 0.46 })
    expect(codes({ ...spec, edgesHz: [100, 449] }, 1000)).not.toContain('edge-near-half-rate')
  })

  it('says when a flat delay is lost', () => {
    const spec: AnalogSpec = { family: 'bessel', response: 'lowpass', order: 4, edgesHz: [260] }
    expect(codes(spec, 1000)).toContain('flat-delay-lost')
    expect(codes({ ...spec, edgesHz: [200] }, 1000)).not.toContain('flat-delay-lost')
    expect(codes({ ...spec, response: 'highpass' }, 1000)).toContain('flat-delay-is-lowpass')
    expect(codes({ ...spec, family: 'butterworth' }, 1000)).not.toContain('flat-delay-lost')
  })
})
