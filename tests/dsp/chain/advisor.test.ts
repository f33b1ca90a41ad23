import { describe, expect, it } from 'vitest'
import {
  advisePlans,
  adviseRates,
  chainSpecSchema,
  checkChainSheet,
  chainSketch,
  computeChain,
  planSteps,
  rateSteps,
  worstAlias,
  type ChainRequirement,
  type ChainSpec,
} from '@/dsp'
import { factorisations } from '@/dsp/chain/advisor/factorisations'
import { antiAlias, chainOf, converter, decimate, flatSensor, sensor, sixStages, toVelocity } from './chains'

const flat = (toHz: number, withinDb: number): ChainRequirement => ({ kind: 'flatness', fromHz: 10, toHz, withinDb })
const clean = (toHz: number, atLeastDb: number): ChainRequirement => ({ kind: 'alias-floor', toHz, atLeastDb })

const long = { type: 'kaiser', taps: 201, passHz: 1000, stopHz: 2100, attenuationDb: 90 } as const
/** 51.2 kHz to 3.2 kHz in one long filter. */
const oneStage: ChainSpec = chainOf([sensor, antiAlias(6, 6000), converter(51_200), decimate('d', 16, long)], {
  sheet: [flat(1000, 0.1), clean(1000, 85)],
})
/** 12.8 kHz to 3.2 kHz: few plans, soon found. */
const small: ChainSpec = {
  ...oneStage,
  stages: oneStage.stages
    .with(1, antiAlias(8, 1800))
    .with(2, converter(12_800))
    .with(3, decimate('d', 4, { ...long, taps: 71 })),
}
const usable: ChainSpec = {
  ...oneStage,
  stages: oneStage.stages.with(3, decimate('d', 12, { ...long, taps: 121 })).with(2, converter(48_000, 24, 1)),
  kept: { fromHz: 10, toHz: 1200 },
  sheet: [{ kind: 'usable-band', toHz: 1200, rippleDb: 0.5, aliasDb: 80 }],
}
const shaped: ChainSpec = {
  ...oneStage,
  stages: [...oneStage.stages, toVelocity],
  sheet: [flat(400, 1), clean(400, 70)],
}

const isMet = (spec: ChainSpec): boolean => checkChainSheet(computeChain(spec), null).every(({ met }) => met === true)

describe('factorisations', () => {
  // Ordered factorisations of 16: compositions of 4 into up to four parts, 2³. Of 12 (OEIS A074206): 8.
  it('counts them as known', () => {
    expect(factorisations(16)).toHaveLength(8)
    expect(factorisations(12)).toHaveLength(8)
    expect(factorisations(1)).toEqual([[]])
    // Factors end at 256, and so a prime above has none.
    expect(factorisations(257)).toEqual([])
    for (const factors of factorisations(360)) {
      expect(factors.length).toBeLessThanOrEqual(4)
      expect(factors.reduce((product, factor) => product * factor, 1)).toBe(360)
    }
  })
})

