import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  chainResponse,
  chainSketch,
  computeChain,
  foldPaths,
  integralOf,
  stageMagnitudeDb,
  interfererLandings,
  type ChainSpec,
  type ChainStage,
  type ComputedChain,
} from '@/dsp'
import adc from '../../reference/adc_antialias_decimation.json' with { type: 'json' }
import vibration from '../../reference/vibration_signals_spectra.json' with { type: 'json' }
import { boxcars, tapsGain } from './chain-taps'
import { antiAlias, chainOf, converter, decimate, flatSensor, sensor, sixStages, toVelocity } from './chains'

const decibels = (gain: number): number => 20 * Math.log10(gain)
const at = (...hertz: number[]): Float64Array => Float64Array.from(hertz)

const cicChain = (order: number, combDelay: number, factor: number): ComputedChain =>
  computeChain(
    chainOf(
      [
        flatSensor,
        converter(1000 * factor),
        decimate('cic', factor, { type: 'cic', order, combDelay, compensation: null }),
      ],
      { kept: { fromHz: 0, toHz: 100 } },
    ),
  )

describe('a CIC filter (Hogenauer 1981)', () => {
  it.each(adc.cic_exact)(
    'of R = $R, M = $M, N = $N has the gain of its formula',
    ({ R, M, N, f_re_output_rate, value }) => {
      const [level] = stageMagnitudeDb(cicChain(N, M, R), 2, at(1000 * f_re_output_rate))
      expect(level).toBeCloseTo(value.gain_db, 6)
    },
  )

  it.each(adc.cic_large_R)(
    'of $stages stages droops and folds at $bandwidth_re_output_rate of the output rate as the tables say',
    ({ bandwidth_re_output_rate, stages, value }) => {
      const [over = 1, under = 1] = bandwidth_re_output_rate.split('/').map(Number)
      const edge = (1000 * over) / under
      const [pass, image] = stageMagnitudeDb(cicChain(stages, 1, 256), 2, at(edge, 1000 - edge))
      expect(-pass!).toBeCloseTo(value.droop_db, 2)
      expect(Math.abs(-image! - value.alias_attenuation_db)).toBeLessThan(0.01)
    },
  )

  it('is what its running means are, nulls included, in magnitude, phase and delay', () => {
    const shape = fc.record({
      order: fc.integer({ min: 1, max: 6 }),
      combDelay: fc.integer({ min: 1, max: 2 }),
      factor: fc.integer({ min: 2, max: 20 }),
      turns: fc.double({ min: 0, max: 3, noNaN: true }),
    })
    fc.assert(
      fc.property(shape, ({ order, combDelay, factor, turns }) => {
        const chain = cicChain(order, combDelay, factor)
        const rate = 1000 * factor
        const [level] = stageMagnitudeDb(chain, 2, at(turns * rate))
        const direct = tapsGain(boxcars(order, combDelay * factor), turns * rate, rate)
        expect(Math.abs(10 ** (level! / 20) - direct)).toBeLessThan(1e-11)
      }),
      { numRuns: 60 },
    )
    const [null1, null2, dc] = stageMagnitudeDb(cicChain(3, 2, 8), 2, at(500, 3000, 0))
    expect([null1, null2, dc]).toEqual([-Infinity, -Infinity, 0])
    expect(chainResponse(cicChain(4, 1, 8), at(100)).groupDelaySeconds[0]).toBe((4 * 7) / 2 / 8000)
  })

  it('is lifted by its compensation up to the pass edge, and only shifted by it', () => {
    const chain = computeChain({ ...sixStages, stages: sixStages.stages.slice(0, 4) })
    const stage = chain.stages[3]!
    const hertz = Float64Array.from({ length: 121 }, (_, n) => n * 10)
    const droop = 10 ** (stageMagnitudeDb(cicChain(4, 1, 8), 2, at((1200 / 6400) * 1000))[0]! / 20)
    expect(decibels(droop)).toBeLessThan(-2)
    for (const level of stageMagnitudeDb(chain, 3, hertz)) expect(Math.abs(level)).toBeLessThan(0.01)
    expect(stageMagnitudeDb(chain, 3, at(0))[0]).toBeCloseTo(0, 12)
    expect(stage.delaySeconds).toBeCloseTo((4 * 7) / 2 / 51_200 + 10 / 6400, 12)
  })
})

