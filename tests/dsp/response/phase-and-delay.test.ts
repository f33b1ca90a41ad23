import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  frequencyResponse,
  groupDelay,
  magnitudeDb,
  parallelResponse,
  phaseDelay,
  phaseResponse,
  zeroPhaseMagnitudeDb,
  DesignError,
  discretize,
  type Complex,
} from '@/dsp'
import {
  analog,
  bilinearLowpass,
  butterworthHighpass,
  butterworthLowpass,
  digital,
  many,
  pair,
} from '@/tests/helpers/root-filters'

const grid = (from: number, to: number, count: number) =>
  Float64Array.from({ length: count }, (_, i) => from + ((to - from) * i) / (count - 1))

/** Random real stable digital filters: up to 5 pole pairs and as many zeros, on the circle, inside or outside. */
const stable = fc
  .array(
    fc.record({
      radius: fc.double({ min: 0.05, max: 0.98, noNaN: true }),
      angle: fc.double({ min: 0.05, max: 3.05, noNaN: true }),
      zeroRadius: fc.oneof(fc.constant(1), fc.double({ min: 0.1, max: 3, noNaN: true })),
      zeroAngle: fc.double({ min: 0.05, max: 3.05, noNaN: true }),
    }),
    { minLength: 1, maxLength: 5 },
  )
  .map((parts) => {
    const at = (radius: number, angle: number): Complex[] => pair(radius * Math.cos(angle), radius * Math.sin(angle))
    return digital(
      parts.flatMap(({ zeroRadius, zeroAngle }) => at(zeroRadius, zeroAngle)),
      parts.flatMap(({ radius, angle }) => at(radius, angle)),
      0.7,
      1000,
    )
  })

describe('phaseResponse', () => {
  it('is continuous: from one point to the next of a fine grid only zeros on the circle step it, by +π', () => {
    fc.assert(
      fc.property(stable, (filter) => {
        const frequencies = grid(0, 1500, 6001)
        const phase = phaseResponse(filter, frequencies)
        const delay = groupDelay(filter, frequencies)
        let worst = 0
        for (let n = 1; n < phase.length; n++) {
          const step = phase[n]! - phase[n - 1]!
          const omega = 2 * Math.PI * (frequencies[n]! - frequencies[n - 1]!)
          const bend = Math.abs(delay[n]! - delay[n - 1]!) + Math.abs(delay[n]! + delay[n - 1]!)
          const steps = Math.round(step / Math.PI)
          // Whole steps up are zeros on the circle passed; what is left is the delay's share.
          worst = Math.max(worst, Math.abs(step - Math.max(steps, 0) * Math.PI) - omega * bend)
        }
        expect(worst).toBeLessThan(0.6)
      }),
      { numRuns: 60 },
    )
  })

  it('has the angle of the complex response everywhere, also beyond half the rate and at negative frequencies', () => {
    fc.assert(
      fc.property(stable, fc.double({ min: -2400, max: 2400, noNaN: true }), (filter, hertz) => {
        const { re, im } = frequencyResponse(filter, [hertz])
        if (Math.hypot(re[0]!, im[0]!) < 1e-9) return
        const turns = (phaseResponse(filter, [hertz])[0]! - Math.atan2(im[0]!, re[0]!)) / (2 * Math.PI)
        expect(Math.abs(turns - Math.round(turns))).toBeLessThan(1e-8)
      }),
    )
  })

  it('starts at a quarter turn for each zero at DC, and comes down to 0 far above', () => {
    const filter = butterworthHighpass(5, 10)
    const phase = phaseResponse(filter, [0, 1e-9, 1e9])
    expect(phase[0]).toBeCloseTo((5 * Math.PI) / 2, 12)
    expect(phase[1]).toBeCloseTo((5 * Math.PI) / 2, 6)
    expect(phase[2]).toBeCloseTo(0, 6)
  })

  it('is that of a pure delay for zeros and poles at the origin only', () => {
    const filter = digital([], many(0, 3), 1, 100)
    const frequencies = grid(0, 130, 14)
    const phase = phaseResponse(filter, frequencies)
    frequencies.forEach((hertz, n) => expect(phase[n]).toBeCloseTo(-2 * Math.PI * hertz * 0.03, 12))
    expect(groupDelay(filter, frequencies).every((delay) => Math.abs(delay - 0.03) < 1e-15)).toBe(true)
  })
})

describe('groupDelay', () => {
  it('is −dφ/dω of the phase, to the accuracy of a central difference', () => {
    fc.assert(
      fc.property(stable, fc.double({ min: 1, max: 499, noNaN: true }), (filter, hertz) => {
        const h = 1e-4
        const [below, above] = phaseResponse(filter, [hertz - h, hertz + h])
        const difference = -(above! - below!) / (2 * Math.PI * 2 * h)
        if (Math.abs(above! - below!) > 1) return // a zero on the circle lies between
        const scale = 1e-3 * (1 + Math.abs(difference) * 1000)
        expect(Math.abs(groupDelay(filter, [hertz])[0]! - difference)).toBeLessThan(scale * 1e-2)
      }),
    )
  })

  it('has no spike at a zero on the circle: the pair takes away one sample at every frequency', () => {
    const poles = pair(0.5, 0.3)
    const angle = 0.7
    const plain = digital([], poles, 1, 1)
    const notched = digital(pair(Math.cos(angle), Math.sin(angle)), poles, 1, 1)
    const at = angle / (2 * Math.PI)
    const frequencies = [0, 0.05, at - 1e-9, at, at + 1e-9, 0.4, 0.5]
    const without = groupDelay(plain, frequencies)
    groupDelay(notched, frequencies).forEach((delay, n) => expect(delay).toBeCloseTo(without[n]! - 1, 12))
  })

  it('of an analog low-pass at DC is the sum of −σ/|p|², in seconds', () => {
    // Butterworth order 2 at ω: √2/ω (Zverev, Handbook of Filter Synthesis, 1967, ch. 3: the coefficient of s).
    const w = 2 * Math.PI * 50
    expect(groupDelay(butterworthLowpass(2, 50), [0])[0]).toBeCloseTo(Math.SQRT2 / w, 15)
  })
})

