import { describe, expect, it } from 'vitest'
import { requirementSchema, type Requirement } from '@/dsp'
import {
  marginWords,
  requirementKindWords,
  requirementParts,
  requirementText,
  resultQuantity,
  sheetSummary,
  worstWords,
} from '@/lib/designs/requirement-words'

const plain = (text: string | null) => text?.replaceAll('\u2009', ' ')

const said: readonly (readonly [Requirement, string])[] = [
  [{ kind: 'pass', fromHz: 0, toHz: 120, withinDb: 0.5 }, 'Keep 0 Hz to 120 Hz within 0.5 dB'],
  [{ kind: 'stop', fromHz: 180, attenuationDb: 60 }, 'Lose 180 Hz and above by 60 dB'],
  [{ kind: 'stop', fromHz: 49, toHz: 51, attenuationDb: 40 }, 'Lose 49 Hz to 51 Hz by 40 dB'],
  [{ kind: 'keep-tone', hz: 50, withinDb: 0.1 }, 'Keep the tone at 50 Hz within 0.1 dB'],
  [{ kind: 'lose-tone', hz: 16.7, attenuationDb: 30 }, 'Lose the tone at 16.7 Hz by 30 dB'],
  [
    { kind: 'magnitude-departure', upToHz: 1200, withinDb: 0.1 },
    'Magnitude departs by no more than 0.1 dB up to 1.2 kHz',
  ],
  [
    { kind: 'phase-departure', upToHz: 120, withinDegrees: 1, removeDelay: true },
    'Phase departs by no more than 1° up to 120 Hz, best delay removed',
  ],
  [
    { kind: 'phase-departure', upToHz: 120, withinDegrees: 1, removeDelay: false },
    'Phase departs by no more than 1° up to 120 Hz, delay kept in',
  ],
  [
    { kind: 'delay-spread', fromHz: 1, toHz: 80, atMostSeconds: 2e-4 },
    'Delay spreads by no more than 200 µs from 1 Hz to 80 Hz',
  ],
  [{ kind: 'delay', fromHz: 10, toHz: 10, atMostSeconds: 5e-3 }, 'Delay at most 5 ms at 10 Hz'],
  [{ kind: 'delay', fromHz: 0, toHz: 80, atMostSeconds: 5e-3 }, 'Delay at most 5 ms from 0 Hz to 80 Hz'],
  [{ kind: 'overshoot', atMostPercent: 5 }, 'Step overshoots by no more than 5 %'],
  [{ kind: 'settling', atMostSeconds: 0.05, withinPercent: 2 }, 'Settled within 2 % after 50 ms at most'],
  [{ kind: 'cost', atMostMultiplies: 20 }, 'At most 20 multiplies a sample'],
  [{ kind: 'word-length', bits: 16, withinDb: 0.05 }, 'In 16 bits moves by no more than 0.05 dB'],
]

describe('a line of the sheet in words', () => {
  it.each(said)('%o', (line, words) => {
    expect(plain(requirementText(line))).toBe(words)
  })

  it('has words for every kind there is', () => {
    const kinds = requirementSchema.options.map((option) => option.shape.kind.value)
    expect(Object.keys(requirementKindWords).sort()).toEqual([...kinds].sort())
    expect(new Set(said.map(([{ kind }]) => kind))).toEqual(new Set(kinds))
  })

  it('carries every number of the line once, in its own unit', () => {
    for (const [line] of said) {
      const numbers = Object.entries(line).filter(([, value]) => typeof value === 'number')
      const shown = requirementParts(line).flatMap((part) => (part.kind === 'quantity' ? [part] : []))
      for (const { field, value } of shown) expect(numbers).toContainEqual([field, value])
      const isOnePoint = line.kind === 'delay' && line.fromHz === line.toHz
      expect(shown).toHaveLength(numbers.length - (isOnePoint ? 1 : 0))
    }
  })
})

describe('what is said of a line', () => {
  const of = (unit: 'dB' | '°' | 's' | '%' | 'multiplies', limit: number, margin: number) => ({
    unit,
    limit,
    margin,
    met: margin >= 0,
  })
  it('is met or missed, and by how much', () => {
    expect(plain(marginWords(of('dB', 0.5, 0.3)))).toBe('met by 0.3 dB')
    expect(plain(marginWords(of('°', 1, -2.1)))).toBe('missed by 2.1°')
    expect(plain(marginWords(of('s', 5e-3, 0.00053)))).toBe('met by 530 µs')
    expect(plain(marginWords(of('%', 5, -6.907)))).toBe('missed by 6.91 %')
    expect(plain(marginWords(of('multiplies', 20, 10)))).toBe('met by 10')
  })
  it('is the bare word where the amount would say nothing', () => {
    expect(marginWords(of('dB', 60, Infinity))).toBe('met')
    expect(marginWords(of('dB', 60, -Infinity))).toBe('missed')
    expect(marginWords(of('s', 1e-3, 50))).toBe('met')
    expect(marginWords(of('dB', 3, 0))).toBe('just met')
  })
  it('names the worst frequency, and calls DC by its name', () => {
    expect(plain(worstWords(118.2, 1200))).toBe('worst at 118 Hz')
    expect(worstWords(1.7e-5, 1200)).toBe('worst at DC')
    expect(worstWords(0, 1200)).toBe('worst at DC')
    expect(worstWords(null, 1200)).toBeNull()
  })
  it('gives values in their units', () => {
    expect(plain(resultQuantity(33.94, { unit: 'dB' }))).toBe('33.9 dB')
    expect(plain(resultQuantity(0.00347, { unit: 's' }))).toBe('3.47 ms')
    expect(resultQuantity(10, { unit: 'multiplies' })).toBe('10')
  })
  it('is summed up by the line that is worst for its own limit', () => {
    const lines = [of('dB', 0.5, 0.3), of('dB', 60, -6), of('°', 1, -2.1)]
    expect(plain(sheetSummary(lines))).toBe('1 of 3 met; farthest past its limit: line 3, missed by 2.1°')
    expect(plain(sheetSummary([of('dB', 0.5, 0.3), of('dB', 60, 6)]))).toBe(
      'All 2 met; closest to its limit: line 2, met by 6 dB',
    )
  })
})
