import { describe, expect, it } from 'vitest'
import {
  chainResponse,
  chainSpecSchema,
  computeChain,
  DesignError,
  noiseBudget,
  type ChainSpec,
  type ChainStage,
  type DesignLink,
  type DesignSpec,
} from '@/dsp'
import { antiAlias, chainOf, converter, decimate, flatSensor, sensor, sixStages, toVelocity } from './chains'

function refusalOf(spec: ChainSpec): DesignError {
  try {
    computeChain(spec)
  } catch (thrown) {
    if (thrown instanceof DesignError) return thrown
    throw thrown
  }
  throw new Error('The chain was not refused.')
}

const budget = { magnitudeDb: 0.1, phaseDegrees: 5, removeDelay: true }
const familyOf = (sampleRateHz: number): DesignSpec => ({
  format: 1,
  sampleRateHz,
  budget,
  analog: { family: 'butterworth', response: 'lowpass', order: 4, edgesHz: [1000] },
  how: { method: 'bilinear', hold: 'edges' },
})
const firOf = (sampleRateHz: number): DesignSpec => ({
  format: 1,
  sampleRateHz,
  budget,
  fir: {
    kind: 'equiripple',
    response: 'lowpass',
    taps: 31,
    bands: [
      { fromHz: 0, toHz: 500, gain: 1 },
      { fromHz: 900, toHz: sampleRateHz / 2, gain: 0 },
    ],
  },
})
const linkTo = (spec: DesignSpec): DesignLink => ({
  designId: '4b3f2c52-56a1-4a0e-9c0c-0f6c2a3f1d11',
  version: 2,
  drawing: 'D-7',
  title: 'Low-pass',
  spec,
})

const half = (factor: number, taps = 31, attenuationDb = 60) =>
  decimate('h', factor, { type: 'half-band', taps, attenuationDb })
const equiripple = (passHz: number, stopHz: number, taps = 31) =>
  decimate('e', 2, { type: 'equiripple', taps, passHz, stopHz, stopWeight: 1 })
const cic = (factor: number, id = 'c', compensation: { taps: number; passHz: number } | null = null) =>
  decimate(id, factor, { type: 'cic', order: 2, combDelay: 1, compensation })
const integrate = (times: 1 | 2, unit: 'mm/s' | 'µm' | 'N', order = 2, cornerHz = 2): ChainStage => ({
  ...toVelocity,
  filter: { type: 'integrate', times, unit, highPass: { cornerHz, order } },
})
const digital = (...stages: readonly ChainStage[]) => chainOf([flatSensor, converter(8000), ...stages])
const bypassed = { ...sensor, bypassed: true }

type Row = readonly [name: string, spec: ChainSpec, code: string, field: string, nearest: number | string | undefined]

