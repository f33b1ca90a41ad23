import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  linearScale,
  logScale,
  pannedDomain,
  pinchedDomain,
  scaleOf,
  valuePerPixel,
  zoomedDomain,
} from '@/components/plot/scale'

const limits = { least: 1e-6, most: 1e9, smallest: 1.01 }
const kind = fc.constantFrom('linear' as const, 'log' as const)
const span = fc.tuple(fc.double({ min: 1e-3, max: 1e4, noNaN: true }), fc.double({ min: 1.5, max: 1e5, noNaN: true }))

describe('scales', () => {
  it('undo themselves', () => {
    fc.assert(
      fc.property(kind, span, fc.double({ min: 0, max: 900, noNaN: true }), (name, [from, ratio], pixel) => {
        const scale = scaleOf(name, [from, from * ratio], [56, 946])
        expect(scale.toPixel(scale.toValue(pixel))).toBeCloseTo(pixel, 6)
      }),
    )
  })

  it('put the ends of the domain at the ends of the range, downwards too', () => {
    const scale = linearScale([-60, 6], [200, 4])
    expect(scale.toPixel(-60)).toBe(200)
    expect(scale.toPixel(6)).toBe(4)
    expect(scale.toPixel(Number.NEGATIVE_INFINITY)).toBe(Number.POSITIVE_INFINITY)
  })

  it('refuse domains they have no pixels for, and say what helps', () => {
    expect(() => logScale([0, 100], [0, 1])).toThrow(/linear scale/)
    expect(() => linearScale([5, 5], [0, 1])).toThrow(/two different/)
    expect(() => linearScale([0, Number.NaN], [0, 1])).toThrow(RangeError)
  })

  it('keep the value under the pointer while zooming', () => {
    fc.assert(
      fc.property(
        kind,
        span,
        fc.double({ min: 60, max: 940, noNaN: true }),
        fc.double({ min: 0.3, max: 3, noNaN: true }),
        (name, [from, ratio], around, factor) => {
          const scale = scaleOf(name, [from, from * ratio], [56, 946])
          const domain = zoomedDomain(scale, factor, around, {
            least: Number.NEGATIVE_INFINITY,
            most: Number.POSITIVE_INFINITY,
            smallest: 0,
          })
          if (name === 'log' && domain[0] <= 0) return
          const zoomed = scaleOf(name, domain, [56, 946])
          expect(zoomed.toPixel(scale.toValue(around))).toBeCloseTo(around, 5)
        },
      ),
    )
  })

  it('zoom no further than the smallest span, nor past the limits', () => {
    const scale = logScale([100, 101.5], [0, 900])
    expect(zoomedDomain(scale, 0.1, 450, limits)).toEqual([100, 101.5])
    expect(zoomedDomain(logScale([1, 1e8], [0, 900]), 50, 450, limits)).toEqual([limits.least, limits.most])
  })

  it('pan by exactly the pixels pulled, and stop at the limits with the span unchanged', () => {
    const scale = logScale([10, 1000], [0, 900])
    const [from, to] = pannedDomain(scale, 450, limits)
    expect(from).toBeCloseTo(1, 9)
    expect(to).toBeCloseTo(100, 9)
    const linear = linearScale([100, 400], [0, 900])
    expect(pannedDomain(linear, 900, { least: 0, most: 1e9, smallest: 1 })).toEqual([0, 300])
  })

  it('hold two values under two fingers', () => {
    const scale = logScale([10, 1000], [0, 900])
    const domain = pinchedDomain(scale, { value: 50, pixel: 200 }, { value: 200, pixel: 700 }, limits)
    const pinched = logScale(domain, [0, 900])
    expect(pinched.toPixel(50)).toBeCloseTo(200, 6)
    expect(pinched.toPixel(200)).toBeCloseTo(700, 6)
    expect(pinchedDomain(scale, { value: 50, pixel: 200 }, { value: 51, pixel: 203 }, limits)).toEqual([10, 1000])
  })

  it('say what a pixel is worth', () => {
    expect(valuePerPixel(linearScale([0, 90], [0, 900]), 450)).toBeCloseTo(0.1, 12)
    const log = logScale([10, 1000], [0, 900])
    expect(valuePerPixel(log, 900) / valuePerPixel(log, 0)).toBeCloseTo(100, 6)
  })
})
