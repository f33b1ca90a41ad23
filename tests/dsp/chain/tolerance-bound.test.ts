import { describe, expect, it } from 'vitest'
import { analogSections, computeChain, DesignError, type ChainSpec } from '@/dsp'
import { antiAlias, chainOf, converter, flatSensor } from './chains'

/** Sections by hand: a Butterworth filter of even order has half as many, all of second order; a stage of order 1 has one. */
const spec = (orders: readonly number[], channels: number): ChainSpec =>
  chainOf(
    [flatSensor, ...orders.map((order, index) => antiAlias(order, 20_000, `aa${index}`)), converter(50_000, 24, null)],
    { tolerance: { spread: { of: 'parts', percent: 1 }, channels, seed: 1 } },
  )

const refusalOf = (one: ChainSpec): DesignError => {
  try {
    computeChain(one)
  } catch (error) {
    if (error instanceof DesignError) return error
  }
  throw new Error('nothing was refused')
}

describe('the work of a tolerance run', () => {
  it('is bounded by channels times sections, and the nearest number of channels works', () => {
    const orders = [24, 24, 1]
    expect(analogSections(computeChain(spec(orders, 16_000)))).toHaveLength(25)
    const refused = refusalOf(spec(orders, 16_001))
    expect(refused).toMatchObject({ code: 'too-much-drawing', field: 'tolerance.channels', nearest: 16_000 })
    expect(refused.message).toContain('25 analog sections')
  })

  it('lets 20 sections have the most channels there are', () => {
    expect(() => computeChain(spec([20, 20], 20_000))).not.toThrow()
  })

  it('leaves bypassed stages out', () => {
    const full = spec([24, 24, 24], 20_000)
    expect(refusalOf(full)).toMatchObject({ nearest: 11_111 })
    const stages = full.stages.map((stage) => (stage.id === 'aa2' ? { ...stage, bypassed: true } : stage))
    expect(refusalOf({ ...full, stages })).toMatchObject({ nearest: 16_666 })
  })
})
