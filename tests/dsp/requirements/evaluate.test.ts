import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  checkRequirement,
  checkSheet,
  designAnalog,
  designFromSpec,
  discretize,
  frequencyResponse,
  groupDelay,
  type AnalogSpec,
  type DigitalFilter,
  type Judged,
  type Method,
  type Requirement,
} from '@/dsp'

const RATE = 1000
const bilinear: Method = { method: 'bilinear', hold: 'edges' }

function judged(spec: AnalogSpec, how: Method = bilinear, rate = RATE): Judged {
  return { reference: { kind: 'analog', filter: designAnalog(spec) }, digital: discretize(spec, rate, how) }
}

/** A filter of given roots, with its sections written out. */
function byHand(digital: Omit<DigitalFilter, 'domain' | 'diagnostics' | 'sampleRateHz'>): Judged {
  const filter: DigitalFilter = { domain: 'z', sampleRateHz: RATE, diagnostics: [], ...digital }
  return { reference: { kind: 'analog', filter: { domain: 's', zeros: [], poles: [], gain: 1 } }, digital: filter }
}

const butterworth = (order: number, cornerHz = 100): AnalogSpec => ({
  family: 'butterworth',
  response: 'lowpass',
  order,
  edgesHz: [cornerHz],
})

const warped = (hz: number) => Math.tan((Math.PI * hz) / RATE)
/** Loss in dB of a Butterworth low-pass by the bilinear transform: 10·lg(1 + (Ω/Ωc)^2n). */
const loss = (order: number, hz: number) => 10 * Math.log10(1 + (warped(hz) / warped(100)) ** (2 * order))

