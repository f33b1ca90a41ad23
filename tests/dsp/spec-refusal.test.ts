import { describe, expect, it } from 'vitest'
import { designSpecSchema } from '@/dsp'
import { defaultSpec } from '@/lib/designs/edits'

const said = (input: unknown): string => {
  const parsed = designSpecSchema.safeParse(input)
  return parsed.success ? 'taken' : (parsed.error.issues[0]?.message ?? '')
}
const { format, sampleRateHz, budget } = defaultSpec
const common = { format, sampleRateHz, budget }
const fitted = { method: 'fitted', upToHz: 100, order: 2 }
const rows = [
  [1, 0, 0],
  [2, 0, 0],
  [3, 0, 0],
  [4, 0, 0],
]

describe('what is said of a spec of the wrong shape', () => {
  it.each([null, 'text', 7, [], {}, common])('%j is none of the three', (input) => {
    expect(said(input)).toBe('A design has one of three parts: analog, fir or own.')
  })

  it.each([
    [{ ...defaultSpec, analog: { ...defaultSpec.analog, order: 'four' } }, /^analog\.order: .*number.*\.$/],
    [{ ...defaultSpec, analog: { ...defaultSpec.analog, family: 'other' } }, /^analog\.family: .*butterworth.*\.$/],
    [{ ...defaultSpec, how: { method: 'bilinear', hold: true } }, /^how\.hold: .*\.$/],
    [{ ...defaultSpec, extra: 1 }, /^Unrecognized key: "extra"$/],
    [{ ...defaultSpec, own: {} }, /^Unrecognized key: "own"$/],
    [{ ...common, analog: 3, own: 3 }, /^A design has one of three parts/],
    [
      { ...defaultSpec, sheet: [{ kind: 'cost', atMostMultiplies: 9 }, { kind: 'cost' }] },
      /^Line 2 of the requirement sheet, atMostMultiplies: .*\.$/,
    ],
    [{ ...common, fir: { kind: 'windowed' } }, /^fir\.response: .*\.$/],
    [
      { ...common, how: fitted, own: { given: 'measured', name: 'a', rows: [...rows, [5, '0', 0]] } },
      /^Row 5 of the measured table, column 2: .*\.$/,
    ],
    [{ ...common, how: fitted, own: { given: 'measured', name: '\u0000', rows } }, /no control characters/],
  ])('%j: in its own shape, with the place', (input, sentence) => {
    expect(said(input)).toMatch(sentence)
  })

  it('takes what is right', () => {
    expect(said(defaultSpec)).toBe('taken')
  })
})
