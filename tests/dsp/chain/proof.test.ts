import { describe, expect, it } from 'vitest'
import { computeChain } from '@/dsp/chain/compute'
import { proofSteps, proveChain } from '@/dsp/chain/proof/prove'
import {
  foldChart,
  foldPaths,
  isFir,
  type ChainSpec,
  type ComputedChain,
  type DesignLink,
  type ProofResult,
} from '@/dsp'
import { antiAlias, chainOf, converter, decimate, flatSensor, sensor, sixStages, toVelocity } from './chains'

function finish<Result>(steps: Generator<number, Result>): { result: Result; progress: number[] } {
  const progress: number[] = []
  for (;;) {
    const next = steps.next()
    if (next.done === true) return { result: next.value, progress }
    progress.push(next.value)
  }
}

const prove = (spec: ChainSpec, seed = 1): ProofResult => finish(proofSteps(spec, { seed })).result

const linkTo = (spec: DesignLink['spec']): DesignLink => ({
  designId: '00000000-0000-4000-8000-000000000001',
  version: 1,
  drawing: 'D-1',
  title: 'A low-pass',
  spec,
})

const kaiser = chainOf([
  sensor,
  antiAlias(6, 4000),
  converter(25_600, 24),
  decimate('a', 4, { type: 'kaiser', taps: 61, passHz: 1000, stopHz: 5400, attenuationDb: 90 }),
  decimate('b', 2, { type: 'kaiser', taps: 95, passHz: 1000, stopHz: 2200, attenuationDb: 90 }),
])
const halfBands = chainOf([
  sensor,
  antiAlias(4, 6000),
  converter(12_800, 20),
  decimate('a', 2, { type: 'half-band', taps: 31, attenuationDb: 80 }),
  decimate('b', 2, { type: 'half-band', taps: 63, attenuationDb: 80 }),
])
const weakEquiripple = chainOf([
  flatSensor,
  antiAlias(2, 8000),
  converter(20_000, 16, 3),
  decimate('a', 5, { type: 'equiripple', taps: 31, passHz: 1000, stopHz: 2600, stopWeight: 10 }),
])
const recursive = chainOf([
  sensor,
  antiAlias(4, 4000),
  converter(16_000, 24),
  decimate('a', 4, {
    type: 'design',
    link: linkTo({
      format: 1,
      sampleRateHz: 16_000,
      budget: { magnitudeDb: 1, phaseDegrees: 10, removeDelay: true },
      analog: { family: 'elliptic', response: 'lowpass', order: 6, edgesHz: [1200], rippleDb: 0.1, attenuationDb: 70 },
      how: { method: 'bilinear', hold: 'edges' },
    }),
  }),
])
const twice = chainOf(
  [
    { ...sensor, unit: 'g' },
    antiAlias(4, 2000),
    converter(8000, 24),
    decimate('a', 2, { type: 'kaiser', taps: 41, passHz: 1000, stopHz: 2800, attenuationDb: 90 }),
    {
      id: 'int',
      bypassed: false,
      kind: 'shape',
      filter: { type: 'integrate', times: 2, unit: 'µm', highPass: { cornerHz: 5, order: 3 } },
    },
    decimate('b', 2, { type: 'half-band', taps: 31, attenuationDb: 70 }),
  ],
  { kept: { fromHz: 20, toHz: 600 } },
)
const withInterferers: ChainSpec = {
  ...kaiser,
  interferers: [
    { kind: 'tone', name: 'pump', hz: 297, level: 3 },
    { kind: 'tone', name: 'drive', hz: 25_100, level: 20 },
    { kind: 'band', name: 'gears', fromHz: 3000, toHz: 6000, level: 2 },
  ],
}
const noisy: ChainSpec = chainOf(
  [
    flatSensor,
    antiAlias(4, 4000),
    { ...converter(16_000), resolution: { by: 'noise', voltsPerRootHz: 1e-6 } },
    decimate('a', 8, { type: 'cic', order: 3, combDelay: 2, compensation: null }),
  ],
  { kept: { fromHz: 1, toHz: 400 } },
)
const bare = chainOf([flatSensor, converter(4000, 16)])

const chains: readonly (readonly [string, ChainSpec])[] = [
  ['Kaiser filters behind a resonant sensor', kaiser],
  ['half-band filters', halfBands],
  ['a short equiripple filter behind an averaging converter', weakEquiripple],
  ['CIC with compensation, half-band, velocity', sixStages],
  ['a linked filter with poles', recursive],
  ['integration twice, between decimations', twice],
  ['interferers', withInterferers],
  ['a converter known by its noise, CIC with two delays', noisy],
  ['nothing but a converter', bare],
]

