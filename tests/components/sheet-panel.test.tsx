import { renderToStaticMarkup } from 'react-dom/server'
import { describe, expect, it } from 'vitest'
import { judgementsOf } from '@/components/studio/sheet/judge'
import { lineDesk } from '@/components/studio/sheet/line-desk'
import { SheetView } from '@/components/studio/sheet/sheet-panel'
import { StartFrom } from '@/components/studio/sheet/start-from'
import { createStudioStore } from '@/components/studio/store'
import { requirementTemplates, type DesignSpec, type Requirement } from '@/dsp'
import { defaultSpec } from '@/lib/designs/edits'
import { sheetOf, withSheet } from '@/lib/designs/sheet-edits'

const pass: Requirement = { kind: 'pass', fromHz: 0, toHz: 60, withinDb: 0.1 }
const stop: Requirement = { kind: 'stop', fromHz: 250, attenuationDb: 25 }
const phase: Requirement = { kind: 'phase-departure', upToHz: 100, withinDegrees: 1, removeDelay: false }
const spec = withSheet(defaultSpec, [pass, stop, phase])

const storeOf = (start: DesignSpec = spec) => {
  const store = createStudioStore(start)
  return { store, desk: lineDesk(store), lines: () => sheetOf(store.getState().spec) }
}

function markup(of: DesignSpec, readOnly = false): string {
  const { desk } = storeOf(of)
  return renderToStaticMarkup(
    <SheetView spec={of} judgements={judgementsOf(of)} desk={desk} readOnly={readOnly} />,
  ).replaceAll('\u2009', ' ')
}
const wordsOf = (html: string) => html.replace(/<[^>]*>/g, ' ').replace(/\s+/g, ' ')

describe('the panel and the store', () => {
  it('sets a number in one step of undo', () => {
    const { store, desk, lines } = storeOf()
    expect(desk.setField(0, 'toHz', 80)).toBeNull()
    expect(lines()[0]).toEqual({ ...pass, toHz: 80 })
    store.getState().undo()
    expect(store.getState().spec).toEqual(spec)
  })

  it('refuses a number with the nearest that works and leaves the design alone', () => {
    const { store, desk } = storeOf()
    const refusal = desk.setField(0, 'toHz', 900)
    expect(refusal?.message).toContain('half the rate')
    expect(refusal?.nearest).toBe(600)
    expect(store.getState().spec).toBe(spec)
    expect(store.getState().past).toHaveLength(0)
  })

  it('makes one step of undo of a run of arrow keys', () => {
    const { store, desk, lines } = storeOf()
    for (let press = 0; press < 5; press += 1) desk.step(1, 'attenuationDb', (value) => value + 1)
    expect(lines()[1]).toEqual({ ...stop, attenuationDb: 30 })
    desk.stepped()
    expect(store.getState().past).toEqual([spec])
    store.getState().undo()
    expect(lines()).toEqual([pass, stop, phase])
  })

  it('stops a run of arrow keys at the bound', () => {
    const { desk, lines } = storeOf()
    for (let press = 0; press < 3; press += 1) desk.step(0, 'toHz', (value) => value + 300)
    desk.stepped()
    expect(lines()[0]).toEqual({ ...pass, toHz: 360 })
  })

  it('adds, moves and removes lines, each a step of undo', () => {
    const { store, desk, lines } = storeOf()
    desk.add('overshoot')
    desk.move(3, -1)
    desk.remove(0)
    expect(lines().map(({ kind }) => kind)).toEqual(['stop', 'overshoot', 'phase-departure'])
    expect(store.getState().past).toHaveLength(3)
    for (let step = 0; step < 3; step += 1) store.getState().undo()
    expect(store.getState().spec).toEqual(spec)
  })

  it('replaces the sheet by a template, and undo brings the lines back', () => {
    const { store, desk, lines } = storeOf()
    const [template] = requirementTemplates
    if (!template) throw new Error('there are no templates')
    desk.replace(template.sheet({ sampleRateHz: 1200 }))
    expect(lines()).not.toEqual(spec.sheet)
    store.getState().undo()
    expect(lines()).toEqual([pass, stop, phase])
  })

  it('takes the crosshair to where a line is worst, in its unit and in view', () => {
    const { store, desk } = storeOf()
    store.getState().look({ fromHz: 200, toHz: 700, departureUnit: 'db' })
    const worst = judgementsOf(spec).get(phase)
    if (!worst || worst.worstHz === null) throw new Error('the line has no worst frequency')
    expect(worst.worstHz).toBeLessThanOrEqual(100)
    desk.lookAt(worst)
    const { view } = store.getState()
    expect(view.crosshairHz).toBe(worst.worstHz)
    expect(view.fromHz).toBeLessThan(worst.worstHz)
    expect(view.departureUnit).toBe('degrees')
    desk.lookAt({ ...worst, worstHz: 0 })
    expect(store.getState().view.crosshairHz).toBe(view.fromHz)
  })
})

