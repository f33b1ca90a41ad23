import { describe, expect, it } from 'vitest'
import {
  designAnalog,
  discretize,
  minimumOrder,
  DesignError,
  type AnalogSpec,
  type Family,
  type OrderRequirement,
} from '@/dsp'
import textbook from '../reference/textbook_examples.json'
import { analogAt, decibels, digitalAt } from '../helpers/dsp'

const FAMILIES: readonly Family[] = [
  'butterworth',
  'chebyshev1',
  'chebyshev2',
  'elliptic',
  'bessel',
  'critically-damped',
]

const example = (id: string) => {
  const found = textbook.examples.find((entry) => entry.id === id)
  if (found === undefined) throw new Error(`no example ${id}`)
  return found
}

/** Level at a frequency of the filter that a least order leads to. */
function levelOf(
  family: Family,
  need: OrderRequirement,
  order: number,
  edgesHz: readonly number[],
): (hz: number) => number {
  const { response } = minimumOrder(family, need)
  const spec: AnalogSpec = {
    family,
    response,
    order,
    edgesHz: [...edgesHz],
    rippleDb: need.rippleDb,
    attenuationDb: need.attenuationDb,
  }
  const rate = need.sampleRateHz
  if (rate === undefined) {
    const filter = designAnalog(spec)
    return (hz) => decibels(analogAt(filter, hz))
  }
  const filter = discretize(spec, rate, { method: 'bilinear', hold: 'edges' })
  return (hz) => decibels(digitalAt(filter, (2 * Math.PI * hz) / rate))
}

const listOf = (edges: number | readonly number[]) => (typeof edges === 'number' ? [edges] : edges)

const NEEDS: readonly OrderRequirement[] = [
  { passHz: 100, stopHz: 400, rippleDb: 3, attenuationDb: 20 },
  { passHz: 100, stopHz: 25, rippleDb: 3, attenuationDb: 18 },
  { passHz: [100, 200], stopHz: [40, 420], rippleDb: 1, attenuationDb: 9 },
  { passHz: [100, 800], stopHz: [280, 300], rippleDb: 3, attenuationDb: 20 },
  { passHz: 100, stopHz: 400, rippleDb: 2, attenuationDb: 22, sampleRateHz: 1000 },
  { passHz: 300, stopHz: 100, rippleDb: 2, attenuationDb: 20, sampleRateHz: 1000 },
  { passHz: [100, 200], stopHz: [30, 400], rippleDb: 2, attenuationDb: 11, sampleRateHz: 1000 },
  { passHz: [50, 450], stopHz: [180, 220], rippleDb: 3, attenuationDb: 20, sampleRateHz: 1000 },
]