const rows: readonly Row[] = [
  ['no sensor first', chainOf([antiAlias(4, 900), converter(8000)]), 'stage-order', 'stages.0.kind', 'sensor'],
  [
    'a second sensor',
    chainOf([sensor, { ...sensor, id: 'b' }, converter(8000)]),
    'stage-order',
    'stages.1.kind',
    'analog',
  ],
  ['no converter', chainOf([sensor, antiAlias(4, 900)]), 'missing-stage', 'stages', 'converter'],
  ['two converters', digital({ ...converter(8000), id: 'two' }), 'stage-order', 'stages.2.kind', 'decimate'],
  ['analog behind the converter', digital(antiAlias(4, 900)), 'stage-order', 'stages.2.kind', 'shape'],
  ['a decimation ahead of it', chainOf([sensor, half(2), converter(8000)]), 'stage-order', 'stages.1.kind', 'analog'],
  ['one name twice', digital(cic(2), cic(2)), 'stage-id', 'stages.3.id', 's3'],
  ['a bypassed sensor', chainOf([bypassed, converter(8000)]), 'bypassed', 'stages.0.bypassed', 'false'],
  ['a half-band by 4', digital(half(4)), 'factor-of-half-band', 'stages.2.factor', 2],
  ['taps no half-band has', digital(half(2, 33)), 'taps-of-half-band', 'stages.2.filter.taps', 35],
  ['a half-band too short', digital(half(2, 7, 100)), 'too-few-taps', 'stages.2.filter.taps', 15],
  [
    'a pass edge above half the rate',
    digital(equiripple(4100, 4200)),
    'edge-above-half-rate',
    'stages.2.filter.passHz',
    3600,
  ],
  [
    'a stop edge above half the rate',
    digital(equiripple(1000, 4200)),
    'edge-above-half-rate',
    'stages.2.filter.stopHz',
    2500,
  ],
  [
    'more taps than an exchange may have',
    digital(equiripple(500, 560, 300)),
    'too-many-taps',
    'stages.2.filter.taps',
    256,
  ],
  ['edges that cross', digital(equiripple(2000, 1500)), 'edges-out-of-order', 'stages.2.filter.stopHz', 2200],
  [
    'compensation beyond half the rate',
    digital(cic(2, 'c', { taps: 15, passHz: 2000 })),
    'edge-above-half-rate',
    'stages.2.filter.compensation.passHz',
    1600,
  ],
  [
    'a linked rate that differs',
    digital(decimate('l', 2, { type: 'design', link: linkTo(firOf(4000)) })),
    'rate-differs',
    'stages.2.filter.link',
    8000,
  ],
  [
    'an analog link without roots',
    chainOf([
      sensor,
      { id: 'l', bypassed: false, kind: 'analog', source: { from: 'design', link: linkTo(firOf(4000)) } },
      converter(8000),
    ]),
    'no-analog-roots',
    'stages.1.source.link',
    undefined,
  ],
  [
    'the integral of a pressure',
    {
      ...digital(integrate(1, 'mm/s')),
      stages: [{ ...flatSensor, unit: 'Pa' }, converter(8000), integrate(1, 'mm/s')],
    },
    'no-integral',
    'stages.2.filter.type',
    'design',
  ],
  [
    'a velocity integrated twice',
    { ...digital(), stages: [{ ...flatSensor, unit: 'mm/s' }, converter(8000), integrate(2, 'µm')] },
    'no-integral',
    'stages.2.filter.times',
    1,
  ],
  ['a unit of something else', digital(integrate(2, 'mm/s')), 'unit-of-integral', 'stages.2.filter.unit', 'µm'],
  ['a high-pass too weak', digital(integrate(2, 'µm', 1)), 'high-pass-order', 'stages.2.filter.highPass.order', 2],
  [
    'a high-pass beyond half the rate',
    digital(integrate(1, 'mm/s', 2, 5000)),
    'edge-above-half-rate',
    'stages.2.filter.highPass.cornerHz',
    3996,
  ],
  [
    'too large a factor in all',
    chainOf([flatSensor, converter(1e6), cic(256, 'a'), cic(32, 'b')], { kept: { fromHz: 0, toHz: 10 } }),
    'total-factor',
    'stages.3.factor',
    4,
  ],
  ['a kept band above half the output rate', digital(cic(8)), 'band-above-half-rate', 'kept.toHz', 500],
  [
    'a kept band upside down',
    { ...digital(), kept: { fromHz: 300, toHz: 200 } },
    'band-out-of-order',
    'kept.toHz',
    303,
  ],
  [
    'a line beyond the band',
    { ...digital(), sheet: [{ kind: 'flatness', fromHz: 0, toHz: 4500, withinDb: 1 }] },
    'band-above-half-rate',
    'sheet.0.toHz',
    4000,
  ],
  [
    'a delay beyond it',
    { ...digital(), sheet: [{ kind: 'delay', atHz: 4500, atMostSeconds: 1 }] },
    'band-above-half-rate',
    'sheet.0.atHz',
    4000,
  ],
  [
    'an interferer upside down',
    { ...digital(), interferers: [{ kind: 'band', name: 'Pump', fromHz: 200, toHz: 100, level: 1 }] },
    'band-out-of-order',
    'interferers.0.toHz',
    202,
  ],
]

describe('a chain that makes no sense', () => {
  it.each(rows)('is refused for %s', (_name, spec, code, field, nearest) => {
    expect(chainSpecSchema.safeParse(spec).success).toBe(true)
    const refusal = refusalOf(spec)
    expect({ code: refusal.code, field: refusal.field, nearest: refusal.nearest }).toEqual({ code, field, nearest })
    expect(refusal.message).toMatch(/^[A-Z0-9“].*\.$/su)
  })

  it('says both rates of a link', () => {
    const { message } = refusalOf(digital(decimate('l', 2, { type: 'design', link: linkTo(firOf(4000)) })))
    expect(message).toContain('4000 Hz')
    expect(message).toContain('8000 Hz')
  })
})

