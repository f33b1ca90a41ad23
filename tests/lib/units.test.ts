import { describe, expect, it } from 'vitest'
import { parseDecibels, parseDegrees, parseFrequency, parseOrder } from '@/lib/units/parse'

const at = { nyquistHz: 500 }

describe('frequencies as people type them', () => {
  it.each([
    ['120', 120],
    ['120 Hz', 120],
    ['2.5k', 2500],
    ['2.5 kHz', 2500],
    ['2,5 kHz', 2500],
    ['.5k', 500],
    ['1e3', 1000],
    ['12\u2009000 Hz', 12000],
    ['10 mHz', 0.01],
    ['2 MHz', 2e6],
    ['0.8 Nyquist', 400],
    ['0.25 fs', 250],
    ['0.5 fs/2', 250],
    ['1480 rpm', 1480 / 60],
    ['157 rad/s', 157 / (2 * Math.PI)],
    ['1/ms', 1000],
    ['9000 deg/s', 25],
  ])('%s', async (text, hertz) => {
    const parsed = await parseFrequency(text, at)
    expect(parsed.ok).toBe(true)
    if (parsed.ok) expect(parsed.value).toBeCloseTo(hertz, 9)
  })

  it.each(['', 'fast', '12 V', '3 m', '1e999', '5 Hz Hz', '5g', '2 m'])('refuses %j with a sentence', async (text) => {
    const parsed = await parseFrequency(text, at)
    expect(parsed.ok).toBe(false)
    if (!parsed.ok) expect(parsed.message).toMatch(/\.$/)
  })

  it('does not let the sampling rate be given as a part of itself', async () => {
    expect((await parseFrequency('0.8 Nyquist', { nyquistHz: null })).ok).toBe(false)
  })
})

describe('levels, angles and orders', () => {
  it('reads them with and without their unit', () => {
    expect(parseDecibels('0,5 dB')).toEqual({ ok: true, value: 0.5 })
    expect(parseDecibels('−3')).toEqual({ ok: true, value: -3 })
    expect(parseDegrees('1°')).toEqual({ ok: true, value: 1 })
    expect(parseOrder('order 4')).toEqual({ ok: true, value: 4 })
  })
  it('refuses half an order', () => {
    expect(parseOrder('2.5').ok).toBe(false)
  })
})
