import { describe, expect, it } from 'vitest'
import { chainSpecSchema, computeChain, type ChainSpec } from '@/dsp'
import {
  placesFor,
  withAnalogFamily,
  withBypass,
  withDecimateType,
  withField,
  withIntegrationTimes,
  withSensorUnit,
  withStageAdded,
  withStageDuplicated,
  withStageMoved,
  withoutStage,
  type StagesEdit,
} from '@/lib/chains/edits'
import { boundRefusal, levelText, numberAt, parseChainField, shownLevel, withPartAt } from '@/lib/chains/fields'
import { nameRefusal } from '@/lib/chains/names'
import { outputRateOf, ratesOf, unitAfter } from '@/lib/chains/outline'
import { startingChain, usualEdges } from '@/lib/chains/stage-starts'

const made = (edit: StagesEdit): ChainSpec => {
  if (!edit.ok) throw new Error(edit.message)
  expect(chainSpecSchema.safeParse(edit.spec).error).toBeUndefined()
  computeChain(edit.spec)
  return edit.spec
}
const kinds = ({ stages }: ChainSpec) => stages.map(({ kind }) => kind)
const factors = ({ stages }: ChainSpec) => stages.flatMap((stage) => (stage.kind === 'decimate' ? [stage.factor] : []))

describe('rates and units along a chain', () => {
  it('follow the converter and the decimations that aren’t bypassed', () => {
    expect(ratesOf(startingChain).map(({ outRateHz }) => outRateHz)).toEqual([null, null, 2000, 500, 250])
    expect(outputRateOf(made(withBypass(startingChain, 4, true)))).toBe(500)
  })
})

describe('a filter that stood where the kept band and the rates put it', () => {
  it('follows the kept band', () => {
    const next = withField(startingChain, 'kept.toHz', 80)
    expect(numberAt(next, 'stages.4.filter.passHz')).toBe(80)
    expect(numberAt(next, 'stages.4.filter.stopHz')).toBe(170)
    expect(computeChain(next).outputRateHz).toBe(250)
  })
  it('follows the converter’s rate', () => {
    const next = withField(startingChain, 'stages.2.sampleRateHz', 4000)
    expect(numberAt(next, 'stages.3.filter.stopHz')).toBe(910)
    expect(numberAt(next, 'stages.4.filter.stopHz')).toBe(410)
  })
  it('stays where it was set by hand', () => {
    const byHand = withField(startingChain, 'stages.4.filter.stopHz', 150)
    const next = withField(byHand, 'kept.toHz', 80)
    expect(numberAt(next, 'stages.4.filter.stopHz')).toBe(150)
    expect(numberAt(next, 'stages.4.filter.passHz')).toBe(80)
  })
  it('leaves the room that keeps what folds off the kept band', () => {
    expect(usualEdges(90, 500, 2)).toEqual({ passHz: 90, stopHz: 160 })
  })
})

describe('stages', () => {
  it('are added where their kind may stand', () => {
    const analog = made(withStageAdded(startingChain, 'analog', 4))
    expect(kinds(analog).indexOf('converter')).toBe(3)
    expect(placesFor(startingChain, 'decimate')).toEqual([3, 4, 5])
    expect(placesFor(startingChain, 'converter')).toEqual([])
    const shaped = made(withStageAdded(startingChain, 'shape', 4))
    expect(unitAfter(shaped)).toBe('mm/s')
  })
  it('move among their own, with their filters following the rates', () => {
    const next = made(withStageMoved(startingChain, 4, 3))
    expect(factors(next)).toEqual([2, 4])
    expect(numberAt(next, 'stages.3.filter.stopHz')).toBe(910)
  })
  it('are refused where they can’t stand, and say why', () => {
    expect(withStageMoved(startingChain, 4, 2)).toEqual({
      ok: false,
      message: 'A digital stage stands behind the converter.',
    })
    expect(withStageMoved(startingChain, 1, 3)).toMatchObject({ ok: false })
    expect(withStageMoved(startingChain, 0, 1)).toMatchObject({ ok: false })
    expect(withBypass(startingChain, 2, true)).toMatchObject({ ok: false })
    expect(withoutStage(startingChain, 0)).toMatchObject({ ok: false })
    expect(withStageDuplicated(startingChain, 2)).toMatchObject({ ok: false })
  })
  it('are taken out and put twice', () => {
    expect(factors(made(withoutStage(startingChain, 3)))).toEqual([2])
    const small = { ...startingChain, kept: { fromHz: 0.5, toHz: 40 }, sheet: [] }
    const twice = made(withStageDuplicated(small, 4))
    expect(factors(twice)).toEqual([4, 2, 2])
    expect(new Set(twice.stages.map(({ id }) => id)).size).toBe(twice.stages.length)
  })
  it('say that there is nothing to integrate to', () => {
    const volts = withPartAt(startingChain, 'stages.0.unit', 'V')
    expect(withStageAdded(volts, 'shape', 4)).toMatchObject({ ok: false })
  })
})

