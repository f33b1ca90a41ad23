import { describe, expect, it } from 'vitest'
import { DesignError, designFir, type FirBand, type FirSpec } from '@/dsp'
import { lowPass, RATE } from './specs'

const plain = lowPass('equiripple', 41, 0.3, 0.4)
const [pass, stop] = plain.bands as [FirBand, FirBand]
const bands = (...list: FirBand[]): FirSpec => ({ ...plain, bands: list })
const highPass: FirSpec = {
  ...plain,
  response: 'highpass',
  bands: [
    { ...pass, gain: 0 },
    { ...stop, gain: 1 },
  ],
}
const slope: FirSpec = { ...plain, response: 'differentiator', bands: [{ fromHz: 0, toHz: 1, gain: 1 }] }

function refusal(spec: FirSpec, rate = RATE): DesignError {
  try {
    designFir(spec, rate)
  } catch (error) {
    if (error instanceof DesignError) return error
    throw error
  }
  throw new Error('It was not refused.')
}

/** The statement with one part replaced by what a refusal offers. */
function withPart(spec: FirSpec, field: string, value: unknown): FirSpec {
  const [, part = '', index, inner = ''] = field.split('.')
  if (index === undefined) return { ...spec, [part]: value }
  return { ...spec, bands: spec.bands.map((band, k) => (k === Number(index) ? { ...band, [inner]: value } : band)) }
}

describe('refusals of an FIR filter', () => {
  it.each([
    ['too few taps', { ...plain, taps: 2 }, 'fir.taps'],
    ['too many', { ...plain, taps: 5000 }, 'fir.taps'],
    ['no whole number of them', { ...plain, taps: 40.4 }, 'fir.taps'],
    ['NaN of them', { ...plain, taps: Number.NaN }, 'fir.taps'],
    ['a band that ends before it begins', bands({ ...pass, fromHz: 0.35 }, stop), 'fir.bands.0.toHz'],
    ['a band below 0 Hz', bands({ ...pass, fromHz: -1 }, stop), 'fir.bands.0.fromHz'],
    ['a band above half the rate', bands(pass, { ...stop, toHz: 1.2 }), 'fir.bands.1.toHz'],
    ['a band all above it', bands(pass, { ...stop, fromHz: 1.1, toHz: 1.2 }), 'fir.bands.1.fromHz'],
    ['bands that touch', bands(pass, { ...stop, fromHz: 0.3 }), 'fir.bands.1.fromHz'],
    ['a gain that isn’t plain', bands({ ...pass, gain: 2 }, stop), 'fir.bands.0.gain'],
    ['a gain that is NaN', bands({ ...pass, gain: Number.NaN }, stop), 'fir.bands.0.gain'],
    ['a weight of 0', bands({ ...pass, weight: 0 }, stop), 'fir.bands.0.weight'],
    ['weights too unlike', bands({ ...pass, weight: 1e-4 }, { ...stop, weight: 1e5 }), 'fir.bands.1.weight'],
    ['nothing that passes', { ...bands({ ...pass, gain: 0 }, stop), response: 'multiband' }, 'fir.bands.0.gain'],
    ['a high-pass of even length', { ...highPass, taps: 40 }, 'fir.taps'],
    ['a differentiator of odd length up to half the rate', slope, 'fir.taps'],
    ['a differentiator that passes nothing', withPart(slope, 'fir.bands.0.gain', 0), 'fir.bands.0.gain'],
    ['a windowed filter without window', { ...plain, kind: 'windowed' }, 'fir.window'],
    ['a Kaiser window without attenuation', { ...plain, kind: 'windowed', window: 'kaiser' }, 'fir.attenuationDb'],
    [
      'a Kaiser window of 400 dB',
      { ...plain, kind: 'windowed', window: 'kaiser', attenuationDb: 400 },
      'fir.attenuationDb',
    ],
    ['a half-band filter of another length', lowPass('half-band', 41, 0.4, 0.6), 'fir.taps'],
    ['half-band edges that are not even', lowPass('half-band', 43, 0.4, 0.7), 'fir.bands.1.fromHz'],
    ['a half-band filter that is another response', { ...highPass, kind: 'half-band', taps: 43 }, 'fir.response'],
    ['a minimum-phase filter too long to factor', lowPass('minimum-phase', 257, 0.3, 0.32), 'fir.taps'],
    ['a minimum-phase differentiator', { ...slope, kind: 'minimum-phase' }, 'fir.response'],
  ] as const)('%s, with the nearest that works', (_, spec, field) => {
    const error = refusal(spec as FirSpec)
    expect(error.field).toBe(field)
    expect(error.message).toMatch(/\.$/)
    expect(error.nearest).toBeDefined()
    // What is offered is no longer refused for the same reason.
    const mended = withPart(spec as FirSpec, field, error.nearest)
    try {
      designFir(mended, RATE)
    } catch (next) {
      expect(next).toBeInstanceOf(DesignError)
      expect(`${(next as DesignError).field} ${(next as DesignError).code}`).not.toBe(`${field} ${error.code}`)
    }
  })

  it('a number of bands that doesn’t make the response', () => {
    expect(refusal({ ...plain, response: 'bandpass' })).toMatchObject({ field: 'fir.bands', nearest: 3 })
    expect(refusal({ ...plain, response: 'multiband', bands: [pass] })).toMatchObject({
      field: 'fir.bands',
      nearest: 2,
    })
  })

  it('a window where none is used, a rate that is none', () => {
    expect(refusal({ ...plain, window: 'hann' }).field).toBe('fir.window')
    expect(refusal(plain, 0).field).toBe('sampleRateHz')
  })

  it('what double precision doesn’t reach, in the number of taps that was asked for', () => {
    expect(refusal(lowPass('equiripple', 601, 0.1, 0.8))).toMatchObject({ code: 'not-converged', field: 'fir.taps' })
    const error = refusal(lowPass('minimum-phase', 90, 0.3, 0.6))
    expect(error.field).toBe('fir.taps')
    expect(Number(error.nearest)).toBeLessThan(90)
    expect(designFir(lowPass('minimum-phase', Number(error.nearest), 0.3, 0.6), RATE).taps).toHaveLength(
      Number(error.nearest),
    )
  })
})