describe('a half-band stage', () => {
  const chain = computeChain({ ...sixStages, stages: sixStages.stages.slice(0, 5) })
  const [part] = chain.stages[4]!.parts
  const taps = part?.kind === 'digital' && 'taps' in part.filter ? [...part.filter.taps] : []

  it('has ½ in the middle and exact zeros at every other tap beside it', () => {
    expect(taps).toHaveLength(47)
    expect(taps[23]).toBe(0.5)
    expect(taps.filter((tap, k) => k !== 23 && k % 2 === 1 && tap !== 0)).toEqual([])
    expect(taps.filter((tap) => tap !== 0)).toHaveLength(25)
  })

  it('is complementary about a quarter of its rate: A(ω) + A(π − ω) = 1, ½ at the quarter', () => {
    const amplitude = (hertz: number): number =>
      taps.reduce((sum, tap, k) => sum + tap * Math.cos((2 * Math.PI * hertz * (k - 23)) / 6400), 0)
    for (const hertz of [0, 400, 1111, 1600]) expect(amplitude(hertz) + amplitude(3200 - hertz)).toBeCloseTo(1, 12)
    expect(stageMagnitudeDb(chain, 4, at(1600))[0]).toBeCloseTo(decibels(0.5), 10)
  })

  it('keeps its stated attenuation from the edge that mirrors the pass edge', () => {
    // Kaiser 1974: room (A − 7.95)/(14.36·(N − 1)) of the rate, half of it above a quarter.
    const stopHz = 1600 + (((90 - 7.95) / 14.36 / 46) * 6400) / 2
    const hertz = Float64Array.from({ length: 400 }, (_, n) => stopHz + ((3200 - stopHz) * n) / 399)
    expect(Math.max(...stageMagnitudeDb(chain, 4, hertz))).toBeLessThan(-89)
  })

  it('costs the taps that differ, at the rate behind it', () => {
    // Twelve pairs and the middle.
    expect(chain.stages[4]!.multipliesPerStoredSample).toBe(13)
  })
})

