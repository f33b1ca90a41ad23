import { describe, expect, it } from 'vitest'
import {
  chainResponse,
  checkChainSheet,
  computeChain,
  foldPaths,
  interfererLandings,
  noiseBudget,
  usableBand,
  worstAlias,
  type ChainRequirement,
  type ComputedChain,
  type Interferer,
  type ToleranceResult,
} from '@/dsp'
import { antiAlias, chainOf, converter, flatSensor, sixStages } from './chains'

const at = (...hertz: number[]): Float64Array => Float64Array.from(hertz)

/** Butterworth of order 4 at 1 kHz ahead of a converter at 10 kHz. */
const simple = (sheet: readonly ChainRequirement[] = []): ComputedChain =>
  computeChain(
    chainOf([flatSensor, antiAlias(4, 1000), converter(10_000, 16)], { kept: { fromHz: 0, toHz: 800 }, sheet }),
  )

/** Loss of a Butterworth filter of order 4 at 1 kHz, by its formula. */
const lossDb = (hertz: number): number => 10 * Math.log10(1 + (hertz / 1000) ** 8)
/** Where it has lost so much. */
const lossAt = (decibels: number): number => 1000 * (10 ** (decibels / 10) - 1) ** (1 / 8)

describe('the usable band', () => {
  it('ends where the ripple is used up, by the closed form', () => {
    const band = usableBand(simple(), { rippleDb: 0.5, aliasDb: 40 })
    expect(band).toMatchObject({ fromHz: 0, endedBy: 'ripple' })
    expect(band!.toHz).toBeCloseTo(lossAt(0.5), 4)
  })

  it('ends where an image comes to the floor, by the closed form', () => {
    const band = usableBand(simple(), { rippleDb: 60, aliasDb: 70 })
    expect(band?.endedBy).toBe('alias')
    expect(band!.toHz).toBeCloseTo(10_000 - lossAt(70), 3)
  })

  it('reaches half the rate when nothing ends it', () => {
    expect(usableBand(simple(), { rippleDb: 60, aliasDb: 40 })).toEqual({
      fromHz: 0,
      toHz: 5000,
      endedBy: 'half the output rate',
    })
  })

  it('begins where a high-pass comes to be flat, and is none where images are too strong throughout', () => {
    const highPass = { cornerHz: 10, order: 1 }
    const chain = computeChain(
      chainOf([{ ...flatSensor, highPass }, antiAlias(4, 1000), converter(10_000)], { kept: { fromHz: 1, toHz: 800 } }),
    )
    const band = usableBand(chain, { rippleDb: 0.5, aliasDb: 40 })
    // 10·lg(1 + (10/f)²) = 0.5 dB
    expect(band!.fromHz).toBeCloseTo(10 / Math.sqrt(10 ** 0.05 - 1), 4)
    expect(usableBand(simple(), { rippleDb: 0.5, aliasDb: 81 })).toBeNull()
  })
})

