import { describe, expect, it } from 'vitest'
import { formatDb, formatHz, formatInstant, formatNumber, formatQuantity, formatSeconds } from '@/lib/format/quantity'

const thin = '\u2009'

describe('numbers on screen', () => {
  it.each([
    [1200, `1.2${thin}kHz`],
    [120, `120${thin}Hz`],
    [999.96, `1${thin}kHz`],
    [0.4, `400${thin}mHz`],
    [0, `0${thin}Hz`],
  ])('%d Hz', (value, text) => expect(formatHz(value)).toBe(text))

  it('uses µ for microseconds and − for minus', () => {
    expect(formatSeconds(0.00085)).toBe(`850${thin}µs`)
    expect(formatDb(-17.8234)).toBe(`−17.82${thin}dB`)
    expect(formatNumber(-0.00321)).toBe('−0.00321')
  })
  it('never writes minus zero, NaN or Infinity', () => {
    expect(formatDb(-0.0001)).toBe(`0.00${thin}dB`)
    expect(formatNumber(Number.NaN)).toBe('—')
    expect(formatQuantity(-Infinity, 'dB')).toBe(`−∞${thin}dB`)
  })
  it('groups thousands by thin spaces and writes far magnitudes as powers of ten', () => {
    expect(formatNumber(123456, 6)).toBe(`123${thin}456`)
    expect(formatNumber(1.25e-7)).toBe('1.25×10⁻⁷')
  })
  it('writes what lies outside the prefixes as powers of ten, never as zero', () => {
    expect(formatQuantity(1e-30, 'V', 5)).toBe(`1×10⁻³⁰${thin}V`)
    expect(formatQuantity(-2.5e-13, 'V')).toBe(`−2.5×10⁻¹³${thin}V`)
    expect(formatQuantity(1e-12, 'V')).toBe(`1${thin}pV`)
    expect(formatQuantity(9.99996e-13, 'V')).toBe(`1${thin}pV`)
    expect(formatQuantity(1e30, 'g')).toBe(`1×10³⁰${thin}g`)
  })
  it('writes an instant in one fixed zone', () => {
    expect(formatInstant('2026-12-01T09:42:10Z')).toBe('01 Dec 2026 09:42 UTC')
  })
})
