import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { DesignSpec } from '@/dsp'
import { statementText } from '@/lib/designs/statement'
import { changedParts, markedStatement } from '@/lib/designs/statement-changes'
import { anySpec, lowPass } from '../helpers/export-sources'

const words = (before: DesignSpec, after: DesignSpec, mark: 'gone' | 'new') =>
  markedStatement(before, after)
    .filter((part) => part.mark === mark && part.part.kind !== 'text')
    .map(({ part }) => part.text)

describe('a marked statement', () => {
  it('marks the one word that changed, the old one before the new one', () => {
    const [before, after] = [lowPass(), lowPass({}, 600)]
    expect(words(before, after, 'gone')).toEqual(['1.2\u2009kHz'])
    expect(words(before, after, 'new')).toEqual(['600\u2009Hz'])
    const marks = markedStatement(before, after).map(({ mark }) => mark)
    expect(marks.indexOf('gone')).toBe(marks.indexOf('new') - 1)
    expect(changedParts(before, after)).toEqual(['sampling rate'])
  })

  it('doesn’t take a rate for an edge that reads the same', () => {
    const before = lowPass({ edgesHz: [100] }, 600)
    const after = lowPass({ edgesHz: [150] }, 600)
    expect(words(before, after, 'new')).toEqual(['150\u2009Hz'])
    expect(changedParts(before, after)).toEqual(['edge'])
  })

  it('marks words that come and go with the family', () => {
    const after = lowPass({ family: 'chebyshev1', rippleDb: 0.5 })
    expect(words(lowPass(), after, 'new')).toContain('0.5\u2009dB')
    expect(changedParts(lowPass(), after)).toEqual(['family', 'ripple'])
  })

  it('always reads as the later statement without what is gone, and as the earlier one without what is new', () => {
    fc.assert(
      fc.property(anySpec, anySpec, (before, after) => {
        const marked = markedStatement(before, after)
        const text = (without: string) =>
          marked
            .filter(({ mark }) => mark !== without)
            .map(({ part }) => part.text)
            .join('')
        expect(text('gone')).toBe(statementText(after))
        expect(text('new')).toBe(statementText(before))
      }),
    )
  })
})

describe('what changed, by name', () => {
  it('is nothing between a spec and itself', () => {
    fc.assert(fc.property(anySpec, (spec) => changedParts(spec, structuredClone(spec)).length === 0))
  })

  it('names the budget, which no statement mentions', () => {
    const after = { ...lowPass(), budget: { magnitudeDb: 0.2, phaseDegrees: 1, removeDelay: false } }
    expect(changedParts(lowPass(), after)).toEqual(['departure budget'])
  })

  it('sees a difference that the written digits hide', () => {
    const after = lowPass({ edgesHz: [120.00000001] })
    expect(statementText(after)).toBe(statementText(lowPass()))
    expect(changedParts(lowPass(), after)).toEqual(['edge'])
  })

  it('names the held frequency once, however it is said', () => {
    const after: DesignSpec = { ...lowPass(), how: { method: 'bilinear', hold: 100 } }
    expect(changedParts(lowPass(), after)).toEqual(['held frequency'])
  })
})
