import { describe, expect, it } from 'vitest'
import { decadeOf, neighbours, seriesBetween } from '@/dsp/chain/e-series'
import published from '../../reference/adc_antialias_decimation.json'

describe('preferred values', () => {
  // IEC 60063:2015; E12 and E24 by table, E96 by the rounding rule (tests/reference/adc_antialias_decimation.json, e_series).
  it.each(['E12', 'E24', 'E96'] as const)('%s is as published', (series) => {
    const row = published.e_series.find((one) => one.series === series)
    expect(decadeOf(series)).toEqual(row?.value)
  })

  it('has as many values a decade as its name says, each within half a step of the geometric series', () => {
    for (const [series, count] of [
      ['E12', 12],
      ['E24', 24],
      ['E96', 96],
    ] as const) {
      const decade = decadeOf(series)
      expect(decade).toHaveLength(count)
      decade.forEach((value, n) => expect(Math.abs(Math.log10(value) - n / count)).toBeLessThan(0.5 / count))
    }
  })

  it('runs over decades with both bounds included, each value the double its decimal names', () => {
    const farads = seriesBetween('E12', 100e-12, 1e-6)
    expect(farads).toHaveLength(4 * 12 + 1)
    expect(farads[0]).toBe(100e-12)
    expect(farads.at(-1)).toBe(1e-6)
    expect(farads).toContain(4.7e-9)
    expect(farads).toContain(8.2e-8)
    const ohms = seriesBetween('E96', 1e3, 1e6)
    expect(ohms).toHaveLength(3 * 96 + 1)
    expect(ohms).toContain(97_600)
    expect([...ohms].sort((a, b) => a - b)).toEqual(ohms)
  })

  it('finds the neighbours of a value', () => {
    const ohms = seriesBetween('E24', 1e3, 1e6)
    expect(neighbours(ohms, 5000)).toEqual([4700, 5100])
    expect(neighbours(ohms, 4700)).toEqual([4700])
    expect(neighbours(ohms, 1e3)).toEqual([1e3])
    expect(neighbours(ohms, 1e6)).toEqual([1e6])
    expect(neighbours(ohms, 999)).toEqual([])
    expect(neighbours(ohms, 1.01e6)).toEqual([])
    expect(neighbours(ohms, Number.NaN)).toEqual([])
  })
})
