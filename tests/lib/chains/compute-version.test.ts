import { describe, expect, it } from 'vitest'
import {
  checkChainSheet,
  computeChain,
  DesignError,
  toleranceFrequencies,
  toleranceResult,
  toleranceShard,
  worstAlias,
  type ChainSpec,
} from '@/dsp'
import { canonicalJson } from '@/lib/chains/canonical'
import { computeChainVersion, judgedChain } from '@/lib/chains/compute-version'
import { heldFigures, heldLines, savedLines } from '@/lib/chains/held-figures'
import { oneAtATime } from '@/lib/chains/one-at-a-time'
import { startingChain } from '@/lib/chains/stage-starts'
import { startingChains } from '@/lib/chains/templates'
import type { ChainFigures } from '@/lib/chains/types'

/** The starting chain with an anti-alias filter of many sections and the most channels that it may have. */
const heavy: ChainSpec = {
  ...startingChain,
  stages: startingChain.stages.map((stage) =>
    stage.kind === 'analog' && stage.source.from === 'here'
      ? {
          ...stage,
          source: {
            ...stage.source,
            analog: { family: 'butterworth', response: 'lowpass', order: 24, edgesHz: stage.source.analog.edgesHz },
          },
        }
      : stage,
  ),
  sheet: [{ kind: 'channel-match', toHz: startingChain.kept.toHz, withinDegrees: 5, withinDb: 1 }],
  tolerance: { ...startingChain.tolerance, channels: 20_000 },
}

describe('the figures of a version', () => {
  it('are those of a run made in one go, bit by bit', async () => {
    const { results, match } = await judgedChain(heavy)
    const chain = computeChain(heavy)
    const frequenciesHz = toleranceFrequencies(chain, 33)
    const whole = toleranceResult(chain, frequenciesHz, [toleranceShard(chain, frequenciesHz, 0, 20_000)])
    expect(match).toEqual(whole)
    expect(results).toEqual(checkChainSheet(chain, whole))
  })

  it('are computed in pieces between which others have their turn', async () => {
    let turns = 0
    let isDone = false
    const count = () => {
      turns += 1
      if (!isDone) setImmediate(count)
    }
    setImmediate(count)
    await computeChainVersion(heavy)
    isDone = true
    // 13 sections × 20,000 channels × 33 frequencies are 17 pieces.
    expect(turns).toBeGreaterThan(17)
  })

  it('hold the lines of the sheet, which come back as they were', async () => {
    for (const spec of Object.values(startingChains)) {
      const { figures } = await computeChainVersion(spec)
      const { results } = await judgedChain(spec)
      const back = JSON.parse(canonicalJson(figures)) as ChainFigures
      expect(savedLines(spec, back)).toEqual(results)
    }
    const { figures } = await computeChainVersion(startingChain)
    expect(savedLines({ ...startingChain, sheet: [] }, figures)).toBeNull()
    expect(savedLines(startingChain, {})).toBeNull()
  })

  it('hold levels within ±400 dB, since JSON has no infinite ones', () => {
    const [requirement] = startingChain.sheet
    if (!requirement) throw new Error('the starting chain asks for nothing')
    const line = {
      requirement,
      value: Infinity,
      limit: 60,
      unit: 'dB',
      margin: Infinity,
      met: true,
      worstHz: 3,
    } as const
    expect(heldLines([line])).toEqual([{ value: 400, limit: 60, unit: 'dB', margin: 400, met: true, worstHz: 3 }])
    expect(() => heldLines([line, { ...line, unit: 's' }])).toThrow(
      expect.objectContaining({ code: 'figure-not-finite', field: 'sheet.1' }),
    )
  })

  it.each([
    ['effectiveBits', -Infinity, 'stages.2.fullScaleVolts'],
    ['delaySeconds', Infinity, 'kept.toHz'],
    ['worstAliasDb', Number.NaN, 'kept.toHz'],
    ['multipliesPerStoredSample', Infinity, 'stages.2.sampleRateHz'],
    ['match', [{ hz: 1, gainDb: Number.NaN, phaseDegrees: 0 }], 'tolerance.spread'],
  ])('are refused when %s is %s, with a field and a sentence', async (name, value, field) => {
    const chain = computeChain(startingChain)
    const { figures } = await computeChainVersion(startingChain)
    expect(figures.worstAliasDb).toBe(worstAlias(chain).levelDb)
    try {
      heldFigures({ ...figures, [name]: value }, chain)
    } catch (error) {
      expect(error).toBeInstanceOf(DesignError)
      expect(error).toMatchObject({ code: 'figure-not-finite', field })
      return
    }
    throw new Error('nothing was refused')
  })
})

describe('one at a time', () => {
  it('runs in order, never two at once, and goes on after a failure', async () => {
    const queue = oneAtATime()
    const said: string[] = []
    const job = (name: string, fails = false) =>
      queue(async () => {
        said.push(`${name} begins`)
        await new Promise((done) => setImmediate(done))
        said.push(`${name} ends`)
        if (fails) throw new Error(name)
        return name
      })
    const [one, two, three] = await Promise.allSettled([job('one'), job('two', true), job('three')])
    expect(said).toEqual(['one begins', 'one ends', 'two begins', 'two ends', 'three begins', 'three ends'])
    expect([one, three]).toEqual([
      { status: 'fulfilled', value: 'one' },
      { status: 'fulfilled', value: 'three' },
    ])
    expect(two).toMatchObject({ status: 'rejected' })
  })
})
