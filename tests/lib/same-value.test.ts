import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { sameValue } from '@/lib/designs/same-value'
import { changedParts } from '@/lib/designs/statement-changes'
import { designSpecSchema } from '@/dsp'
import { sameSpec } from '@/components/studio/store'
import { lowPass } from '../helpers/export-sources'

describe('the same value', () => {
  it('is so whatever the order of its fields, and with undefined for none', () => {
    expect(sameValue({ a: 1, b: [{ c: 2, d: 3 }] }, { b: [{ d: 3, c: 2 }], a: 1 })).toBe(true)
    expect(sameValue({ a: 1, b: undefined }, { a: 1 })).toBe(true)
    expect(sameValue([1, 2], [2, 1])).toBe(false)
    expect(sameValue([], {})).toBe(false)
    expect(sameValue({ a: null }, {})).toBe(false)
    expect(sameValue(null, {})).toBe(false)
  })

  it('is what its own copy is, and what JSON tells apart is not', () => {
    fc.assert(
      fc.property(fc.jsonValue(), fc.jsonValue(), (one, other) => {
        expect(sameValue(one, structuredClone(one))).toBe(true)
        if (sameValue(one, other)) expect(sameValue(other, one)).toBe(true)
      }),
      { numRuns: 50 },
    )
  })

  it('is the same spec before and after the server has read it', () => {
    const edited = { ...lowPass(), sheet: [{ attenuationDb: 40, kind: 'stop', fromHz: 240, toHz: 500 } as const] }
    const read = designSpecSchema.parse(edited)
    expect(JSON.stringify(read)).not.toBe(JSON.stringify(edited))
    expect(sameSpec(read, edited)).toBe(true)
    expect(changedParts(read, edited)).toEqual([])
    expect(sameSpec(read, { ...edited, sheet: [] })).toBe(false)
  })
})