describe.each([
  ['one long filter', oneStage],
  ['a usable band behind an averaging converter', usable],
  ['integration behind the decimations', shaped],
])('plans for %s', (_, spec) => {
  const options = advisePlans(spec)

  it('are chains whose lines hold', () => {
    expect(options.length).toBeGreaterThanOrEqual(4)
    expect(options.length).toBeLessThanOrEqual(12)
    for (const option of options.filter(({ isCurrent }) => !isCurrent)) {
      expect(chainSpecSchema.parse(option.spec)).toEqual(option.spec)
      expect(option.meets).toBe(true)
      expect(isMet(option.spec)).toBe(true)
    }
  })

  it('keep both rates, and say of a plan what it is', () => {
    const before = computeChain(spec)
    for (const { spec: own, factors, filters, aliasDb, multipliesPerStoredSample, words, delaySeconds } of options) {
      const chain = computeChain(own)
      expect(chain.converterRateHz).toBe(before.converterRateHz)
      expect(chain.outputRateHz).toBeCloseTo(before.outputRateHz, 9)
      const decimations = own.stages.flatMap((stage) => (stage.kind === 'decimate' ? [stage] : []))
      expect(decimations.map(({ factor }) => factor)).toEqual(factors)
      expect(decimations.map(({ filter }) => filter.type)).toEqual(filters)
      expect(chainSketch(chain)).toEqual({ multipliesPerStoredSample, words, delaySeconds })
      const toHz = spec.sheet.reduce((most, line) => Math.max(most, 'toHz' in line ? line.toHz : 0), 0)
      expect(aliasDb).toBeCloseTo(-worstAlias(chain, toHz).levelDb, 6)
    }
  })

  it('come with the fewest multiplies first, and mark the current one', () => {
    const costs = options.map(({ multipliesPerStoredSample }) => multipliesPerStoredSample)
    expect(costs).toEqual([...costs].sort((a, b) => a - b))
    const current = options.filter(({ isCurrent }) => isCurrent)
    expect(current).toHaveLength(1)
    expect(current[0]!.spec).toEqual(spec)
    expect(costs[0]).toBeLessThan(current[0]!.multipliesPerStoredSample / 1.5)
  })

  it('are short: with a tenth of the taps of a stage less the sheet is missed', () => {
    const found = options.flatMap(({ isCurrent, spec: own }) => {
      const last = own.stages.findLastIndex(({ kind }) => kind === 'decimate')
      const stage = own.stages[last]
      const isKind =
        stage?.kind === 'decimate' && (stage.filter.type === 'kaiser' || stage.filter.type === 'equiripple')
      return isKind && !isCurrent ? [{ own, last, stage }] : []
    })
    expect(found.length).toBeGreaterThan(0)
    for (const { own, last, stage } of found.slice(0, 3)) {
      const filter = { ...stage.filter, taps: Math.floor(0.9 * (stage.filter as typeof long).taps) }
      expect(isMet({ ...own, stages: own.stages.with(last, { ...stage, filter } as typeof stage) })).toBe(false)
    }
  })
})

describe('plans', () => {
  it('lists a current plan that misses the sheet, and says so', () => {
    const short = { ...small, stages: small.stages.with(3, decimate('d', 4, { ...long, taps: 21 })) }
    const options = advisePlans(short)
    expect(options.find(({ isCurrent }) => isCurrent)?.meets).toBe(false)
    expect(options.filter(({ meets }) => meets).length).toBeGreaterThanOrEqual(3)
  })

  it('says what it took where the sheet asks for nothing', () => {
    const { notes } = advisePlans({ ...small, sheet: [] })[0]!
    expect(notes).toHaveLength(2)
    expect(notes[0]).toMatch(/no flatness; ±0.5 dB/u)
    expect(notes[1]).toMatch(/no alias floor; 80 dB/u)
  })

  it('leaves bypassed stages where they are and gives every stage a name of its own', () => {
    const bypassed = { ...decimate('x', 4, long), bypassed: true }
    const spec = {
      ...small,
      stages: [...small.stages.slice(0, 3), bypassed, ...small.stages.slice(3), toVelocity],
    }
    for (const { spec: own } of advisePlans({ ...spec, sheet: [] })) {
      expect(own.stages.filter((stage) => stage.bypassed)).toEqual([bypassed])
      expect(own.stages.at(-1)).toEqual(toVelocity)
      expect(new Set(own.stages.map(({ id }) => id)).size).toBe(own.stages.length)
    }
  })

  const refusals: readonly (readonly [string, ChainSpec, object])[] = [
    [
      'no decimation',
      { ...oneStage, stages: oneStage.stages.slice(0, 3) },
      { code: 'nothing-to-decimate', field: 'stages' },
    ],
    [
      'a floor that the analog filter can’t hold',
      { ...oneStage, sheet: [flat(1000, 0.1), clean(1000, 140)] },
      { code: 'alias-out-of-reach', field: 'sheet.1' },
    ],
    [
      'flatness that the integration uses up',
      { ...shaped, sheet: [clean(400, 70), flat(1400, 0.1)] },
      { code: 'flatness-out-of-reach', field: 'sheet.1' },
    ],
    [
      'no room above the band',
      { ...oneStage, kept: { fromHz: 10, toHz: 1600 }, sheet: [flat(1000, 0.1), flat(1600, 0.5), clean(1600, 60)] },
      { code: 'alias-out-of-reach', field: 'sheet.2' },
    ],
    [
      'shaping between decimations',
      {
        ...shaped,
        kept: { fromHz: 10, toHz: 400 },
        stages: [...shaped.stages, decimate('e', 2, { type: 'half-band', taps: 31, attenuationDb: 60 })],
      },
      { code: 'shape-between', field: 'stages.4' },
    ],
  ]
  it.each(refusals)('refuses %s', (_, spec, expected) => {
    expect(() => advisePlans(spec)).toThrow(expect.objectContaining(expected))
  })

  it('names the level that would have worked', () => {
    const spec = { ...small, sheet: [flat(1000, 0.1), clean(1000, 140)] }
    let nearest: unknown
    try {
      advisePlans(spec)
    } catch (error) {
      nearest = (error as { nearest?: unknown }).nearest
    }
    expect(nearest).toBeLessThan(140)
    const options = advisePlans({ ...spec, sheet: [flat(1000, 0.1), clean(1000, nearest as number)] })
    expect(options.some(({ meets, isCurrent }) => meets && !isCurrent)).toBe(true)
  })

  it('rises from 0 to 1 on its way', () => {
    const steps = planSteps(small)
    let before = 0
    let count = 0
    for (let next = steps.next(); next.done !== true; next = steps.next()) {
      expect(next.value).toBeGreaterThanOrEqual(before)
      before = next.value
      count += 1
    }
    expect(before).toBeCloseTo(1, 9)
    expect(count).toBeGreaterThan(6)
  })
})

