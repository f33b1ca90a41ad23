import { describe, expect, it } from 'vitest'
import { chainResponse, computeChain, noiseBudget, type ChainStage } from '@/dsp'
import adc from '../../reference/adc_antialias_decimation.json' with { type: 'json' }
import { wholeTaps } from './chain-taps'
import { chainOf, converter, decimate, flatSensor, sixStages } from './chains'

const budgetOf = (stages: readonly ChainStage[], fromHz: number, toHz: number) =>
  noiseBudget(computeChain(chainOf([flatSensor, ...stages], { kept: { fromHz, toHz } })))

describe('the noise of a converter', () => {
  it.each(adc.quantisation_snr)('of $bits bits lies $value dB below a full sine (Bennett 1948)', ({ bits, value }) => {
    const { snrDb, effectiveBits } = budgetOf([converter(1000, bits)], 0, 500)
    expect(Math.abs(snrDb / value - 1)).toBeLessThan(1e-8)
    expect(effectiveBits).toBeCloseTo(bits, 9)
  })

  it.each(adc.enob)('of $sinad_db dB is worth $value bits (IEEE Std 1241)', ({ sinad_db, value }) => {
    // A density that leaves just this ratio over 500 Hz: full scale 5 V.
    const voltsPerRootHz = 5 / Math.SQRT2 / 10 ** (sinad_db / 20) / Math.sqrt(500)
    const { snrDb, effectiveBits } = budgetOf(
      [{ ...converter(1000), resolution: { by: 'noise', voltsPerRootHz } }],
      0,
      500,
    )
    expect(snrDb).toBeCloseTo(sinad_db, 8)
    expect(effectiveBits).toBeCloseTo(value, 5)
  })

  it.each(adc.oversampling_gain)('gains $value dB when a $osr-th of the band is kept', ({ osr, value, extra_bits }) => {
    const { snrDb, effectiveBits } = budgetOf([converter(1000 * osr, 16)], 0, 500)
    const whole = budgetOf([converter(1000 * osr, 16)], 0, 500 * osr)
    expect(snrDb - whole.snrDb).toBeCloseTo(value, 4)
    expect(effectiveBits - whole.effectiveBits).toBeCloseTo(extra_bits, 8)
  })

  it('is said in the sensor’s unit', () => {
    const { fullScale, rms, density, parts } = budgetOf([converter(1000, 16)], 0, 500)
    // 5 V at 0.1 V/g, and Δ/√12 of it.
    expect(fullScale).toBeCloseTo(50, 12)
    expect(rms).toBeCloseTo((10 / 2 ** 16 / Math.sqrt(12)) * 10, 12)
    expect(density).toBeCloseTo(rms / Math.sqrt(500), 12)
    expect(parts).toMatchObject([{ stageId: 'adc', source: 'converter', rms }])
  })

  it('over the whole output band is what the taps of the chain let through, folds included', () => {
    const stages = [
      converter(8000, 12),
      decimate('a', 4, { type: 'cic', order: 2, combDelay: 1, compensation: null }),
      decimate('b', 2, { type: 'half-band', taps: 23, attenuationDb: 60 }),
    ]
    const spec = chainOf([flatSensor, ...stages], { kept: { fromHz: 0, toHz: 500 } })
    const chain = computeChain(spec)
    const { rms } = noiseBudget(chain)
    // White samples of variance Δ²/12 come out with Σ h² of it.
    const power = wholeTaps(chain).reduce((sum, tap) => sum + tap * tap, 0)
    const step = (10 / 2 ** 12) * 10
    expect(Math.abs(rms / (step * Math.sqrt(power / 12)) - 1)).toBeLessThan(1e-6)
  })

  it('counts gain ahead of the converter against the full scale alone', () => {
    const chain = computeChain({ ...sixStages, stages: sixStages.stages.slice(0, 3) })
    const analog = 10 ** (chainResponse(chain, Float64Array.of(505)).magnitudeDb[0]! / 20)
    expect(noiseBudget(chain).fullScale).toBeCloseTo(50 / analog, 9)
  })
})
