import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  chainResponse,
  computeChain,
  foldChart,
  foldPaths,
  interfererLandings,
  stageMagnitudeDb,
  worstAlias,
  type ChainStage,
} from '@/dsp'
import adc from '../../reference/adc_antialias_decimation.json' with { type: 'json' }
import { analogAt, size } from '../../helpers/dsp'
import { tapsGain, wholeTaps } from './chain-taps'
import { antiAlias, chainOf, converter, decimate, flatSensor, sensor, sixStages } from './chains'

const plain = (rateHz: number, toHz: number, stages: readonly ChainStage[] = []) =>
  computeChain(chainOf([flatSensor, ...stages, converter(rateHz)], { kept: { fromHz: 0, toHz } }))

const decibels = (gain: number): number => 20 * Math.log10(gain)

describe('where an input lands', () => {
  it.each(adc.alias_frequency)('$f_hz Hz sampled at $fs_hz Hz stands at $value Hz', ({ f_hz, fs_hz, value }) => {
    const path = foldPaths(plain(fs_hz, fs_hz / 4), value, 4 * fs_hz).find(({ inputHz }) => inputHz === f_hz)
    expect(path).toMatchObject({ outputHz: value, foldsAtStageId: 'adc', levelDb: 0 })
    const spec = chainOf([flatSensor, converter(fs_hz)], {
      kept: { fromHz: 0, toHz: fs_hz / 4 },
      interferers: [{ kind: 'tone', name: 'Tone', hz: f_hz, level: 2 }],
    })
    expect(interfererLandings(computeChain(spec))).toMatchObject([{ landsHz: value, level: 2, levelDb: 0 }])
  })

  it.each(adc.analyser_bandwidth_fs_over_2_56.rows)(
    'with $fs_hz Hz and a band of rate/2.56 the first image into the band comes from 1.56 times its end',
    ({ fs_hz, value }) => {
      const path = foldPaths(plain(fs_hz, value.usable_hz), value.usable_hz)[1]
      expect(path).toMatchObject({ inputHz: value.first_alias_into_band_hz, strip: 1, mirrored: true })
    },
  )

  it('folds first where the rate ahead still held it apart', () => {
    const chain = computeChain(sixStages)
    const by = (hertz: number) => foldPaths(chain, 100).find(({ inputHz }) => inputHz === hertz)?.foldsAtStageId
    expect(by(100)).toBeNull()
    expect(by(3100)).toBe('half')
    expect(by(6300)).toBe('cic')
    expect(by(51_100)).toBe('adc')
  })

  it('names an input once where two strips meet, and sorts by it', () => {
    const chain = plain(1000, 400)
    for (const outputHz of [0, 137, 500]) {
      const inputs = foldPaths(chain, outputHz).map(({ inputHz }) => inputHz)
      expect(inputs).toEqual([...new Set(inputs)].sort((a, b) => a - b))
    }
  })

  it('refuses an output frequency above half the rate and says the nearest', () => {
    expect(() => foldPaths(plain(1000, 400), 501)).toThrow(
      expect.objectContaining({ code: 'output-out-of-range', field: 'outputHz', nearest: 500 }),
    )
  })
})

