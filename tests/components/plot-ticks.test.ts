import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { linearScale, logScale } from '@/components/plot/scale'
import {
  decimalsOf,
  frequencyTicks,
  multiples,
  roundedStep,
  roundedTo,
  roundedUp,
  valueTicks,
} from '@/components/plot/ticks'

/** Thin spaces as plain ones, for the eye. */
const words = (ticks: readonly { label: string | null }[]) =>
  ticks.flatMap(({ label }) => label?.replaceAll('\u2009', ' ') ?? [])
const values = (ticks: readonly { value: number }[]) => ticks.map(({ value }) => value)

describe('value ticks', () => {
  it('count decibels in slopes and degrees in parts of a turn', () => {
    expect(values(valueTicks('decibels', linearScale([-60, 6], [196, 0]), 30))).toEqual([-60, -48, -36, -24, -12, 0])
    expect(values(valueTicks('decibels', linearScale([-100, 10], [196, 0]), 30))).toEqual([-100, -80, -60, -40, -20, 0])
    expect(values(valueTicks('degrees', linearScale([-378, 21], [111, 0]), 19))).toEqual([-360, -270, -180, -90, 0])
    expect(values(valueTicks('degrees', linearScale([-12, 12], [105, 0]), 20))).toEqual([-10, -5, 0, 5, 10])
  })

  it('write seconds in the unit of the axis, with the decimals that the step needs', () => {
    const ticks = valueTicks('plain', linearScale([0, 0.0008], [79, 0]), 19, 1e-3)
    expect(ticks.map(({ label }) => label)).toEqual(['0', '0.2', '0.4', '0.6', '0.8'])
    expect(ticks[2]?.value).toBeCloseTo(0.0004, 12)
  })

  it('use a true minus sign and mark zero as the strong line', () => {
    const ticks = valueTicks('decibels', linearScale([-12, 6], [100, 0]), 20)
    expect(ticks[0]?.label).toBe('−12')
    expect(ticks.filter(({ strong }) => strong).map(({ value }) => value)).toEqual([0])
  })

  it('never stand closer than asked, whatever the span', () => {
    fc.assert(
      fc.property(
        fc.double({ min: -5000, max: 5000, noNaN: true }),
        fc.double({ min: 0.01, max: 5000, noNaN: true }),
        (low, length) => {
          const scale = linearScale([low, low + length], [120, 0])
          for (const quantity of ['decibels', 'degrees', 'plain'] as const) {
            const pixels = values(valueTicks(quantity, scale, 20)).map(scale.toPixel)
            for (let i = 1; i < pixels.length; i++)
              expect((pixels[i - 1] ?? 0) - (pixels[i] ?? 0)).toBeGreaterThan(19.9)
          }
        },
      ),
    )
  })

  it('are exact multiples, not sums of rounding errors', () => {
    expect(multiples(0.1, [0, 0.7])).toEqual([0, 0.1, 0.2, 0.3, 0.4, 0.5, 0.6, 0.7])
    expect(multiples(3, [7, -7])).toEqual([-6, -3, 0, 3, 6])
  })
})

describe('frequency ticks', () => {
  it('draw every digit of a decade and label 1, 2, 5 where there is room', () => {
    const ticks = frequencyTicks({ scale: logScale([8, 600], [56, 656]), normalised: false })
    expect(ticks.filter(({ strong }) => strong).map(({ value }) => value)).toEqual([10, 100])
    expect(words(ticks)).toEqual(['10 Hz', '20 Hz', '50 Hz', '100 Hz', '200 Hz', '500 Hz'])
    expect(ticks).toHaveLength(2 + 9 + 6)
  })

  it('thin out over many decades', () => {
    const ticks = frequencyTicks({ scale: logScale([1e-3, 1e6], [0, 300]), normalised: false })
    expect(ticks.every(({ strong }) => strong)).toBe(true)
    expect(words(ticks).length).toBeLessThanOrEqual(5)
  })

  it('turn to even steps when little of a decade is shown, and on a linear axis', () => {
    expect(values(frequencyTicks({ scale: linearScale([0, 300], [0, 600]), normalised: false }))).toEqual([
      0, 50, 100, 150, 200, 250, 300,
    ])
    const narrow = frequencyTicks({ scale: logScale([100, 200], [0, 900]), normalised: false })
    expect(values(narrow)).toEqual([100, 110, 120, 130, 140, 150, 160, 170, 180, 190, 200])
  })

  it('speak in parts of the sampling rate when normalised', () => {
    const ticks = frequencyTicks({ scale: linearScale([0, 0.5], [0, 600]), normalised: true })
    expect(words(ticks)[1]).toBe('0.05 fs')
  })

  it('keep their labels apart', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.01, max: 1e5, noNaN: true }),
        fc.double({ min: 1.02, max: 1e5, noNaN: true }),
        fc.integer({ min: 280, max: 1400 }),
        (from, ratio, width) => {
          const scale = logScale([from, from * ratio], [0, width])
          const pixels = frequencyTicks({ scale, normalised: false })
            .filter(({ label }) => label !== null)
            .map(({ value }) => scale.toPixel(value))
          for (let i = 1; i < pixels.length; i++) expect((pixels[i] ?? 0) - (pixels[i - 1] ?? 0)).toBeGreaterThan(54)
        },
      ),
    )
  })
})

describe('rounding', () => {
  it('rounds axis ends up and drag steps down', () => {
    expect(roundedUp(5.6)).toBe(6)
    expect(roundedUp(11.2)).toBe(12)
    expect(roundedUp(0.0034)).toBe(0.004)
    expect(roundedUp(0)).toBe(1)
    expect(roundedStep(2.3)).toBe(2)
    expect(roundedStep(0.0999)).toBe(0.05)
    expect(roundedTo(123.37, 0.5)).toBe(123.5)
    expect(decimalsOf(0.25)).toBe(2)
    expect(decimalsOf(20)).toBe(0)
  })
})