describe.each([
  ['a Butterworth filter', oneStage, 'butterworth'],
  ['an averaging converter', usable, 'butterworth'],
  ['integration', shaped, 'butterworth'],
  [
    'an elliptic filter',
    {
      ...oneStage,
      stages: oneStage.stages.with(1, {
        ...antiAlias(4, 6000),
        kind: 'analog',
        source: {
          from: 'here',
          analog: {
            family: 'elliptic',
            response: 'lowpass',
            order: 4,
            edgesHz: [6000],
            rippleDb: 0.02,
            attenuationDb: 90,
          },
        },
      } as ChainSpec['stages'][number]),
    },
    'elliptic',
  ],
  ['no anti-alias filter', { ...oneStage, stages: oneStage.stages.toSpliced(1, 1) }, 'butterworth'],
] as const)('rates for a chain with %s', (_, spec, family) => {
  const options = adviseRates(spec)

  it('are chains whose lines hold, at the same output rate', () => {
    expect(options.length).toBeGreaterThanOrEqual(4)
    for (const option of options) {
      expect(chainSpecSchema.parse(option.spec)).toEqual(option.spec)
      expect(isMet(option.spec)).toBe(true)
      const chain = computeChain(option.spec)
      expect(chain.outputRateHz).toBeCloseTo(computeChain(spec).outputRateHz, 6)
      expect(chain.converterRateHz).toBe(option.converterRateHz)
      expect(option.factor * chain.outputRateHz).toBeCloseTo(option.converterRateHz, 6)
      const analog = option.spec.stages.find((stage) => stage.kind === 'analog')
      expect(analog?.kind === 'analog' && analog.source.from === 'here' && analog.source.analog).toMatchObject({
        family,
        order: option.order,
        edgesHz: [option.cornerHz],
      })
    }
  })

  it('fall as the order rises, and mark those that no other beats', () => {
    const orders = options.map(({ order }) => order)
    expect(orders).toEqual([...new Set(orders)].sort((a, b) => a - b))
    const best = options.filter(({ isBest }) => isBest)
    const rates = best.map(({ converterRateHz }) => converterRateHz)
    expect(rates).toEqual([...new Set(rates)].sort((a, b) => b - a))
    for (const one of options.filter(({ isBest }) => !isBest)) {
      expect(
        best.some(({ order, converterRateHz }) => order <= one.order && converterRateHz <= one.converterRateHz),
      ).toBe(true)
    }
  })
})