describe('least order', () => {
  it('is 14, 8, 8, 6 for the comparison of Oppenheim & Schafer', () => {
    // tests/reference/textbook_examples.json, os_order_comparison: 0.99…1.01 to 0.4π, 0.001 from 0.6π.
    const { inputs, results } = example('os_order_comparison')
    const need = {
      passHz: 400,
      stopHz: 600,
      sampleRateHz: 2000,
      rippleDb: Number(inputs.ripple_db),
      attenuationDb: Number(inputs.attenuation_db),
    }
    for (const family of ['butterworth', 'chebyshev1', 'chebyshev2', 'elliptic'] as const) {
      expect(minimumOrder(family, need).order, family).toBe(results[family])
    }
  })

  it('is 6 for the Butterworth examples of Oppenheim & Schafer, with the printed corner when the pass edge is met', () => {
    // os_impulse_invariance_butterworth: analog, Td = 1: corner 0.70320445 rad.
    const requirement = {
      passHz: 0.2 / 2,
      stopHz: 0.3 / 2,
      rippleDb: -20 * Math.log10(0.89125),
      attenuationDb: -20 * Math.log10(0.17783),
    }
    const analog = minimumOrder('butterworth', requirement)
    expect(analog.order).toBe(6)
    expect(analog.metExactly).toBe('pass')
    expect(2 * Math.PI * (analog.edgesHz[0] ?? 0)).toBeCloseTo(0.70320445, 7)
    // os_bilinear_butterworth
    expect(minimumOrder('butterworth', { ...requirement, sampleRateHz: 1 }).order).toBe(6)
  })

  describe.each(FAMILIES)('%s', (family) => {
    it.each(NEEDS)(
      'meets $passHz / $stopHz Hz at rate $sampleRateHz, one edge exactly, and no lower order does',
      (need) => {
        const least = minimumOrder(family, need)
        const level = levelOf(family, need, least.order, least.edgesHz)
        const pass = listOf(need.passHz).map(level)
        const stop = listOf(need.stopHz).map(level)
        expect(Math.min(...pass)).toBeGreaterThan(-need.rippleDb - 1e-7)
        expect(Math.max(...stop)).toBeLessThan(-need.attenuationDb + 1e-7)
        // Exactly: at the tighter edge of the pair.
        if (least.metExactly === 'pass') expect(Math.min(...pass)).toBeCloseTo(-need.rippleDb, 6)
        else expect(Math.max(...stop)).toBeCloseTo(-need.attenuationDb, 6)
        expect(least.room.at).toBe(least.metExactly === 'pass' ? 'stop' : 'pass')
        expect(least.room.db).toBeGreaterThanOrEqual(0)
        if (least.room.at === 'stop' && family !== 'elliptic') {
          expect(Math.max(...stop)).toBeCloseTo(-need.attenuationDb - least.room.db, 6)
        }
        if (least.room.at === 'pass') expect(Math.min(...pass)).toBeCloseTo(-need.rippleDb + least.room.db, 6)

        if (least.order === 1) return
        // With one order less, the same edge met exactly leaves the other one missed.
        const widened = { ...need, attenuationDb: need.attenuationDb + least.room.db + 1e-3 }
        if (least.room.at === 'stop') {
          const next = (() => {
            try {
              return minimumOrder(family, widened).order
            } catch (error) {
              if (error instanceof DesignError && error.code === 'order-too-high') return least.order + 1
              throw error
            }
          })()
          expect(next).toBeGreaterThan(least.order)
        }
      },
    )
  })

  it('reaches the other limit where it says', () => {
    for (const family of FAMILIES) {
      const need = { passHz: 100, stopHz: 400, rippleDb: 3, attenuationDb: 20 }
      const least = minimumOrder(family, need)
      const level = levelOf(family, need, least.order, least.edgesHz)
      if (least.room.at === 'stop') expect(level(400 - least.room.hz)).toBeCloseTo(-20, 5)
      else expect(level(100 + least.room.hz)).toBeCloseTo(-3, 5)
    }
  })

  it('refuses what order 24 can’t do, and names what it can', () => {
    const need = { passHz: 100, stopHz: 110, rippleDb: 0.1, attenuationDb: 80 }
    const caught = (() => {
      try {
        minimumOrder('butterworth', need)
      } catch (error) {
        return error
      }
      return undefined
    })()
    expect(caught).toBeInstanceOf(DesignError)
    if (!(caught instanceof DesignError)) return
    expect(caught.code).toBe('order-too-high')
    expect(caught.field).toBe('attenuationDb')
    expect(minimumOrder('butterworth', { ...need, attenuationDb: Number(caught.nearest) }).order).toBe(24)
  })

  it.each([
    [{ passHz: 0 }, 'passHz', 'edge-out-of-range'],
    [{ stopHz: Number.NaN }, 'stopHz', 'edge-out-of-range'],
    [{ stopHz: 100 }, 'stopHz', 'edges-equal'],
    [{ passHz: [200, 100], stopHz: [50, 400] }, 'passHz.1', 'edges-out-of-order'],
    [{ passHz: [100, 200], stopHz: [400, 50] }, 'stopHz.1', 'edges-out-of-order'],
    [{ passHz: [100, 200], stopHz: [150, 400] }, 'stopHz', 'edges-not-nested'],
    [{ passHz: [100, 200] }, 'stopHz', 'edge-count'],
    [{ rippleDb: 0 }, 'rippleDb', 'ripple-out-of-range'],
    [{ rippleDb: Number.NaN }, 'rippleDb', 'ripple-out-of-range'],
    [{ attenuationDb: 0.5 }, 'attenuationDb', 'attenuation-below-ripple'],
    [{ attenuationDb: 400 }, 'attenuationDb', 'attenuation-out-of-range'],
    [{ sampleRateHz: 0 }, 'sampleRateHz', 'rate-out-of-range'],
    [{ sampleRateHz: 700 }, 'stopHz', 'edge-above-half-rate'],
  ] as const)('refuses %o', (change, field, code) => {
    const need: OrderRequirement = { passHz: 100, stopHz: 400, rippleDb: 1, attenuationDb: 40, ...change }
    expect(() => minimumOrder('butterworth', need)).toThrow(expect.objectContaining({ field, code }))
  })
})