/** A spec with the value at a path replaced. */
function withValue(spec: ChainSpec, field: string, value: unknown): ChainSpec {
  const copy = structuredClone(spec) as unknown as Record<string, unknown>
  const keys = field.split('.')
  const last = keys.pop() ?? ''
  const holder = keys.reduce((at, key) => at[key] as Record<string, unknown>, copy)
  holder[last] = value
  return copy as unknown as ChainSpec
}

const numeric = rows.filter((row) => typeof row[4] === 'number' && !row[3].endsWith('.link'))

describe('the nearest value that works', () => {
  it.each(numeric)(
    'makes the chain compute, or gives way to another refusal: %s',
    (_name, spec, _code, field, nearest) => {
      const mended = withValue(spec, field, nearest)
      let left: DesignError | null = null
      try {
        computeChain(mended)
      } catch (thrown) {
        if (!(thrown instanceof DesignError)) throw thrown
        left = thrown
      }
      expect(left?.field).not.toBe(field)
    },
  )
})

const withSensor = (part: Partial<typeof sensor>) => chainOf([{ ...flatSensor, ...part }, converter(8000)])
const withConverter = (part: Partial<ReturnType<typeof converter>>) =>
  chainOf([flatSensor, { ...converter(8000), ...part }])

const outOfRange: readonly (readonly [spec: ChainSpec, field: string, nearest: number])[] = [
  [{ ...digital(), kept: { fromHz: 0, toHz: 1e-305 } }, 'kept.toHz', 1e-6],
  [{ ...digital(), kept: { fromHz: 1e-300, toHz: 1e-6 } }, 'kept.fromHz', 0],
  [{ ...digital(), kept: { fromHz: 9e-7, toHz: 1 } }, 'kept.fromHz', 1e-6],
  [withSensor({ sensitivity: 1e-160 }), 'stages.0.sensitivity', 1e-9],
  [withSensor({ sensitivity: 1e-308 }), 'stages.0.sensitivity', 1e-9],
  [withSensor({ resonance: { f0Hz: 1e-308, q: 1 } }), 'stages.0.resonance.f0Hz', 1e-6],
  [withSensor({ resonance: { f0Hz: 1, q: 1e-308 } }), 'stages.0.resonance.q', 1e-3],
  [withSensor({ highPass: { cornerHz: 1e-308, order: 4 } }), 'stages.0.highPass.cornerHz', 1e-6],
  [withConverter({ fullScaleVolts: 1e-308 }), 'stages.1.fullScaleVolts', 1e-6],
  [withConverter({ resolution: { by: 'noise', voltsPerRootHz: 1e-160 } }), 'stages.1.resolution.voltsPerRootHz', 1e-12],
  // Behind it stands a filter whose edges would be too high for that rate: the rate is what is wrong.
  [chainOf([flatSensor, converter(1e-308), equiripple(100, 200)]), 'stages.1.sampleRateHz', 8e-6],
  [digital(equiripple(1e-308, 200)), 'stages.2.filter.passHz', 1e-6],
  [digital(equiripple(1e-308, 1e-307)), 'stages.2.filter.passHz', 1e-6],
  [digital(cic(2, 'c', { taps: 15, passHz: 1e-200 })), 'stages.2.filter.compensation.passHz', 1e-6],
  [digital(integrate(1, 'mm/s', 2, 1e-300)), 'stages.2.filter.highPass.cornerHz', 8.000008e-3],
  [{ ...digital(), sheet: [{ kind: 'delay', atHz: 1e-308, atMostSeconds: 1 }] }, 'sheet.0.atHz', 1e-6],
  [{ ...digital(), sheet: [{ kind: 'flatness', fromHz: 1e-308, toHz: 5, withinDb: 1 }] }, 'sheet.0.fromHz', 0],
  [{ ...digital(), sheet: [{ kind: 'alias-floor', toHz: 1e-308, atLeastDb: 9 }] }, 'sheet.0.toHz', 1e-6],
  [{ ...digital(), interferers: [{ kind: 'tone', name: 'Pump', hz: 1e-308, level: 1 }] }, 'interferers.0.hz', 1e-6],
  [
    { ...digital(), interferers: [{ kind: 'tone', name: 'Pump', hz: 50, level: 1e-300 }] },
    'interferers.0.level',
    1e-15,
  ],
  [
    { ...digital(), interferers: [{ kind: 'band', name: 'Pump', fromHz: 1e-9, toHz: 5, level: 1 }] },
    'interferers.0.fromHz',
    1e-6,
  ],
]