describe('integration', () => {
  const chainAt = (rateHz: number, times: 1 | 2, unit: 'mm/s' | 'm/s' | 'µm', cornerHz = 0.01): ComputedChain =>
    computeChain(
      chainOf(
        [
          { ...flatSensor, unit: 'm/s²' },
          converter(rateHz),
          { ...toVelocity, filter: { type: 'integrate', times, unit, highPass: { cornerHz, order: 2 } } },
        ],
        { kept: { fromHz: 1, toHz: rateHz / 4 } },
      ),
    )

  it.each(vibration.integrator_error)(
    'by the trapezoidal rule at $frequency_hz Hz and $fs_hz Hz departs from the ideal as stated',
    ({ frequency_hz, fs_hz, value }) => {
      const { magnitudeDb } = chainResponse(chainAt(fs_hz, 1, 'm/s', fs_hz * 2e-6), at(frequency_hz))
      expect(Math.abs(magnitudeDb[0]! - value.trapezoid_error_db)).toBeLessThan(2e-5)
    },
  )

  it.each(vibration.sine_conversions.filter(({ frequency_hz }) => frequency_hz > 20))(
    'at $frequency_hz Hz makes velocity and displacement of acceleration (ISO 80000-3)',
    ({ frequency_hz, value }) => {
      const level = (times: 1 | 2, unit: 'mm/s' | 'µm', given: 'g' | 'm/s²', amplitude: number): number => {
        const rate = 1000 * frequency_hz
        const { spec } = chainAt(rate, times, unit, rate * 2e-6)
        const interferers = [{ kind: 'tone', name: 'Sine', hz: frequency_hz, level: amplitude } as const]
        const stages = spec.stages.map((stage) => (stage.kind === 'sensor' ? { ...stage, unit: given } : stage))
        return interfererLandings(computeChain({ ...spec, stages, interferers }))[0]!.level
      }
      // The trapezoidal rule takes (2π/1000)²/12 of it at this rate, a part in 300,000.
      const near = (found: number, wanted: number) => expect(Math.abs(found / wanted - 1)).toBeLessThan(1e-5)
      near(level(1, 'mm/s', 'm/s²', value.a_rms_m_s2), value.v_rms_mm_s)
      near(level(1, 'mm/s', 'g', value.a_rms_g), value.v_rms_mm_s)
      near(level(2, 'µm', 'm/s²', value.a_rms_m_s2), value.d_rms_um)
      near(level(2, 'µm', 'g', value.a_rms_g), value.d_rms_um)
    },
  )

  it('is cautioned about at a low rate, with what it would be at the converter’s', () => {
    const integrate = { ...toVelocity, id: 'v' }
    const down = decimate('d', 5, { type: 'kaiser', taps: 101, passHz: 1000, stopHz: 2560, attenuationDb: 60 })
    const cautions = (stages: readonly ChainStage[], toHz = 1000) =>
      computeChain(
        chainOf([flatSensor, converter(25_600), ...stages], { kept: { fromHz: 10, toHz } }),
      ).diagnostics.filter(({ severity }) => severity === 'caution')
    // tests/reference/vibration_signals_spectra.json: −1.1973 dB at 5120 Hz and −0.0437565 dB at 25.6 kHz.
    expect(cautions([down, integrate])).toMatchObject([
      {
        code: 'integration-error',
        severity: 'caution',
        field: 'stages.3.filter.times',
        message:
          'Integrating by trapezoids at 5.12 kHz takes 1.2 dB at 1 kHz; move it ahead of the decimation: at 25.6 kHz it would be 0.04 dB.',
      },
    ])
    expect(cautions([integrate, down])).toEqual([])
    expect(cautions([down, { ...integrate, bypassed: true }])).toEqual([])
    expect(cautions([down, integrate], 250)).toEqual([])
    // With nothing to move it ahead of, a higher rate is the cure.
    expect(cautions([integrate], 5000)[0]?.message).toContain('a higher converter rate')
    // At half the rate the rule leaves nothing.
    expect(cautions([down, integrate], 2560)[0]?.message).toContain('takes everything at 2.56 kHz')
  })

  it('is 3.01 dB down at the corner of its high-pass and blocks 0 Hz', () => {
    const { magnitudeDb } = chainResponse(chainAt(10_000, 1, 'mm/s', 2), at(0, 2))
    expect(magnitudeDb[0]).toBe(-Infinity)
    expect(magnitudeDb[1]).toBeCloseTo(-10 * Math.log10(2), 5)
  })

  it('reads an image against the ideal integral at the frequency where it stands', () => {
    const chain = chainAt(1000, 1, 'mm/s')
    const [own, image] = foldPaths(chain, 50, 1000)
    // The integrator repeats itself, so that an image is as big as what stands there.
    expect(image!.inputHz).toBe(950)
    expect(image!.levelDb).toBeCloseTo(own!.levelDb, 9)
  })

  it('names what becomes of a quantity', () => {
    expect([integralOf('acceleration', 1), integralOf('acceleration', 2), integralOf('pressure', 1)]).toEqual([
      'velocity',
      'displacement',
      null,
    ])
  })
})

describe('the sensor', () => {
  it('has its Q at resonance, unity in the flat part, and 3.01 dB less at its high-pass corner', () => {
    const chain = computeChain(chainOf([sensor, converter(102_400)]))
    const [top, flat, corner, dc] = stageMagnitudeDb(chain, 0, at(35_000, 200, 0.5, 0))
    expect(top).toBeCloseTo(decibels(30), 6)
    expect(flat).toBeCloseTo(0, 3)
    expect(corner).toBeCloseTo(-10 * Math.log10(2), 6)
    expect(dc).toBe(-Infinity)
  })

  it.each([0.3, 0.5, 0.7, 1000])('of Q = %s follows its formula', (q) => {
    const chain = computeChain(
      chainOf([{ ...sensor, highPass: null, resonance: { f0Hz: 5000, q } }, converter(51_200)]),
    )
    const hertz = at(10, 3000, 5000, 20_000)
    stageMagnitudeDb(chain, 0, hertz).forEach((level, n) => {
      const r = hertz[n]! / 5000
      expect(level).toBeCloseTo(-decibels(Math.hypot(1 - r * r, r / q)), 8)
    })
  })

  it('leaves the response alone by its sensitivity and the converter’s volts', () => {
    const level = (sensitivity: number) =>
      chainResponse(computeChain(chainOf([{ ...sensor, sensitivity }, converter(51_200)])), at(100)).magnitudeDb[0]
    expect(level(0.1)).toBe(level(10))
  })
})