describe('lines of magnitude', () => {
  it.each([1, 2, 5])('are those of the Butterworth formula at order %i', (order) => {
    const design = judged(butterworth(order))
    const pass = checkRequirement(design, { kind: 'pass', fromHz: 0, toHz: 80, withinDb: 3 })
    expect(pass.value).toBeCloseTo(loss(order, 80), 9)
    expect(pass.margin).toBeCloseTo(3 - loss(order, 80), 9)
    expect(pass).toMatchObject({ worstHz: 80, unit: 'dB', limit: 3, met: true, curve: 'magnitude' })
    const stop = checkRequirement(design, { kind: 'stop', fromHz: 300, toHz: 450, attenuationDb: 30 })
    expect(stop.value).toBeCloseTo(loss(order, 300), 9)
    expect(stop.margin).toBeCloseTo(loss(order, 300) - 30, 9)
    expect(stop.worstHz).toBe(300)
    expect(stop.met).toBe(order > 2)
    expect(checkRequirement(design, { kind: 'keep-tone', hz: 60, withinDb: 1 }).value).toBeCloseTo(loss(order, 60), 9)
    expect(checkRequirement(design, { kind: 'lose-tone', hz: 250, attenuationDb: 1 }).value).toBeCloseTo(
      loss(order, 250),
      9,
    )
  })

  it('reach up to half the rate when a stop line has no end', () => {
    const design = judged({
      family: 'elliptic',
      response: 'lowpass',
      order: 5,
      edgesHz: [100],
      rippleDb: 0.5,
      attenuationDb: 50,
    })
    const line: Requirement = { kind: 'stop', fromHz: 200, attenuationDb: 50 }
    const stop = checkRequirement(design, line)
    expect(stop.value).toBeCloseTo(50, 6)
    expect(stop.met).toBe(true)
  })

  it('are met when met exactly', () => {
    const corner = checkRequirement(judged(butterworth(4)), {
      kind: 'pass',
      fromHz: 0,
      toHz: 100,
      withinDb: 10 * Math.log10(2),
    })
    expect(corner).toMatchObject({ met: true, worstHz: 100 })
    expect(corner.margin).toBeGreaterThanOrEqual(0)
    expect(corner.margin).toBeLessThan(1e-9)
  })

  it('see a notch a ten-thousandth of the pass band wide', () => {
    // Zeros on the circle at 123.4567 Hz, poles just inside: 40 dB deep only within ±0.0002 Hz of it.
    const angle = (2 * Math.PI * 123.4567) / RATE
    const r = 1 - 1e-5
    const [b1, a1] = [-2 * Math.cos(angle), -2 * r * Math.cos(angle)]
    const root = (radius: number) => [
      { re: radius * Math.cos(angle), im: radius * Math.sin(angle) },
      { re: radius * Math.cos(angle), im: -radius * Math.sin(angle) },
    ]
    const notch = byHand({
      zeros: root(1),
      poles: root(r),
      gain: 1,
      sections: [{ b0: 1, b1, b2: 1, a1, a2: r * r }],
    })
    const pass = checkRequirement(notch, { kind: 'pass', fromHz: 1, toHz: 400, withinDb: 1 })
    expect(pass.met).toBe(false)
    expect(pass.value).toBeGreaterThan(100)
    expect(pass.worstHz).toBeCloseTo(123.4567, 6)
    // Beside the notch, H ≈ x/(x + j·d) with d = 1e-5/2π of the rate: the loss there is 10·lg(1 + (d/x)²).
    const aside = checkRequirement(notch, { kind: 'pass', fromHz: 123.4567 + 0.01, toHz: 400, withinDb: 1 })
    expect(aside.value).toBeCloseTo(10 * Math.log10(1 + (((1e-5 / (2 * Math.PI)) * RATE) / 0.01) ** 2), 3)
  })

  it('find every ripple of a steep elliptic filter, and the worst to nine digits', () => {
    for (const [order, rippleDb] of [
      [9, 1],
      [12, 0.1],
      [15, 2],
    ] as const) {
      const spec: AnalogSpec = {
        family: 'elliptic',
        response: 'lowpass',
        order,
        edgesHz: [100],
        rippleDb,
        attenuationDb: 80,
      }
      const design = judged(spec)
      const ripple = checkRequirement(design, { kind: 'pass', fromHz: 0, toHz: 99.9, withinDb: rippleDb })
      expect(ripple.value).toBeCloseTo(rippleDb, 7)
      const floor = checkRequirement(design, { kind: 'stop', fromHz: 150, attenuationDb: 80 })
      expect(floor.value).toBeCloseTo(80, 5)
    }
  })

  it('are never better than a grid a hundred times finer shows', () => {
    fc.assert(
      fc.property(
        fc.constantFrom('chebyshev1', 'chebyshev2', 'elliptic', 'bessel' as const),
        fc.integer({ min: 1, max: 10 }),
        fc.double({ min: 5, max: 200, noNaN: true }),
        fc.double({ min: 1.1, max: 1.9, noNaN: true }),
        (family, order, low, ratio) => {
          const spec: AnalogSpec = {
            family,
            response: 'bandpass',
            order,
            edgesHz: [low, low * ratio],
            rippleDb: 0.5,
            attenuationDb: 45,
          }
          const design = judged(spec)
          const [fromHz, toHz] = [low * 1.01, low * ratio * 0.995]
          const found = checkRequirement(design, { kind: 'pass', fromHz, toHz, withinDb: 0.5 })
          const at = Float64Array.from({ length: 12_000 }, (_, n) => fromHz + ((toHz - fromHz) * n) / 11_999)
          const { re, im } = frequencyResponse(design.digital as DigitalFilter, at)
          const dense = at.reduce(
            (most, _, n) => Math.max(most, Math.abs(20 * Math.log10(Math.hypot(re[n]!, im[n]!)))),
            0,
          )
          expect(found.value).toBeGreaterThanOrEqual(dense - 1e-9 * Math.max(1, dense))
        },
      ),
      { numRuns: 25 },
    )
  })
})

describe('lines of delay', () => {
  it('are those of the one-pole formula', () => {
    // y = (1 − r)·x + r·y₁: group delay r·(cos ω − r)/(1 − 2r·cos ω + r²) samples.
    const r = 0.8
    const onePole = byHand({
      zeros: [{ re: 0, im: 0 }],
      poles: [{ re: r, im: 0 }],
      gain: 1 - r,
      sections: [{ b0: 1 - r, b1: 0, b2: 0, a1: -r, a2: 0 }],
    })
    const delay = (hz: number) => {
      const c = Math.cos((2 * Math.PI * hz) / RATE)
      return (r * (c - r)) / (1 - 2 * r * c + r * r) / RATE
    }
    const most = checkRequirement(onePole, { kind: 'delay', fromHz: 10, toHz: 100, atMostSeconds: 0.004 })
    expect(most.value).toBeCloseTo(delay(10), 12)
    expect(most).toMatchObject({ worstHz: 10, unit: 's', met: true })
    const one = checkRequirement(onePole, { kind: 'delay', fromHz: 50, toHz: 50, atMostSeconds: 0.001 })
    expect(one.value).toBeCloseTo(delay(50), 12)
    expect(one.met).toBe(false)
    const spread = checkRequirement(onePole, { kind: 'delay-spread', fromHz: 0, toHz: 100, atMostSeconds: 0.004 })
    expect(spread.value).toBeCloseTo(delay(0) - delay(100), 12)
  })

  it('find the peak of the delay between its grid points', () => {
    const spec: AnalogSpec = { family: 'chebyshev1', response: 'lowpass', order: 8, edgesHz: [100], rippleDb: 1 }
    const design = judged(spec)
    const found = checkRequirement(design, { kind: 'delay', fromHz: 0, toHz: 120, atMostSeconds: 1 })
    const at = Float64Array.from({ length: 200_000 }, (_, n) => 95 + (10 * n) / 199_999)
    const dense = groupDelay(design.digital as DigitalFilter, at).reduce((most, value) => Math.max(most, value), 0)
    expect(found.value).toBeGreaterThanOrEqual(dense - 1e-15)
    expect(found.value).toBeCloseTo(dense, 9)
  })
})