describe('the proof on a signal', () => {
  it.each(chains)('agrees for %s', (_, spec) => {
    for (const seed of [1, 2, 3]) {
      const { lines, delay, agrees } = prove(spec, seed)
      expect(lines.filter((line) => !line.agrees)).toEqual([])
      expect(delay.agrees).toBe(true)
      expect(agrees).toBe(true)
    }
  })

  it.each(chains)('has bounds tight enough to mean something for %s', (_, spec) => {
    const { lines, delay } = prove(spec)
    const wanted = lines.filter(({ what }) => what === 'wanted')
    expect(wanted.length).toBeGreaterThanOrEqual(6)
    for (const { boundDb, comparison } of wanted) {
      expect(comparison).toBe('within')
      expect(boundDb).toBeLessThan(0.05)
    }
    expect(delay.boundSeconds).toBeLessThan(1e-3 / spec.kept.toHz)
  })

  it('sees images through at their level, not merely as absent', () => {
    const images = prove(weakEquiripple).lines.filter(({ what }) => what.startsWith('image'))
    expect(images.length).toBeGreaterThanOrEqual(6)
    const seen = images.filter(({ comparison }) => comparison === 'within')
    expect(seen.length).toBeGreaterThanOrEqual(4)
    expect(Math.min(...seen.map(({ boundDb }) => boundDb))).toBeLessThan(0.05)
  })

  it.each(chains)('measures the weak fold, and names strips as the fold chart does, for %s', (_, spec) => {
    const chain = computeChain(spec)
    const { lines } = prove(spec)
    const { weakStrip } = foldChart(chain, Float64Array.of(0))
    const [weak, ...more] = lines.filter(({ what }) => what.endsWith(', the weak fold'))
    expect(weak?.comparison).toBe('within')
    expect(more).toEqual([])
    for (const { what, inputHz } of lines.filter(({ what }) => what.startsWith('image'))) {
      const strip = Math.floor(inputHz / (chain.outputRateHz / 2))
      expect(what).toMatch(new RegExp(`^image from the ${strip + 1}(st|nd|rd|th) strip`, 'u'))
      if (what.endsWith('the weak fold')) expect(strip).toBe(weakStrip)
    }
  })

  // 16 bits over 1.6 kHz: a weak fold that the short run left in the noise.
  const deep = (attenuationDb: number): ChainSpec =>
    chainOf([
      flatSensor,
      antiAlias(8, 4000),
      converter(25_600, 16),
      decimate('a', 8, { type: 'kaiser', taps: 241, passHz: 1000, stopHz: 2150, attenuationDb }),
    ])

  it('runs longer, and drives harder, where the weak fold lies near the noise', () => {
    const [short, long] = [deep(80), deep(109)].map((spec) => prove(spec))
    expect(long!.samplesStored).toBe(4 * short!.samplesStored)
    const weak = long!.lines.find(({ what }) => what.endsWith('the weak fold'))!
    expect(weak.computedDb).toBeLessThan(-110)
    expect(weak).toMatchObject({ comparison: 'within', agrees: true })
    expect(long!.agrees).toBe(true)
  })

  it('says of what no run can tell that it is only not above', () => {
    const steep = chainOf([
      flatSensor,
      antiAlias(10, 1200),
      converter(51_200, 12),
      decimate('a', 16, { type: 'kaiser', taps: 401, passHz: 1000, stopHz: 2150, attenuationDb: 150 }),
    ])
    const { lines, agrees } = prove(steep)
    const images = lines.filter(({ what }) => what.startsWith('image'))
    expect(images.length).toBeGreaterThanOrEqual(6)
    expect(images.every(({ comparison }) => comparison === 'not above')).toBe(true)
    expect(agrees).toBe(true)
  })

  it('computes what foldPaths says of each image', () => {
    const chain = computeChain(sixStages)
    for (const { inputHz, landsHz, computedDb } of prove(sixStages).lines) {
      const path = foldPaths(chain, landsHz, 1.01 * inputHz).find((one) => Math.abs(one.inputHz - inputHz) < 1e-6)
      expect(path?.levelDb).toBeCloseTo(computedDb, 6)
    }
  })

  it('has its levels in the density of the stored samples', () => {
    const { spectrum } = prove(kaiser)
    const { measuredDensityDb, computedDensityDb, frequenciesHz } = spectrum
    expect(frequenciesHz.at(-1)).toBe(1600)
    // Lines of the base band stand far above the noise; at most those of images near it may differ.
    const clear = [...computedDensityDb.keys()].filter((k) => computedDensityDb[k]! > -80 && k > 0)
    expect(clear.length).toBeGreaterThan(200)
    for (const k of clear) expect(measuredDensityDb[k]).toBeCloseTo(computedDensityDb[k]!, 1)
  })

  it('puts interferers where they land, and says their level', () => {
    const { lines, notes } = prove(withInterferers)
    const drive = lines.find(({ what }) => what.includes('drive'))!
    expect(drive.inputHz).toBeCloseTo(25_100, -1)
    // 25,600 Hz − 25,100 Hz.
    expect(drive.landsHz).toBeCloseTo(25_600 - drive.inputHz, 6)
    expect(lines.filter(({ what }) => what.includes('gears'))).toHaveLength(8)
    expect(notes).toEqual([])
    const loud = prove({ ...withInterferers, interferers: [{ kind: 'tone', name: 'pump', hz: 297, level: 400 }] })
    expect(loud.notes[0]).toMatch(/fill the converter/u)
    expect(loud.agrees).toBe(true)
  })

  it('says which interferer is too high to be run', () => {
    const far = prove({ ...kaiser, interferers: [{ kind: 'tone', name: 'radio', hz: 9e8, level: 1 }] })
    expect(far.notes[0]).toMatch(/“radio” found no place/u)
  })

  it('refuses a converter whose steps are larger than the signal', () => {
    const coarse = {
      ...kaiser,
      stages: kaiser.stages.map((stage) => (stage.kind === 'converter' ? converter(25_600, 1) : stage)),
    }
    expect(() => prove(coarse)).toThrow(
      expect.objectContaining({ code: 'too-few-bits', field: 'stages.2.resolution.bits' }),
    )
  })

  it('rises from 0 to 1 and gives the same for the same seed', () => {
    const { progress, result } = finish(proofSteps(halfBands, { seed: 9 }))
    expect(progress.length).toBeGreaterThan(10)
    expect(progress.every((value, k) => value >= (progress[k - 1] ?? 0) && value <= 1)).toBe(true)
    expect(progress.at(-1)).toBe(1)
    expect(prove(halfBands, 9)).toEqual(result)
    expect(prove(halfBands, 10).lines).not.toEqual(result.lines)
  })
})

