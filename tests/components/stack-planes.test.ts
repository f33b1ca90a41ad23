import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { rootRows, rootText } from '@/components/studio/planes/describe'
import { PLANE_SIZE, sPlaneFrame, unitCircle, zPlaneFrame } from '@/components/studio/planes/plane-frames'
import { ellipseThrough, grouped } from '@/components/studio/planes/root-groups'
import { designAnalog, type AnalogSpec } from '@/dsp'

const low = (change: Partial<AnalogSpec>): AnalogSpec => ({
  family: 'butterworth',
  response: 'lowpass',
  order: 5,
  edgesHz: [120],
  ...change,
})

describe('roots as marks', () => {
  it('count those that fall on one place', () => {
    const roots = [
      { re: -1, im: 0 },
      { re: -1 + 1e-12, im: 0 },
      { re: 0.5, im: 0.5 },
    ]
    expect(grouped(roots).map(({ multiplicity }) => multiplicity)).toEqual([2, 1])
  })

  it('list a conjugate pair once, with ±', () => {
    const rows = rootRows({
      poles: [
        { re: -3, im: 4 },
        { re: -3, im: -4 },
        { re: -1, im: 0 },
      ],
      zeros: [],
    })
    expect(rows.map(({ text }) => text)).toEqual(['−3 ± 4j', '−1'])
    expect(rows[0]?.modulus).toBe(5)
    expect(rootText({ re: 0.5, im: -0.25 })).toBe('0.5 − 0.25j')
  })
})

describe('the ellipse that poles lie on', () => {
  it('is the circle at the corner for Butterworth', () => {
    const ellipse = ellipseThrough(designAnalog(low({})).poles)
    expect(ellipse?.sigma).toBeCloseTo(2 * Math.PI * 120, 6)
    expect(ellipse?.omega).toBeCloseTo(2 * Math.PI * 120, 6)
  })

  it('has the half axes sinh and cosh of arsinh(1/ε)/N for Chebyshev I', () => {
    // Poles of the Chebyshev I low-pass: any textbook on analog filters, e.g. Zverev 1967.
    const epsilon = Math.sqrt(10 ** 0.1 - 1)
    const mu = Math.asinh(1 / epsilon) / 6
    const ellipse = ellipseThrough(designAnalog(low({ family: 'chebyshev1', rippleDb: 1, order: 6 })).poles)
    expect((ellipse?.sigma ?? 0) / (2 * Math.PI * 120)).toBeCloseTo(Math.sinh(mu), 6)
    expect((ellipse?.omega ?? 0) / (2 * Math.PI * 120)).toBeCloseTo(Math.cosh(mu), 6)
  })

  it('is not drawn where there is none', () => {
    expect(ellipseThrough(designAnalog(low({ family: 'bessel', order: 7 })).poles)).toBeNull()
    expect(ellipseThrough(designAnalog(low({ response: 'bandpass', edgesHz: [50, 200], order: 3 })).poles)).toBeNull()
    expect(ellipseThrough([])).toBeNull()
  })
})

describe('plane frames', () => {
  it('hold every pole of any prototype', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 24 }),
        fc.constantFrom('butterworth' as const, 'bessel' as const),
        (order, family) => {
          const { poles, zeros } = designAnalog(low({ order, family }))
          const frame = sPlaneFrame({ poles, zeros })
          for (const pole of poles) {
            expect(frame.x(pole.re)).toBeGreaterThanOrEqual(0)
            expect(frame.x(pole.re)).toBeLessThanOrEqual(PLANE_SIZE)
            expect(frame.y(pole.im)).toBeGreaterThanOrEqual(0)
            expect(frame.y(pole.im)).toBeLessThanOrEqual(PLANE_SIZE)
          }
        },
      ),
    )
  })

  it('come close to poles that huddle at z = 1', () => {
    const poles = [
      { re: 0.9999, im: 0.0002 },
      { re: 0.9999, im: -0.0002 },
      { re: 0.9997, im: 0 },
    ]
    const frame = zPlaneFrame(poles, 'poles')
    const [first, , last] = poles.map((pole) => frame.x(pole.re))
    expect((first ?? 0) - (last ?? 0)).toBeGreaterThan(20)
    expect(unitCircle(frame)).toMatch(/^M[-\d.]+ 0V192$/)
    expect(unitCircle(zPlaneFrame(poles, 'circle'))).toContain('A73.85 73.85')
  })
})