describe('lines of the step response', () => {
  it('have the overshoot of a second-order system, e^(−πζ/√(1−ζ²))', () => {
    // Step-invariant: the digital step response is the analog one at its instants. Butterworth of order 2: ζ = 1/√2, 4.32 %.
    const design = judged(butterworth(2, 10), { method: 'step-invariant' }, 20_000)
    const over = checkRequirement(design, { kind: 'overshoot', atMostPercent: 5 })
    expect(over.value).toBeCloseTo(100 * Math.exp(-Math.PI), 3)
    expect(over).toMatchObject({ met: true, unit: '%', curve: 'step', worstHz: null })
    expect(checkRequirement(design, { kind: 'overshoot', atMostPercent: 4 }).met).toBe(false)
  })

  it('settle as a one-pole filter does, after ln(1/p)/ωc', () => {
    const design = judged(butterworth(1, 10), { method: 'step-invariant' }, 20_000)
    for (const percent of [0.5, 2, 10]) {
      const found = checkRequirement(design, { kind: 'settling', atMostSeconds: 1, withinPercent: percent })
      const exact = Math.log(100 / percent) / (2 * Math.PI * 10)
      expect(found.value).toBeGreaterThanOrEqual(exact - 1e-12)
      expect(found.value).toBeLessThan(exact + 1.001 / 20_000)
    }
  })

  it('are measured by the step itself where 0 Hz is blocked', () => {
    // A first-order high-pass falls from near 1 to 0 without passing it.
    const first = judged({ ...butterworth(1, 10), response: 'highpass' }, bilinear, 20_000)
    expect(checkRequirement(first, { kind: 'overshoot', atMostPercent: 1 }).value).toBeCloseTo(0, 6)
    const second = judged({ ...butterworth(2, 10), response: 'highpass' }, bilinear, 20_000)
    // s/(s² + √2·s + 1): e^(−t/√2)·(cos(t/√2) − sin(t/√2)), least where t/√2 = π/2: −e^(−π/2).
    expect(checkRequirement(second, { kind: 'overshoot', atMostPercent: 30 }).value).toBeCloseTo(
      100 * Math.exp(-Math.PI / 2),
      1,
    )
  })
})

describe('lines of departure', () => {
  it('are the warping of the bilinear transform for a first-order low-pass', () => {
    const design = judged(butterworth(1))
    const phase = (x: number) => (Math.atan(x) * 180) / Math.PI
    const exact = Math.abs(phase(warped(80) / warped(100)) - phase(80 / 100))
    const found = checkRequirement(design, {
      kind: 'phase-departure',
      upToHz: 200,
      withinDegrees: 90,
      removeDelay: false,
    })
    const at80 = checkRequirement(design, { kind: 'phase-departure', upToHz: 80, withinDegrees: 5, removeDelay: false })
    expect(at80.value).toBeGreaterThanOrEqual(exact - 1e-9)
    expect(found.value).toBeGreaterThanOrEqual(phase(warped(200) / warped(100)) - phase(2) - 1e-9)
    expect(found).toMatchObject({ unit: '°', curve: 'departure', worstHz: 200 })
    const level = checkRequirement(design, { kind: 'magnitude-departure', upToHz: 200, withinDb: 1 })
    expect(level.value).toBeCloseTo(loss(1, 200) - 10 * Math.log10(5), 9)
  })

  it('shrink when the best delay is taken off', () => {
    const design = judged(butterworth(4), { method: 'matched-z' })
    const line = { kind: 'phase-departure', upToHz: 100, withinDegrees: 5 } as const
    const plain = checkRequirement(design, { ...line, removeDelay: false })
    const freed = checkRequirement(design, { ...line, removeDelay: true })
    expect(freed.value).toBeLessThan(plain.value / 2)
  })
})

