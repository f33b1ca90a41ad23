import { describe, expect, it } from 'vitest'
import {
  parseDecibels,
  parseDegrees,
  parseFrequency,
  parseInUnit,
  parseOrder,
  parseCount,
  parsePercent,
  parseSeconds,
} from '@/lib/units/parse'

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

describe('times, parts and counts', () => {
  it.each([
    ['5 ms', 5e-3],
    ['200 µs', 2e-4],
    ['200 \u03bcs', 2e-4],
    ['200us', 2e-4],
    ['0,5 s', 0.5],
    ['90 ns', 9e-8],
    ['2 min', 120],
    ['3 sec', 3],
  ])('%s', (text, seconds) => {
    const parsed = parseSeconds(text)
    expect(parsed.ok && parsed.value).toBeCloseTo(seconds, 12)
  })
  it.each(['200', '', 'soon', '5 m', '5 Hz'])('takes %j for no time', (text) => {
    const parsed = parseSeconds(text)
    expect(parsed.ok).toBe(false)
    if (!parsed.ok) expect(parsed.message).toMatch(/ms or/)
  })
  it('reads per cent, bits and multiplies', () => {
    expect(parsePercent('5')).toEqual({ ok: true, value: 5 })
    expect(parsePercent('2,5 %')).toEqual({ ok: true, value: 2.5 })
    expect(parsePercent('half').ok).toBe(false)
    expect(parseCount('16 bits')).toEqual({ ok: true, value: 16 })
    expect(parseCount('1 multiply')).toEqual({ ok: true, value: 1 })
    expect(parseCount('7.5')).toMatchObject({ ok: false, message: expect.stringContaining('such as 8') as string })
    expect(parseCount('20 multiplies')).toEqual({ ok: true, value: 20 })
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

describe('values in a unit', () => {
  it.each([
    ['0.5', 'g', 0.5],
    ['0,5 g', 'g', 0.5],
    ['50 mg', 'g', 0.05],
    ['50\u2009mg', 'g', 0.05],
    ['3 µV/√Hz', 'V/√Hz', 3e-6],
    ['200 nV/rtHz', 'V/√Hz', 2e-7],
    ['2 uV/sqrt(Hz)', 'V/√Hz', 2e-6],
    ['5 m', 'm', 5],
    ['100m', 'V', 0.1],
    ['0.4u', 'V/√Hz', 4e-7],
    ['500n', 'V/√Hz', 5e-7],
    ['500 nV', 'V/√Hz', 5e-7],
    ['1 V', 'V/√Hz', 1],
    ['200m', 'g', 0.2],
    ['2k', 'Pa', 2000],
    ['5 mm', 'm', 0.005],
    ['1 m/s^2', 'm/s²', 1],
  ])('%s in %s', (text, unit, value) => expect(parseInUnit(text, unit)).toEqual({ ok: true, value }))

  it.each([
    ['5 V', 'g'],
    ['g', 'g'],
    ['', 'g'],
    ['5 km/s', 'mm/s'],
    ['5 m', 'mm'],
    ['3 k', 'µm/m'],
    ['500 ng', 'V/√Hz'],
  ])('refuses %s in %s', (text, unit) => expect(parseInUnit(text, unit)).toMatchObject({ ok: false }))

  it('gives an example that somebody would type', () => {
    expect(parseInUnit('x', 'V/√Hz')).toMatchObject({ message: expect.stringContaining('500\u2009nV/√Hz') as string })
  })
})