describe('the lines that a search does not work to', () => {
  const late: ChainRequirement = { kind: 'delay', atHz: 100, atMostSeconds: 1e-6 }
  const deep: ChainRequirement = { kind: 'effective-bits', atLeast: 39 }
  const match: ChainRequirement = { kind: 'channel-match', toHz: 500, withinDegrees: 1, withinDb: 0.1 }

  it('are judged on each option’s own chain, and the missed ones named', () => {
    const spec = { ...small, sheet: [...small.sheet, late, deep, match] }
    for (const options of [advisePlans(spec), adviseRates(spec)]) {
      for (const { missed, spec: own } of options) {
        const judged = checkChainSheet(computeChain(own), null)
        expect(missed).toEqual(judged.filter(({ met }) => met === false))
        expect(missed.map(({ requirement }) => requirement.kind)).toEqual(['delay', 'effective-bits'])
        expect(missed[0]!.margin).toBeLessThan(0)
      }
    }
  })

  it('put those that meet everything first, whatever they cost', () => {
    const delays = adviseRates(small).map(({ spec }) => checkChainSheet(computeChain({ ...spec, sheet: [late] }), null))
    const values = delays.map(([result]) => result!.value!).sort((a, b) => a - b)
    const line = { ...late, atMostSeconds: (values[2]! + values[3]!) / 2 }
    const options = adviseRates({ ...small, sheet: [...small.sheet, line] })
    const counts = options.map(({ missed }) => missed.length)
    expect(counts.slice(0, 3)).toEqual([0, 0, 0])
    expect(counts.slice(3).every((count) => count === 1)).toBe(true)
    expect(options.filter(({ isBest }) => isBest).every(({ missed }) => missed.length === 0)).toBe(true)
    expect(options.some(({ isBest }) => isBest)).toBe(true)
  })

  it('say in short what was assumed beside them', () => {
    expect(advisePlans({ ...small, sheet: [] })[0]!.assumed).toEqual(['±0.5 dB', 'images 80 dB down'])
    expect(advisePlans(small)[0]!.assumed).toEqual([])
  })
})

describe('rates', () => {
  it('are the lowest: by the asymptote of a Butterworth filter none lower holds the floor', () => {
    // |H|² = 1/(1 + (f/fc)^2n): with the corner as low as flatness allows, the first image at rate − 1000 Hz must be 85 dB down.
    const options = adviseRates({ ...oneStage, stages: oneStage.stages.with(0, flatSensor) })
    for (const { order, factor } of options) {
      const leastCorner = 1000 / (10 ** 0.01 - 1) ** (1 / (2 * order))
      const leastRate = 1000 + leastCorner * (10 ** 8.5 - 1) ** (1 / (2 * order))
      expect(factor * 3200).toBeGreaterThan(leastRate)
      // A quarter of the ripple is kept for the decimations, and rates are whole multiples of 3200 Hz that have a plan.
      const corner = 1000 / (10 ** 0.0075 - 1) ** (1 / (2 * order))
      const rate = 1000 + corner * (10 ** 8.53 - 1) ** (1 / (2 * order))
      expect(factor).toBeLessThanOrEqual(Math.ceil(rate / 3200) + (order < 3 ? 24 : 4))
    }
  })

  it('needs no decimation where the filter is steep enough', () => {
    const easy = chainOf([flatSensor, antiAlias(4, 1000), converter(8000)], {
      kept: { fromHz: 1, toHz: 50 },
      sheet: [{ kind: 'flatness', fromHz: 1, toHz: 50, withinDb: 1 }, clean(50, 60)],
    })
    const last = adviseRates(easy).find(({ factor }) => factor === 1)
    expect(last?.spec.stages.some(({ kind }) => kind === 'decimate')).toBe(false)
  })

  it('says what it took where the sheet asks for nothing', () => {
    const { notes } = adviseRates({ ...sixStages, sheet: [] })[0]!
    expect(notes).toHaveLength(2)
  })

  it('refuses what no rate can meet, naming the line', () => {
    const deep = { ...oneStage, sheet: [flat(1000, 1e-5), clean(1000, 290)] }
    expect(() => adviseRates(deep)).toThrow(expect.objectContaining({ field: expect.stringMatching(/^sheet\.[01]$/u) }))
    const curved = { ...shaped, sheet: [clean(400, 70), flat(1400, 0.1)] }
    expect(() => adviseRates(curved)).toThrow(
      expect.objectContaining({ code: 'flatness-out-of-reach', field: 'sheet.1' }),
    )
  })

  it('rises from 0 to 1 on its way', () => {
    const seen: number[] = []
    const steps = rateSteps(oneStage)
    for (let next = steps.next(); next.done !== true; next = steps.next()) seen.push(next.value)
    expect(seen).toEqual([...seen].sort((a, b) => a - b))
    expect(seen.at(-1)).toBe(1)
  })
})