describe('the whole response', () => {
  it('has the slope of its phase as its delay', () => {
    const chain = computeChain({
      ...sixStages,
      stages: sixStages.stages.map((stage) => (stage.kind === 'converter' ? converter(51_200, 24, 3) : stage)),
    })
    for (const hertz of [5, 60, 400, 1100, 1500]) {
      const step = hertz * 1e-5
      const { phaseRadians, groupDelaySeconds } = chainResponse(chain, at(hertz - step, hertz, hertz + step))
      const slope = -(phaseRadians[2]! - phaseRadians[0]!) / (2 * Math.PI * 2 * step)
      expect(Math.abs(slope / groupDelaySeconds[1]! - 1)).toBeLessThan(1e-5)
    }
  })

  it('is the sum of its stages, in level and in delay', () => {
    const chain = computeChain(sixStages)
    const hertz = at(505)
    const { magnitudeDb, groupDelaySeconds } = chainResponse(chain, hertz)
    const levels = chain.stages.map(({ index }) => stageMagnitudeDb(chain, index, hertz)[0]!)
    expect(levels.reduce((sum, level) => sum + level)).toBeCloseTo(magnitudeDb[0]!, 10)
    // 505 Hz is the middle of the kept band.
    expect(chainSketch(chain).delaySeconds).toBeCloseTo(groupDelaySeconds[0]!, 12)
  })

  it('averages as sin x/x, with half a sample of delay for each order', () => {
    const chain = computeChain(chainOf([flatSensor, converter(1000, 16, 2)], { kept: { fromHz: 0, toHz: 400 } }))
    const { magnitudeDb, groupDelaySeconds } = chainResponse(chain, at(250))
    expect(magnitudeDb[0]).toBeCloseTo(2 * decibels(Math.sin(Math.PI / 4) / (Math.PI / 4)), 10)
    expect(groupDelaySeconds[0]).toBe(0.001)
    expect(stageMagnitudeDb(chain, 1, at(1000, 3000))).toEqual(at(-Infinity, -Infinity))
  })

  it('is untouched by a bypassed stage, whose rate stays too', () => {
    const bypass = (spec: ChainSpec, id: string): ChainSpec => ({
      ...spec,
      stages: spec.stages.map((stage) => (stage.id === id ? { ...stage, bypassed: true } : stage)),
    })
    const without = sixStages.stages.filter(({ id }) => id !== 'half')
    const chain = computeChain(bypass(sixStages, 'half'))
    expect(chain.outputRateHz).toBe(6400)
    const hertz = at(20, 900)
    const there = chainResponse(computeChain({ ...sixStages, stages: without }), hertz)
    expect(chainResponse(chain, hertz).magnitudeDb).toEqual(there.magnitudeDb)
    const open = computeChain(bypass(sixStages, 'int'))
    expect(open.unit).toBe('g')
    expect(computeChain(sixStages).unit).toBe('mm/s')
  })

  it('makes only the edited stage’s filter again', () => {
    const filters = (spec: ChainSpec) =>
      computeChain(spec).stages.flatMap(({ parts }) => parts.map((part) => ('filter' in part ? part.filter : null)))
    const before = filters(sixStages)
    const after = filters({
      ...sixStages,
      stages: sixStages.stages.map((stage) => (stage.id === 'aa' ? antiAlias(5, 11_000) : stage)),
    })
    expect(after.map((filter, n) => filter === before[n])).toEqual(before.map((_, n) => n !== 2))
  })
})