describe('the lines of a sheet', () => {
  const match = (chain: ComputedChain, phase: number, gain: number): ToleranceResult => {
    const frequenciesHz = at(1, 100, 400, 800)
    const rising = (most: number): Float64Array => frequenciesHz.map((hertz) => (most * hertz) / 800)
    const none = at(0, 0, 0, 0)
    const spread = { p5: none, p50: none, p95: none }
    return {
      settings: chain.spec.tolerance,
      frequenciesHz,
      magnitudeDb: spread,
      phaseDegrees: spread,
      gainMatchDb: { p50: none, p95: rising(gain), most: rising(gain) },
      phaseMatchDegrees: { p50: none, p95: rising(phase), most: rising(phase) },
    }
  }

  it('are judged by their worst points, in order', () => {
    const sheet: readonly ChainRequirement[] = [
      { kind: 'usable-band', toHz: 700, rippleDb: 0.5, aliasDb: 40 },
      { kind: 'flatness', fromHz: 0, toHz: 800, withinDb: 0.5 },
      { kind: 'alias-floor', toHz: 800, atLeastDb: 70 },
      { kind: 'delay', atHz: 100, atMostSeconds: 1e-3 },
      { kind: 'effective-bits', atLeast: 17 },
    ]
    const chain = simple(sheet)
    const [usable, flat, alias, delay, bits] = checkChainSheet(chain, null)
    expect(usable).toMatchObject({ unit: 'Hz', met: true, limit: 700, requirement: sheet[0] })
    expect(usable!.margin).toBeCloseTo(lossAt(0.5) - 700, 4)
    expect(flat!.value).toBeCloseTo(lossDb(800), 9)
    expect(flat).toMatchObject({ met: false, worstHz: 800 })
    expect(alias!.value).toBeCloseTo(lossDb(9200), 9)
    expect(alias).toMatchObject({ met: true, worstHz: 800 })
    expect(delay!.value).toBe(chainResponse(chain, at(100)).groupDelaySeconds[0])
    expect(bits!.value).toBe(noiseBudget(chain).effectiveBits)
    // 16 bits, and a sixth of the band kept.
    expect(bits!.value).toBeCloseTo(16 + Math.log2(5000 / 800) / 2, 1)
  })

  it('say of a floor that the wanted signal is held back as well', () => {
    const floor = { kind: 'alias-floor', toHz: 4000, atLeastDb: 20 } as const
    const kept = { fromHz: 0, toHz: 4000 }
    const [low] = checkChainSheet(
      computeChain(chainOf([flatSensor, antiAlias(4, 1000), converter(10_000)], { kept, sheet: [floor] })),
      null,
    )
    // The worst is at 4 kHz, which is 48.2 dB down itself.
    expect(low).toMatchObject({ met: true, worstHz: 4000 })
    expect(low!.reason).toBe(
      `The wanted signal itself is ${Number(lossDb(4000).toFixed(1))} dB down at 4000 Hz: the floor says little.`,
    )
    expect(checkChainSheet(simple([{ ...floor, toHz: 800 }]), null)[0]).not.toHaveProperty('reason')
  })

  it('take the best constant delay off a phase', () => {
    const line = { kind: 'phase', fromHz: 0, toHz: 800, withinDegrees: 90 } as const
    const [result] = checkChainSheet(simple([line]), null)
    // The same by brute force: the delay that leaves least squares, on an even grid.
    const hertz = Float64Array.from({ length: 4001 }, (_, n) => n / 5)
    const phases = chainResponse(simple(), hertz).phaseRadians
    const [over, under] = hertz.reduce(
      ([a = 0, b = 0], f, n) => [a - 2 * Math.PI * f * phases[n]!, b + (2 * Math.PI * f) ** 2],
      [0, 0],
    )
    const left = phases.map((phase, n) => Math.abs(phase + (2 * Math.PI * hertz[n]! * over!) / under!))
    expect(result!.value).toBeCloseTo((Math.max(...left) * 180) / Math.PI, 1)
  })

  it('stay open without a tolerance run, or with one of other settings', () => {
    const line = { kind: 'channel-match', toHz: 600, withinDegrees: 1, withinDb: 0.1 } as const
    const chain = simple([line])
    expect(checkChainSheet(chain, null)).toMatchObject([{ value: null, met: null, margin: null }])
    const other = { ...match(chain, 1, 0.1), settings: { ...chain.spec.tolerance, seed: 9 } }
    expect(checkChainSheet(chain, other)).toMatchObject([{ met: null, reason: expect.stringContaining('settings') }])
  })

  it('speak of gain or phase, whichever is nearer to its limit, up to their edge', () => {
    const line = { kind: 'channel-match', toHz: 600, withinDegrees: 1, withinDb: 0.1 } as const
    const chain = simple([line])
    const [phase] = checkChainSheet(chain, match(chain, 1.2, 0.1))
    expect(phase).toMatchObject({ unit: '°', met: true, worstHz: 600 })
    expect(phase!.value).toBeCloseTo(0.9, 12)
    const [gain] = checkChainSheet(chain, match(chain, 0.2, 0.16))
    expect(gain).toMatchObject({ unit: 'dB', limit: 0.1, met: false, worstHz: 600 })
    expect(gain!.value).toBeCloseTo(0.12, 12)
  })
})

