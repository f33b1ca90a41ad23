import { createElement } from 'react'
import { renderToStaticMarkup } from 'react-dom/server'
import { describe, expect, it } from 'vitest'
import type { DesignSpec, Requirement } from '@/dsp'
import { sideOf, type Side } from '@/components/studio/compare/figures'
import { countsMet, linesOf, requirementRows } from '@/components/studio/compare/requirement-rows'
import { JudgedTable } from '@/components/studio/compare/requirements-table'
import { lowPass } from '../helpers/export-sources'

const asking = (spec: DesignSpec, ...sheet: readonly Requirement[]): DesignSpec => ({ ...spec, sheet })
const sidesOf = (...specs: readonly (readonly [label: string, spec: DesignSpec])[]): readonly Side[] =>
  specs.map(([label, spec], place) => sideOf({ label, spec }, place))

const stop = (attenuationDb: number): Requirement => ({ kind: 'lose-tone', hz: 240, attenuationDb })
const keep: Requirement = { kind: 'pass', fromHz: 0, toHz: 60, withinDb: 0.1 }

/** Bilinear Butterworth held at 120 Hz: 10·log₁₀(1 + (tan(πf/fs)/tan(π·120/fs))²ⁿ) (Oppenheim & Schafer, 3rd ed., sec. 7.3). */
const loss = (order: number, rate: number, hertz: number) =>
  10 * Math.log10(1 + (Math.tan((Math.PI * hertz) / rate) / Math.tan((Math.PI * 120) / rate)) ** (2 * order))

describe('the lines of a comparison', () => {
  it('are the base’s in its order, then those that only others have, each once', () => {
    const sides = sidesOf(
      ['Version 1', asking(lowPass(), stop(30), keep)],
      ['Version 2', asking(lowPass({ order: 5 }), keep, stop(40))],
      ['The draft', asking(lowPass({ order: 6 }), stop(40), { withinDb: 0.1, kind: 'pass', toHz: 60, fromHz: 0 })],
    )
    expect(linesOf(sides).map(({ line, owners }) => [line, owners.map(({ label }) => label)])).toEqual([
      [stop(30), ['Version 1']],
      [keep, ['Version 1', 'Version 2', 'The draft']],
      [stop(40), ['Version 2', 'The draft']],
    ])
    expect(requirementRows(sides).map(({ whose }) => whose)).toEqual([
      'asked by version 1 alone',
      null,
      'asked by version 2 and the draft',
    ])
  })

  it('judge every side by the same line, with value, margin and place', () => {
    const sides = sidesOf(
      ['Version 1', asking(lowPass(), stop(30))],
      ['Version 2', lowPass({ order: 8 })],
      ['The draft', lowPass({ order: 8 }, 600)],
    )
    const [row] = requirementRows(sides)
    expect(row?.text).toMatch(/^Lose the tone at 240\u2009Hz by 30\u2009dB/)
    const losses = [loss(4, 1200, 240), loss(8, 1200, 240), loss(8, 600, 240)]
    expect(row?.cells.map(({ met }) => met)).toEqual(losses.map((db) => db >= 30))
    expect(row?.cells.map(({ value }) => Number.parseFloat(value))).toEqual(
      losses.map((db) => Number(db.toPrecision(3))),
    )
    expect(row?.cells[0]?.margin).toBe(`missed by ${Number((30 - losses[0]!).toPrecision(3))}\u2009dB`)
    expect(row?.cells[1]?.margin).toBe(`met by ${Number((losses[1]! - 30).toPrecision(3))}\u2009dB`)
    expect(row?.cells[1]?.worst).toBe('worst at 240\u2009Hz')
  })

  it('say why a side can’t be judged by one, and count it missed', () => {
    const sides = sidesOf(
      ['Version 1', asking(lowPass(), { kind: 'lose-tone', hz: 500, attenuationDb: 30 })],
      ['Version 2', lowPass({}, 600)],
    )
    const rows = requirementRows(sides)
    expect(rows[0]?.cells[1]).toMatchObject({ met: false, value: '—', margin: 'missed' })
    expect(rows[0]?.cells[1]?.reason).toContain('above half the rate')
    expect(countsMet(rows, sides)).toEqual(['1 of 1 met', '0 of 1 met'])
  })

  it('are judged on an FIR filter against its ideal, and say so', () => {
    const departs: Requirement = { kind: 'magnitude-departure', upToHz: 80, withinDb: 1 }
    const sides = sidesOf(
      ['Version 1', asking(lowPass(), departs)],
      [
        'Candidate 1',
        {
          format: 1,
          fir: {
            kind: 'windowed',
            window: 'hamming',
            response: 'lowpass',
            taps: 61,
            bands: [
              { fromHz: 0, toHz: 100, gain: 1 },
              { fromHz: 180, toHz: 600, gain: 0 },
            ],
          },
          sampleRateHz: 1200,
          budget: lowPass().budget,
        },
      ],
    )
    const [row] = requirementRows(sides)
    expect(row?.cells[0]?.reason).toBe(null)
    expect(row?.cells[1]?.reason).toContain('no analog original')
    expect(row?.cells[1]?.met).toBe(true)
  })

  it('stand on the page with met and missed in words and in colour', () => {
    const sides = sidesOf(['Version 1', asking(lowPass(), stop(30))], ['Version 2', lowPass({ order: 8 })])
    const html = renderToStaticMarkup(createElement(JudgedTable, { sides, rows: requirementRows(sides) }))
    expect(html).toMatch(/text-vermilion[^>]*>missed by/)
    expect(html).toMatch(/text-moss[^>]*>met by/)
    expect(html).toContain('asked by version 1 alone')
    expect(html).toContain('0 of 1 met')
    expect(html).toContain('1 of 1 met')
  })
})
