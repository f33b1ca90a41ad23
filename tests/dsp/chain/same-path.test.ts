import { describe, expect, it } from 'vitest'
import {
  checkChainSheet,
  computeChain,
  foldChart,
  interfererLandings,
  noiseBudget,
  stageMagnitudeDb,
  worstAlias,
  type ChainSpec,
  type ChainStage,
} from '@/dsp'
import { antiAlias, chainOf, converter, decimate, flatSensor } from './chains'

const cic = decimate('cic', 8, { type: 'cic', order: 4, combDelay: 2, compensation: { taps: 22, passHz: 800 } })
const half = decimate('half', 2, { type: 'half-band', taps: 47, attenuationDb: 90 })
const equiripple = (taps: number) =>
  decimate('eq', 3, { type: 'equiripple', taps, passHz: 900, stopHz: 1600, stopWeight: 1 })

const stagesWith = (...digital: readonly ChainStage[]) => [
  flatSensor,
  antiAlias(4, 8000),
  converter(76_800),
  ...digital,
]
const spec = (taps = 33, parts: Partial<ChainSpec> = {}): ChainSpec =>
  chainOf(stagesWith(cic, half, equiripple(taps)), {
    kept: { fromHz: 10, toHz: 600 },
    sheet: [
      { kind: 'alias-floor', toHz: 600, atLeastDb: 60 },
      { kind: 'flatness', fromHz: 10, toHz: 500, withinDb: 1 },
    ],
    interferers: [{ kind: 'band', name: 'Pump', fromHz: 100, toHz: 5000, level: 2 }],
    ...parts,
  })

describe('the noise gain of finite filters', () => {
  it('is the sum over every image of the squared levels, each stage evaluated by itself', () => {
    const chain = computeChain(spec())
    const rate = chain.outputRateHz
    const at = 137
    let total = 0
    for (let k = 0; k < 48; k++) {
      const input = Float64Array.of(k * rate + at)
      let level = 0
      for (let stage = 3; stage < 6; stage++) level += stageMagnitudeDb(chain, stage, input)[0]!
      total += 10 ** (level / 10)
    }
    const { density } = noiseBudget(computeChain(spec(33, { kept: { fromHz: at - 1, toHz: at + 1 } })))
    const step = (2 * 5) / 2 ** 24
    const white = (step * step) / 12 / (76_800 / 2) / flatSensor.sensitivity ** 2
    expect(density / Math.sqrt(white * total)).toBeCloseTo(1, 10)
  })
})

const figures = (from: ChainSpec) => {
  const chain = computeChain(from)
  const chart = foldChart(chain, Float64Array.of(0, 300, 600))
  const worst = worstAlias(chain).levelDb
  return { worst, chart: chart.beyondAtMostDb, strip: chart.strips[1]!.levelDb[1]!, rms: noiseBudget(chain).rms }
}

describe('what is kept from one edit to the next', () => {
  it('follows each filter, the kept band and the resolution', () => {
    const first = figures(spec())
    const longer = figures(spec(45))
    expect(longer.worst).not.toBe(first.worst)
    expect(longer.strip).not.toBe(first.strip)
    expect(longer.rms).not.toBe(first.rms)
    const narrow = figures(spec(33, { kept: { fromHz: 10, toHz: 300 } }))
    expect(narrow.worst).toBeLessThan(first.worst)
    expect(narrow.rms).toBeLessThan(first.rms)
    const coarse = figures({ ...spec(), stages: stagesWith(cic, half, equiripple(33)).with(2, converter(76_800, 20)) })
    expect(coarse.worst).toBe(first.worst)
    expect(coarse.rms / first.rms).toBeCloseTo(16, 9)
    expect(figures(spec())).toEqual(first)
  })

  it('gives each line and each interferer its own', () => {
    const chain = computeChain(spec())
    const [floor, flat] = checkChainSheet(chain, null)
    const stricter = computeChain(spec(33, { sheet: [{ kind: 'alias-floor', toHz: 600, atLeastDb: 200 }] }))
    const [missed] = checkChainSheet(stricter, null)
    expect(missed).toMatchObject({ value: floor!.value, limit: 200, met: false })
    expect(flat).toMatchObject({ requirement: { kind: 'flatness' }, unit: 'dB' })
    const [pump] = interfererLandings(chain)
    const other = { kind: 'band', name: 'Fan', fromHz: 100, toHz: 5000, level: 6 } as const
    const [fan] = interfererLandings(computeChain(spec(33, { interferers: [other] })))
    expect(fan!.name).toBe('Fan')
    expect(fan!.level / pump!.level).toBeCloseTo(3, 12)
  })
})