describe('interferers', () => {
  const landings = (...interferers: readonly Interferer[]) =>
    interfererLandings(
      computeChain(
        chainOf([flatSensor, antiAlias(4, 1000), converter(10_000)], { kept: { fromHz: 0, toHz: 800 }, interferers }),
      ),
    )

  it('land where they fold to, and are as big as the chain leaves them', () => {
    const [pump, drive] = landings(
      { kind: 'tone', name: 'Pump', hz: 300, level: 2 },
      { kind: 'tone', name: 'Drive', hz: 20_400, level: 3 },
    )
    expect(pump).toMatchObject({ name: 'Pump', landsHz: 300, strip: 0, inKeptBand: true })
    expect(drive).toMatchObject({ landsHz: 400, strip: 4, inKeptBand: true })
    expect(drive!.levelDb).toBeCloseTo(-lossDb(20_400), 9)
    expect(drive!.level).toBeCloseTo(3 * 10 ** (-lossDb(20_400) / 20), 12)
  })

  it('agree with the fold paths behind decimations and integration', () => {
    const { spec } = computeChain(sixStages)
    for (const hz of [150, 3333, 6100, 50_900, 61_234]) {
      const chain = computeChain({ ...spec, interferers: [{ kind: 'tone', name: 'Tone', hz, level: 1 }] })
      const [landing] = interfererLandings(chain)
      const path = foldPaths(chain, landing!.landsHz).find(({ strip }) => strip === landing!.strip)
      expect(path!.inputHz).toBeCloseTo(hz, 6)
      expect(landing!.levelDb).toBeCloseTo(path!.levelDb, 5)
      // 1 g of acceleration at the landing frequency, as velocity in mm/s.
      const own = (9806.65 / (2 * Math.PI * landing!.landsHz)) * 10 ** (landing!.levelDb / 20)
      expect(landing!.level / own).toBeCloseTo(1, 9)
    }
  })

  it('of a band give the root mean square that gets through, and where most does', () => {
    const [inside, above] = landings(
      { kind: 'band', name: 'Rumble', fromHz: 10, toHz: 100, level: 0.5 },
      { kind: 'band', name: 'Hash', fromHz: 9000, toHz: 9100, level: 1 },
    )
    expect(inside!.level).toBeCloseTo(0.5, 4)
    expect(above).toMatchObject({ inputHz: 9000, landsHz: 1000, inKeptBand: false })
    const mean = Array.from({ length: 1000 }, (_, n) => 10 ** (-lossDb(9000.05 + n / 10) / 10))
    expect(above!.level).toBeCloseTo(Math.sqrt(mean.reduce((sum, value) => sum + value) / 1000), 7)
  })

  it('of a band across the kept one say so', () => {
    const [wide] = landings({ kind: 'band', name: 'Wide', fromHz: 8000, toHz: 12_000, level: 1 })
    expect(wide).toMatchObject({ inKeptBand: true, landsHz: 800, inputHz: 9200, keptShare: 0.4 })
    expect(landings({ kind: 'band', name: 'Off', fromHz: 1000, toHz: 4000, level: 1 })[0]!.inKeptBand).toBe(false)
  })
})

describe('a band that lands mostly outside the kept one', () => {
  // 5 kHz to 9.4 kHz at 10 kHz: only 9.2 kHz to 9.4 kHz lands in the kept band, on 800 Hz down to 600 Hz.
  const chain = computeChain(
    chainOf([flatSensor, antiAlias(4, 1000), converter(10_000)], {
      kept: { fromHz: 0, toHz: 800 },
      interferers: [{ kind: 'band', name: 'Gears', fromHz: 5000, toHz: 9400, level: 2 }],
    }),
  )

  it('counts by the part inside alone, in level, place and decibels', () => {
    const [landing] = interfererLandings(chain)
    expect(landing).toMatchObject({ inKeptBand: true, inputHz: 9200, landsHz: 800, strip: 1 })
    expect(landing!.keptShare).toBeCloseTo(200 / 4400, 12)
    expect(landing!.levelDb).toBeCloseTo(-lossDb(9200), 9)
    const squares = Array.from({ length: 2000 }, (_, n) => 10 ** (-lossDb(9200.05 + n / 10) / 10) * 0.1)
    expect(landing!.level).toBeCloseTo(2 * Math.sqrt(squares.reduce((sum, value) => sum + value) / 4400), 9)
  })

  it('counts every strip of a very wide one, evenly chosen where there are many', () => {
    const wide = (toHz: number, stages = [flatSensor, converter(10_000)]) =>
      interfererLandings(
        computeChain(
          chainOf(stages, {
            kept: { fromHz: 0, toHz: 800 },
            interferers: [{ kind: 'band', name: 'Hash', fromHz: 5000, toHz, level: 1 }],
          }),
        ),
      )[0]!
    for (const toHz of [505_000, 5_000_000, 500_000_000]) {
      const { keptShare, level } = wide(toHz)
      expect(keptShare).toBeCloseTo(800 / 5000, 2)
      expect(level).toBeCloseTo(Math.sqrt(800 / 5000), 2)
    }
  })
})

describe('the worst alias', () => {
  it('up to a lower edge is never worse', () => {
    const chain = computeChain(sixStages)
    const levels = [100, 400, 700, 1000].map((toHz) => worstAlias(chain, toHz).levelDb)
    levels.slice(1).forEach((level, n) => expect(level).toBeGreaterThanOrEqual(levels[n]! - 1e-9))
    expect(levels[3]! - levels[0]!).toBeGreaterThan(0.01)
  })
})