describe('phaseDelay', () => {
  it('is the group delay at 0 Hz, and −φ/ω elsewhere', () => {
    const filter = bilinearLowpass(4, 100, 1000)
    const [atZero, at50] = phaseDelay(filter, [0, 50])
    expect(atZero).toBe(groupDelay(filter, [0])[0])
    expect(at50).toBeCloseTo(-phaseResponse(filter, [50])[0]! / (2 * Math.PI * 50), 15)
  })

  it('is infinite, not NaN, at DC where the phase is not 0 there', () => {
    expect(phaseDelay(butterworthHighpass(1, 10), [0])[0]).toBe(-Infinity)
  })
})

describe('magnitudeDb', () => {
  it('is −Infinity at zeros on the axis and the circle, and never NaN', () => {
    const w = 2 * Math.PI * 50
    const notch = analog(pair(0, w), pair(-30, w), 1)
    expect(magnitudeDb(notch, [50])[0]).toBe(-Infinity)
    expect(magnitudeDb(butterworthHighpass(3, 10), [0])[0]).toBe(-Infinity)
    expect(magnitudeDb(bilinearLowpass(4, 100, 1000), [500])[0]).toBe(-Infinity)
    expect(frequencyResponse(bilinearLowpass(4, 100, 1000), [500])).toEqual({
      re: Float64Array.of(0),
      im: Float64Array.of(0),
    })
  })

  it('reaches levels whose magnitude a double can’t hold', () => {
    // Asymptote of a Butterworth filter: −20·n·lg(f/fc) dB.
    expect(magnitudeDb(butterworthLowpass(24, 1), [1e20])[0]).toBeCloseTo(-20 * 24 * 20, 6)
  })

  it('is doubled by running forward and backward', () => {
    const filter = bilinearLowpass(2, 100, 1000)
    expect(zeroPhaseMagnitudeDb(filter, [100])[0]).toBeCloseTo(-6.0206, 4)
  })

  it('at −3.0103 dB lies the corner of Butterworth filters of every order', () => {
    for (let order = 1; order <= 24; order++) {
      expect(magnitudeDb(butterworthLowpass(order, 70), [70])[0]).toBeCloseTo(-10 * Math.log10(2), 10)
      expect(magnitudeDb(bilinearLowpass(order, 70, 1000), [70])[0]).toBeCloseTo(-10 * Math.log10(2), 10)
    }
  })
})

describe('the image above half the rate', () => {
  it('mirrors the response: H(fs − f) is the conjugate of H(f)', () => {
    fc.assert(
      fc.property(stable, fc.double({ min: 0, max: 500, noNaN: true }), (filter, hertz) => {
        const { re, im } = frequencyResponse(filter, [hertz, 1000 - hertz])
        const size = Math.hypot(re[0]!, im[0]!)
        expect(Math.hypot(re[1]! - re[0]!, im[1]! + im[0]!)).toBeLessThan(1e-9 * size + 1e-12)
      }),
    )
  })
})

describe('parallelResponse', () => {
  it('agrees with the roots in the pass band, and within the rounding of its residues below it', () => {
    const filter = discretize({ family: 'butterworth', response: 'lowpass', order: 6, edgesHz: [100] }, 1000, {
      method: 'impulse-invariant',
    })
    expect(filter.parallel).toBeDefined()
    const frequencies = grid(0, 500, 26)
    const sum = parallelResponse(filter.parallel!, 1000, frequencies)
    const product = frequencyResponse(filter, frequencies)
    frequencies.forEach((_, n) => {
      expect(Math.hypot(sum.re[n]! - product.re[n]!, sum.im[n]! - product.im[n]!)).toBeLessThan(1e-13)
    })
  })
})

describe('refusals', () => {
  const filter = bilinearLowpass(2, 100, 1000)
  it.each([frequencyResponse, magnitudeDb, phaseResponse, groupDelay, phaseDelay])(
    'name the index of a frequency that is no number (%o)',
    (evaluate) => {
      expect(() => evaluate(filter, [1, Number.NaN])).toThrow(DesignError)
      expect(() => evaluate(filter, [1, Number.NaN])).toThrow(/index 1/)
      expect(() => evaluate(filter, [Infinity])).toThrow(/index 0/)
    },
  )
  it('a filter whose complex roots don’t pair isn’t real', () => {
    expect(() => frequencyResponse(analog([], [{ re: -1, im: 1 }], 1), [1])).toThrow(/conjugate pairs/)
  })
})