describe('what comes of an image', () => {
  it.each(adc.butterworth_antialias)(
    'is as far down as a Butterworth filter of order $order at $fc_hz Hz has it (recomputed from the closed form)',
    ({ fs_hz, fmax_hz, order, fc_hz, value }) => {
      const chain = plain(fs_hz, fmax_hz, [antiAlias(order, fc_hz)])
      const worst = worstAlias(chain)
      expect(-worst.levelDb).toBeCloseTo(value.attenuation_at_fs_minus_fmax_db, 5)
      expect(worst).toMatchObject({ outputHz: fmax_hz, inputHz: fs_hz - fmax_hz, strip: 1, foldsAtStageId: 'adc' })
      const { magnitudeDb } = chainResponse(chain, Float64Array.of(fmax_hz, fs_hz / 2))
      expect(-magnitudeDb[0]!).toBeCloseTo(value.loss_at_fmax_db, 6)
      expect(-magnitudeDb[1]!).toBeCloseTo(value.attenuation_at_nyquist_db, 6)
    },
  )

  it('is the plain product of all parts, each at the frequency that stands before it', () => {
    const chain = computeChain({ ...sixStages, stages: sixStages.stages.slice(0, 5) })
    const analog = chain.stages.flatMap(({ parts }) => parts.flatMap((part) => (part.kind === 'analog' ? [part] : [])))
    const taps = wholeTaps(chain)
    for (const path of foldPaths(chain, 731, 120_000)) {
      const ahead = analog.reduce((product, { filter }) => product * size(analogAt(filter, path.inputHz)), 1)
      const gain = ahead * tapsGain(taps, path.inputHz, 51_200)
      if (gain > 1e-8) expect(Math.abs(path.levelDb - decibels(gain))).toBeLessThan(1e-5)
      else expect(path.levelDb).toBeLessThan(-159)
    }
  })

  it('is the same whether a digital stage sees the input or what it has folded to', () => {
    const chain = computeChain(sixStages)
    chain.stages.slice(3).forEach(({ inRateHz, index }) => {
      const rate = inRateHz!
      const folded = Float64Array.of(0.11, 0.23, 0.41).map((turns) => turns * rate)
      const here = stageMagnitudeDb(chain, index, folded)
      for (const there of [folded.map((hz) => 3 * rate - hz), folded.map((hz) => 2 * rate + hz)]) {
        stageMagnitudeDb(chain, index, there).forEach((level, n) => expect(level).toBeCloseTo(here[n]!, 6))
      }
    })
  })

  it('all together, of a white input, is what the taps of the whole chain make of it', () => {
    const filters = fc.record({
      first: fc.integer({ min: 2, max: 5 }),
      second: fc.integer({ min: 2, max: 3 }),
      order: fc.integer({ min: 1, max: 4 }),
      taps: fc.integer({ min: 5, max: 24 }),
      turns: fc.double({ min: 0.01, max: 0.49, noNaN: true }),
    })
    fc.assert(
      fc.property(filters, ({ first, second, order, taps, turns }) => {
        const rate = 1000 * first * second
        const chain = computeChain(
          chainOf(
            [
              flatSensor,
              converter(rate),
              decimate('a', first, { type: 'cic', order, combDelay: 1, compensation: null }),
              decimate('b', second, { type: 'kaiser', taps, passHz: 300, stopHz: 700, attenuationDb: 40 }),
            ],
            { kept: { fromHz: 0, toHz: 400 } },
          ),
        )
        const factor = first * second
        const paths = foldPaths(chain, 1000 * turns, rate / 2)
        const byFolds = paths.reduce((sum, { levelDb }) => sum + 10 ** (levelDb / 10), 0) / factor
        // The decimated samples' autocorrelation, and its spectrum: nothing is folded here.
        const h = wholeTaps(chain)
        let byTaps = 0
        for (let lag = 0; lag * factor < h.length; lag++) {
          const r = h.reduce((sum, tap, n) => sum + tap * (h[n + lag * factor] ?? 0), 0)
          byTaps += (lag === 0 ? 1 : 2) * r * Math.cos(2 * Math.PI * lag * turns)
        }
        expect(Math.abs(byFolds - byTaps)).toBeLessThan(1e-9)
      }),
      { numRuns: 40 },
    )
  })
})