describe('FIR filters', () => {
  const design = designFromSpec({
    format: 1,
    sampleRateHz: RATE,
    budget: { magnitudeDb: 0.1, phaseDegrees: 1, removeDelay: true },
    fir: {
      kind: 'windowed',
      window: 'hamming',
      response: 'lowpass',
      taps: 41,
      bands: [
        { fromHz: 0, toHz: 100, gain: 1 },
        { fromHz: 200, toHz: 500, gain: 0 },
      ],
    },
  })

  it('have a constant delay of 20 samples, no departure in phase from their ideal, and half the multiplies', () => {
    expect(checkRequirement(design, { kind: 'delay', fromHz: 0, toHz: 90, atMostSeconds: 0.1 }).value).toBeCloseTo(
      0.02,
      12,
    )
    expect(checkRequirement(design, { kind: 'delay-spread', fromHz: 0, toHz: 90, atMostSeconds: 1 }).value).toBeCloseTo(
      0,
      12,
    )
    const phase = checkRequirement(design, {
      kind: 'phase-departure',
      upToHz: 90,
      withinDegrees: 1,
      removeDelay: false,
    })
    expect(phase.value).toBeCloseTo(0, 6)
    expect(phase.reason).toMatch(/ideal/)
    expect(checkRequirement(design, { kind: 'cost', atMostMultiplies: 21 })).toMatchObject({ met: true })
  })

  it('depart from their ideal in level as far as they ripple', () => {
    const pass = checkRequirement(design, { kind: 'pass', fromHz: 0, toHz: 90, withinDb: 1 })
    const level = checkRequirement(design, { kind: 'magnitude-departure', upToHz: 90, withinDb: 1 })
    expect(level.value).toBeCloseTo(pass.value, 9)
  })

  it('have settled for good after their last tap', () => {
    const found = checkRequirement(design, { kind: 'settling', atMostSeconds: 1, withinPercent: 0.001 })
    expect(found.value).toBeLessThanOrEqual(0.041)
    expect(found.value).toBeGreaterThan(0.02)
  })
})

describe('lines of cost and word length', () => {
  it('count five multiplies for each full section', () => {
    const cost: Requirement = { kind: 'cost', atMostMultiplies: 14 }
    const elliptic: AnalogSpec = {
      family: 'elliptic',
      response: 'lowpass',
      order: 6,
      edgesHz: [100],
      rippleDb: 1,
      attenuationDb: 60,
    }
    expect(checkRequirement(judged(elliptic), cost)).toMatchObject({
      value: 15,
      margin: -1,
      met: false,
      unit: 'multiplies',
    })
  })

  it('are the change that rounding makes, computed by hand for one pole', () => {
    // r = 0.8 held in 4 bits: unit 2^-3, so 6/8 = 0.75; 1 − r = 0.2: unit 2^-5, 6/32 = 0.1875. At 0 Hz 0.1875/0.25 = 0.75.
    const r = 0.8
    const onePole = byHand({
      zeros: [{ re: 0, im: 0 }],
      poles: [{ re: r, im: 0 }],
      gain: 1 - r,
      sections: [{ b0: 1 - r, b1: 0, b2: 0, a1: -r, a2: 0 }],
    })
    const line: Requirement = { kind: 'word-length', bits: 4, withinDb: 3 }
    const alone = checkRequirement(onePole, line, [line, { kind: 'keep-tone', hz: 1e-6, withinDb: 1 }])
    expect(alone.value).toBeCloseTo(-20 * Math.log10(0.75), 9)
    expect(checkRequirement(onePole, { ...line, bits: 53 }).value).toBeLessThan(1e-12)
  })

  it('refuse words in which the filter is unstable', () => {
    const design = judged(butterworth(2, 0.5))
    const found = checkRequirement(design, { kind: 'word-length', bits: 6, withinDb: 1 })
    expect(found.met).toBe(false)
    expect(found.reason).toMatch(/unstable/)
  })
})

describe('lines that can’t be judged', () => {
  it('are not met and say why', () => {
    const sheet: Requirement[] = [
      { kind: 'pass', fromHz: 0, toHz: 600, withinDb: 1 },
      { kind: 'stop', fromHz: 500, attenuationDb: 10 },
      { kind: 'phase-departure', upToHz: 501, withinDegrees: 1, removeDelay: true },
      { kind: 'delay', fromHz: 100, toHz: 50, atMostSeconds: 1 },
    ]
    for (const result of checkSheet(judged(butterworth(2)), sheet)) {
      expect(result.met).toBe(false)
      expect(result.reason).toMatch(/Hz/)
      expect(Number.isNaN(result.margin) || Number.isNaN(result.value)).toBe(false)
    }
  })
})