describe('a value that no instrument has', () => {
  it.each(outOfRange)('is refused beside its field, with the nearest in range (%#)', (spec, field, nearest) => {
    expect(chainSpecSchema.safeParse(spec).success).toBe(true)
    const refusal = refusalOf(spec)
    expect({ code: refusal.code, field: refusal.field, nearest: refusal.nearest }).toEqual({
      code: 'out-of-range',
      field,
      nearest,
    })
    let left: DesignError | null = null
    try {
      computeChain(withValue(spec, field, nearest))
    } catch (thrown) {
      if (!(thrown instanceof DesignError)) throw thrown
      left = thrown
    }
    expect(left?.field).not.toBe(field)
  })

  it('leaves every figure finite at the ends of the ranges', () => {
    for (const sensitivity of [1e-9, 1e9]) {
      for (const fullScaleVolts of [1e-6, 1e6]) {
        for (const resolution of [
          { by: 'noise', voltsPerRootHz: 1e-12 },
          { by: 'noise', voltsPerRootHz: 1 },
          { by: 'bits', bits: 32 },
        ] as const) {
          const kept = { fromHz: 0, toHz: 1e-6 }
          const stages = [
            { ...flatSensor, sensitivity },
            { ...converter(8000), fullScaleVolts, resolution },
          ]
          const chain = computeChain(chainOf(stages, { kept }))
          const { rms, density, fullScale, snrDb, effectiveBits } = noiseBudget(chain)
          expect([rms, density, fullScale, snrDb, effectiveBits].every(Number.isFinite)).toBe(true)
          const { magnitudeDb } = chainResponse(chain, Float64Array.of(0, 5e-7, 1e-6))
          expect(magnitudeDb.every(Number.isFinite)).toBe(true)
        }
      }
    }
  })
})

describe('a name', () => {
  it.each(['\u200b\u2060', '\ufeff', '\u00ad', ' \u200d '])('has a character that can be seen (%#)', (name) => {
    expect(chainSpecSchema.safeParse(withSensor({ name })).success).toBe(false)
  })

  it.each(['Pump', '加速度', '№ 3', '→', '#'])('may be %s', (name) => {
    expect(chainSpecSchema.safeParse(withSensor({ name })).success).toBe(true)
  })
})

describe('links that fit', () => {
  it('run at the rate of their stage, and as the analog original of a family', () => {
    const link = linkTo(familyOf(8000))
    const analog: ChainStage = { id: 'a', bypassed: false, kind: 'analog', source: { from: 'design', link } }
    const shape: ChainStage = { id: 's', bypassed: false, kind: 'shape', filter: { type: 'design', link } }
    const chain = computeChain(chainOf([flatSensor, analog, converter(8000), shape]))
    expect(chain.stages[1]!.parts).toMatchObject([{ kind: 'analog', filter: { domain: 's' } }])
    expect(chain.stages[3]!.parts).toMatchObject([{ kind: 'digital', filter: { domain: 'z', sampleRateHz: 8000 } }])
    // Two full sections of order 4, each with b0, b1, b2, a1, a2, less those that are 1.
    expect(chain.stages[3]!.multipliesPerStoredSample).toBeGreaterThanOrEqual(8)
    expect(chain.stages[3]!.words).toBe(chain.stages[3]!.multipliesPerStoredSample + 4)
  })

  it('counts rates, factors and units from stage to stage', () => {
    const chain = computeChain(sixStages)
    expect(chain.stages.map(({ outRateHz }) => outRateHz)).toEqual([null, null, 51_200, 6400, 3200, 3200])
    expect(chain.stages.map(({ factor }) => factor)).toEqual([1, 1, 1, 8, 2, 1])
    expect(chain).toMatchObject({ converterIndex: 2, converterRateHz: 51_200, outputRateHz: 3200, unit: 'mm/s' })
  })
})