describe('the chart', () => {
  const grid = (chain: { outputRateHz: number }, points = 65) =>
    Float64Array.from({ length: points }, (_, n) => (n / (points - 1)) * (chain.outputRateHz / 2))

  it('holds in each strip what the paths of its frequencies hold', () => {
    const chain = computeChain(sixStages)
    const chart = foldChart(chain, grid(chain))
    let held = 0
    for (const at of [7, 30, 51]) {
      for (const { strip, levelDb, inputHz } of foldPaths(chain, chart.outputHz[at]!)) {
        const shown = chart.strips.find((one) => one.strip === strip)
        if (shown === undefined) continue
        held += 1
        expect(shown.levelDb[at]).toBeCloseTo(levelDb, 8)
        expect(inputHz).toBeGreaterThanOrEqual(shown.fromHz)
        expect(inputHz).toBeLessThanOrEqual(shown.toHz)
      }
    }
    expect(held).toBe(3 * chart.strips.length)
  })

  it('points at the strip with the worst alias, which no finer look finds worse', () => {
    const chain = computeChain(sixStages)
    const chart = foldChart(chain, grid(chain))
    const worst = worstAlias(chain)
    expect(chart.weakStrip).toBe(worst.strip)
    expect(chart.strips.find(({ strip }) => strip === chart.weakStrip)!.worst).toMatchObject({
      levelDb: worst.levelDb,
      inputHz: worst.inputHz,
    })
    const fine = foldChart(
      chain,
      Float64Array.from({ length: 2001 }, (_, n) => 10 + (990 * n) / 2000),
    )
    const most = Math.max(...fine.strips.slice(1).map(({ levelDb }) => Math.max(...levelDb)))
    expect(worst.levelDb).toBeGreaterThanOrEqual(most - 1e-9)
    expect(worst.levelDb - most).toBeLessThan(0.01)
  })

  it('names the lowest of strips that come through alike', () => {
    const open = computeChain(chainOf([flatSensor, converter(4000)]))
    expect(foldChart(open, grid(open)).weakStrip).toBe(1)
    expect(worstAlias(open)).toMatchObject({ strip: 1, levelDb: 0 })
    // A resonance of the sensor far above lifts the higher strips, by less than anybody tells apart.
    const lifted = computeChain(
      chainOf([{ ...flatSensor, resonance: { f0Hz: 400_000, q: 1 } }, converter(4000)], {
        kept: { fromHz: 10, toHz: 1000 },
      }),
    )
    const { strip, levelDb, outputHz } = worstAlias(lifted, 1000)
    const own = foldPaths(lifted, outputHz).find((path) => path.strip === strip)!
    expect(levelDb).toBeGreaterThanOrEqual(own.levelDb)
    expect(levelDb - own.levelDb).toBeLessThanOrEqual(0.05)
  })

  it('bounds honestly what it has not looked at', () => {
    const chain = computeChain(chainOf([sensor, antiAlias(3, 12_000), converter(51_200, 16, 2)]))
    const { lookedUpToHz, beyondAtMostDb } = foldChart(chain, grid(chain))
    const beyond = foldPaths(chain, 900, 40 * 51_200).filter(({ inputHz }) => inputHz > lookedUpToHz)
    expect(beyond.length).toBeGreaterThan(50)
    for (const { levelDb } of beyond) expect(levelDb).toBeLessThanOrEqual(beyondAtMostDb)
    expect(beyondAtMostDb).toBeLessThan(-60)
  })

  it('says 0 dB of a chain without an anti-alias filter, and looks on past a resonance', () => {
    const open = plain(1000, 400)
    expect(foldChart(open, grid(open)).beyondAtMostDb).toBeCloseTo(0, 9)
    expect(worstAlias(open).levelDb).toBe(0)
    const ringing = computeChain(
      chainOf([{ ...sensor, resonance: { f0Hz: 32_300, q: 50 } }, converter(4000)], {
        kept: { fromHz: 10, toHz: 500 },
      }),
    )
    const chart = foldChart(ringing, grid(ringing))
    expect(chart.lookedUpToHz).toBeGreaterThan(32_300)
    expect(chart.strips.find(({ strip }) => strip === chart.weakStrip)).toMatchObject({
      worst: { levelDb: expect.closeTo(decibels(50), 1) as number },
    })
  })

  it('keeps few of very many strips, the weak one among them', () => {
    const chain = computeChain(
      chainOf(
        [
          flatSensor,
          antiAlias(4, 20_000),
          converter(256_000),
          decimate('a', 64, { type: 'cic', order: 3, combDelay: 1, compensation: null }),
          decimate('b', 4, { type: 'kaiser', taps: 127, passHz: 400, stopHz: 600, attenuationDb: 90 }),
        ],
        { kept: { fromHz: 0, toHz: 400 } },
      ),
    )
    const chart = foldChart(chain, grid(chain, 33))
    expect(chart.strips.length).toBeLessThan(60)
    const shown = chart.strips.map(({ strip }) => strip)
    expect(shown).toContain(chart.weakStrip)
    // Beside the CIC filter's output rate, 4 kHz, where its null is narrow: strips 7 and 8 of 500 Hz each.
    expect([7, 8]).toContain(chart.weakStrip)
    expect(shown).toContain(511)
    expect(shown.slice(0, 16)).toEqual(Array.from({ length: 16 }, (_, n) => n))
  })
})