describe('a chain that is not the computed one', () => {
  const proveAgainst = (computed: ComputedChain, run: ComputedChain): ProofResult =>
    finish(proveChain(computed, run, { seed: 4 })).result

  it('disagrees in its images when one tap is a thousandth off', () => {
    const chain = computeChain(kaiser)
    const stages = chain.stages.map((stage) => ({
      ...stage,
      parts: stage.parts.map((part) => {
        if (stage.stage.id !== 'b' || part.kind !== 'digital' || !isFir(part.filter)) return part
        const taps = part.filter.taps.map((tap, n) => (n === 40 ? tap + 1e-3 : tap))
        return { ...part, filter: { ...part.filter, taps } }
      }),
    }))
    const { agrees, lines } = proveAgainst(chain, { ...chain, stages })
    expect(agrees).toBe(false)
    expect(lines.some((line) => !line.agrees && line.what.startsWith('image'))).toBe(true)
  })

  it('disagrees in its delay alone when a sample is late', () => {
    const chain = computeChain(halfBands)
    const stages = chain.stages.map((stage) => ({
      ...stage,
      parts: stage.parts.map((part) => {
        if (stage.stage.id !== 'a' || part.kind !== 'digital' || !isFir(part.filter)) return part
        return { ...part, filter: { ...part.filter, taps: Float64Array.of(0, ...part.filter.taps) } }
      }),
    }))
    const { delay, lines, agrees } = proveAgainst(chain, { ...chain, stages })
    expect(lines.every((line) => line.agrees)).toBe(true)
    expect(delay.agrees).toBe(false)
    expect(delay.measuredSeconds - delay.computedSeconds).toBeCloseTo(1 / 12_800, 8)
    expect(agrees).toBe(false)
  })

  const changes: readonly (readonly [string, ChainSpec, (spec: ChainSpec) => ChainSpec])[] = [
    ['a corner one per cent off', kaiser, (spec) => ({ ...spec, stages: spec.stages.with(1, antiAlias(6, 4040)) })],
    [
      'a CIC filter of another order',
      sixStages,
      (spec) => ({
        ...spec,
        stages: spec.stages.with(
          3,
          decimate('cic', 8, { type: 'cic', order: 3, combDelay: 1, compensation: { taps: 21, passHz: 1200 } }),
        ),
      }),
    ],
    [
      'averaging once instead of three times',
      weakEquiripple,
      (spec) => ({ ...spec, stages: spec.stages.with(2, converter(20_000, 16, 1)) }),
    ],
    [
      'a high-pass of the integration off',
      sixStages,
      (spec) => ({
        ...spec,
        stages: spec.stages.with(5, {
          ...toVelocity,
          filter: { ...toVelocity.filter, highPass: { cornerHz: 2, order: 2 } },
        } as typeof toVelocity),
      }),
    ],
    [
      'a filter that is missing',
      halfBands,
      (spec) => ({
        ...spec,
        stages: spec.stages.with(4, decimate('b', 2, { type: 'half-band', taps: 15, attenuationDb: 40 })),
      }),
    ],
  ]
  it.each(changes)('disagrees with %s', (_, spec, change) => {
    expect(proveAgainst(computeChain(spec), computeChain(change(spec))).agrees).toBe(false)
  })
})