describe('the panel as it reads', () => {
  it('says each line’s value, margin and worst frequency, and sums them up', () => {
    const said = wordsOf(markup(spec))
    expect(said).toContain('2 of 3 met; farthest past its limit: line 3, missed by')
    expect(said).toMatch(/met by 0\.\d+ dB/)
    expect(said).toMatch(/worst at 250 Hz/)
    expect(said).not.toMatch(/NaN|undefined|\[object/)
  })

  it('tells met from missed by words as well as colour', () => {
    const html = markup(spec)
    expect(html.match(/text-moss">met by/g)).toHaveLength(2)
    expect(html.match(/text-vermilion">missed by/g)).toHaveLength(1)
  })

  it('names every number, button and line', () => {
    const html = markup(spec)
    expect(html).toContain('aria-label="Line 1, to"')
    expect(html).toContain('aria-label="Line 2, lost by"')
    expect(html.match(/aria-label="Remove line \d: /g)).toHaveLength(3)
    expect(html.match(/data-tool="(up|down)" ?/g)).toHaveLength(6)
    expect(html.match(/aria-disabled="true"/g)).toHaveLength(2)
  })

  it('lets a reader read and look, not edit', () => {
    const html = markup(spec, true)
    expect(html).not.toContain('<input')
    expect(wordsOf(html)).not.toMatch(/Add a line|Start from/)
    expect(html).toMatch(/aria-label="Line 3, worst at 80\.6 Hz: put the crosshair there"/)
    expect(wordsOf(html)).toMatch(/Keep 0 Hz to 60 Hz within 0\.1 dB/)
  })

  it('says both lines of a contradiction in one sentence', () => {
    const clash = withSheet(defaultSpec, [pass, { kind: 'lose-tone', hz: 50, attenuationDb: 40 }])
    const html = markup(clash)
    expect(html).toContain('aria-label="Contradictions"')
    expect(wordsOf(html)).toMatch(/Line 1 \(.*\) and line 2 \(.*\) both speak of 50 Hz/)
    expect(markup(spec)).not.toContain('Contradictions')
  })

  it('says why a line can’t be judged, without inventing a value for it', () => {
    const beyond = withSheet(defaultSpec, [{ kind: 'keep-tone', hz: 900, withinDb: 1 }])
    const said = wordsOf(markup(beyond))
    expect(said).toMatch(/— missed/)
    expect(said).toContain('900 Hz lies above half the rate, 600 Hz.')
    expect(said).not.toMatch(/∞/)
  })

  it('shows the next step where there is no sheet', () => {
    const said = wordsOf(markup(defaultSpec))
    expect(said).toContain('Nothing is required of this design yet.')
    expect(said).toContain('Add a line')
    expect(wordsOf(markup(defaultSpec, true))).not.toContain('Add a line')
  })
})

describe('sheets to start from', () => {
  const html = (lineCount: number, sampleRateHz = 6000) =>
    wordsOf(
      renderToStaticMarkup(<StartFrom sampleRateHz={sampleRateHz} lineCount={lineCount} onStart={() => undefined} />),
    )
  it('name their source or say that they are common practice', () => {
    for (const { title, source } of requirementTemplates) {
      expect(html(0)).toContain(title)
      expect(html(0)).toContain(`Source: ${source}`)
    }
  })
  it('say why one can’t be had at this rate', () => {
    expect(html(0, 1200)).toMatch(/needs a rate of 2560 Hz or more/)
  })
})