describe('what a stage is made of', () => {
  it('gets what a family needs and lets go of what it has no use for', () => {
    const elliptic = withAnalogFamily(startingChain, 1, 'elliptic')
    expect(numberAt(elliptic, 'stages.1.source.analog.rippleDb')).toBe(0.5)
    expect(numberAt(withAnalogFamily(elliptic, 1, 'bessel'), 'stages.1.source.analog.rippleDb')).toBeNull()
  })
  it.each(['half-band', 'equiripple', 'cic', 'kaiser'] as const)('becomes %s and makes a chain', (type) => {
    const next = withDecimateType(startingChain, 4, type)
    expect(chainSpecSchema.safeParse(next).error).toBeUndefined()
    expect(computeChain(next).outputRateHz).toBe(250)
  })
  it('halves alone by a half-band filter', () => {
    const half = withDecimateType(startingChain, 3, 'half-band')
    expect(factors(half)).toEqual([2, 2])
    expect(withField(half, 'stages.3.factor', 4).stages[3]).toMatchObject({ filter: { type: 'kaiser' } })
  })
  it('integrates twice to a displacement', () => {
    const once = made(withStageAdded(startingChain, 'shape', 4))
    expect(unitAfter(withIntegrationTimes(once, 5, 2))).toBe('mm')
  })
})

describe('a number that is none for its place', () => {
  it('is refused with the nearest that may be tried', () => {
    expect(boundRefusal(startingChain, 'stages.2.resolution.bits', 40)).toMatchObject({ nearest: 32 })
    expect(boundRefusal(startingChain, 'stages.3.factor', 3.4)).toMatchObject({ nearest: 3 })
    expect(boundRefusal(startingChain, 'stages.0.sensitivity', -1)?.message).toContain('above 0')
    expect(boundRefusal(startingChain, 'kept.fromHz', 0)).toBeNull()
  })
})

describe('the unit of the sensor', () => {
  const shaken: ChainSpec = {
    ...startingChain,
    interferers: [{ kind: 'tone', name: 'pump', hz: 147, level: 0.05 }],
  }
  it('says the same sensor and the same interferers in another unit of the same quantity', () => {
    const metric = withSensorUnit(shaken, 0, 'm/s²')
    // 1 V/g over 9.80665 m/s² (ISO 80000-3).
    expect(numberAt(metric, 'stages.0.sensitivity')).toBeCloseTo(0.101971621297793, 12)
    expect(numberAt(metric, 'interferers.0.level')).toBeCloseTo(0.4903325, 12)
    expect(withSensorUnit(metric, 0, 'g')).toEqual(shaken)
  })
  it('keeps the figures where the quantity is another', () => {
    const pressure = withSensorUnit(shaken, 0, 'Pa')
    expect(numberAt(pressure, 'stages.0.sensitivity')).toBe(1)
    expect(pressure.interferers).toBe(shaken.interferers)
  })
})

describe('a typed number', () => {
  it('that lies between two counts is read, so that the nearest one is offered', async () => {
    for (const [path, text, nearest] of [
      ['stages.3.factor', '7.5', 8],
      ['stages.1.source.analog.order', '4,4', 4],
      ['stages.3.filter.taps', '33.6 taps', 34],
    ] as const) {
      const parsed = await parseChainField(startingChain, path, text, 1)
      expect(parsed.ok && boundRefusal(startingChain, path, parsed.value)).toMatchObject({ nearest })
    }
  })
  it('takes a prefix for the unit of its field', async () => {
    expect(await parseChainField(startingChain, 'stages.0.sensitivity', '100m', 1)).toEqual({ ok: true, value: 0.1 })
    expect(await parseChainField(startingChain, 'stages.2.resolution.voltsPerRootHz', '500 nV', 1)).toEqual({
      ok: true,
      value: 5e-7,
    })
  })
})

describe('names and levels', () => {
  it('are as the schema has them', () => {
    expect(nameRefusal('  ')).not.toBeNull()
    expect(nameRefusal('a\u202eb')).not.toBeNull()
    expect(nameRefusal('x'.repeat(61))).not.toBeNull()
    expect(nameRefusal('charge amplifier №2')).toBeNull()
  })
  it('never stack one prefix on another', () => {
    expect(levelText(0.00187, 'g').replace('\u2009', ' ')).toBe('1.87 mg')
    expect(levelText(0.00187, 'mm/s').replace('\u2009', ' ')).toBe('0.00187 mm/s')
    expect(shownLevel(3.63e-6, 'mm/s').replace('\u2009', ' ')).toBe('3.63 nm/s')
    expect(shownLevel(1.5, 'mm/s').replace('\u2009', ' ')).toBe('1.5 mm/s')
    expect(shownLevel(3.63e-6, 'µm/m')).toContain('µm/m')
  })
})
