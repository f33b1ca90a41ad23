import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { nearestThatWorks } from '@/components/studio/statement/nearest'
import { stepped } from '@/components/studio/statement/apply'
import { createStudioStore, refusalOf } from '@/components/studio/store'
import { viewFromSearch, viewToSearch } from '@/components/studio/shell/address'
import { matches } from '@/components/drafting/commands'
import { deriveFigures, deriveTraces, deriveTrust } from '@/components/studio/derive'
import { usualView } from '@/components/studio/view'
import type { FamilyDesign } from '@/dsp'
import { versionsOf } from '../helpers/versions-of'
import { defaultSpec, withEdge } from '@/lib/designs/edits'
import { edgesHzOf } from '@/lib/designs/outline'

const at = (hertz: number) => withEdge(defaultSpec, 0, hertz)

describe('the studio’s store', () => {
  it('refuses a change that makes no filter, says where and why, and keeps the last good design', () => {
    const store = createStudioStore(defaultSpec)
    expect(store.getState().propose(at(700), 'analog.edgesHz.0')).toBe(false)
    const { spec, refusal, past } = store.getState()
    expect(spec).toBe(defaultSpec)
    expect(past).toHaveLength(0)
    expect(refusal?.field).toBe('analog.edgesHz.0')
    expect(refusal?.message).toMatch(/600/)
  })

  it('designs nothing when it is made, as on a server, and says afterwards why what was opened makes no filter', () => {
    const store = createStudioStore(at(700))
    expect(store.getState().refusal).toBeNull()
    store.getState().dismissRefusal()
    expect(store.getState().refusal?.field).toBe('analog.edgesHz.0')
  })

  it('makes one step of undo of a whole drag, and none of a cancelled one', () => {
    const store = createStudioStore(defaultSpec)
    const { begin, change, commit, cancel } = store.getState()
    begin()
    for (const hertz of [130, 140, 150]) change(at(hertz))
    expect(edgesHzOf(store.getState().spec)).toEqual([150])
    cancel()
    expect(store.getState().spec).toBe(defaultSpec)
    expect(store.getState().past).toHaveLength(0)

    begin()
    for (const hertz of [130, 140, 150]) change(at(hertz))
    commit()
    expect(store.getState().past).toEqual([defaultSpec])
    store.getState().undo()
    expect(store.getState().spec).toEqual(defaultSpec)
    store.getState().redo()
    expect(edgesHzOf(store.getState().spec)).toEqual([150])
  })

  it('undoes any run of edits back to where it began, and redoes them to where it ended', () => {
    fc.assert(
      fc.property(fc.array(fc.integer({ min: 1, max: 900 }), { minLength: 1, maxLength: 30 }), (edges) => {
        const store = createStudioStore(defaultSpec)
        for (const edge of edges) store.getState().propose(at(edge))
        const end = store.getState().spec
        const steps = store.getState().past.length
        for (let step = 0; step < steps; step += 1) store.getState().undo()
        expect(store.getState().spec).toEqual(defaultSpec)
        for (let step = 0; step < steps; step += 1) store.getState().redo()
        expect(store.getState().spec).toEqual(end)
        expect(refusalOf(store.getState().spec)).toBeNull()
      }),
      { numRuns: 50 },
    )
  })

  it('opens the view to an edge that has left it', () => {
    const store = createStudioStore(defaultSpec)
    store.getState().look({ fromHz: 100, toHz: 700 })
    store.getState().propose(at(20))
    expect(store.getState().view.fromHz).toBeLessThan(20)
  })
})

describe('the nearest value that works', () => {
  it('is found for the edited word, whichever part the refusal names', () => {
    const rate = nearestThatWorks(defaultSpec, 'sampleRateHz', 1200, 200)
    expect(rate).not.toBeNull()
    expect(rate).toBeGreaterThan(240)
    expect(rate).toBeLessThan(241)
    const edge = nearestThatWorks(defaultSpec, 'analog.edgesHz.0', 120, 5000)
    expect(edge).toBeLessThan(600)
    expect(edge).toBeGreaterThan(599)
    expect(nearestThatWorks(defaultSpec, 'analog.order', 4, 99)).toBe(24)
  })
})

describe('stepping with the arrow keys', () => {
  it('lands on whole steps of the third digit', () => {
    expect(stepped('Hz', 120, 1, 'usual')).toBe(121)
    expect(stepped('Hz', 120, 1, 'coarse')).toBe(130)
    expect(stepped('Hz', 120, -1, 'fine')).toBe(119.9)
    expect(stepped('dB', 0.1, 1, 'usual')).toBe(0.101)
    expect(stepped('order', 4, -1, 'coarse')).toBe(3)
  })
})

describe('the address', () => {
  it('holds the view and gives it back', () => {
    const view = {
      ...usualView(defaultSpec),
      logFrequency: false,
      unwrapped: false,
      departureUnit: 'db' as const,
      magnitudeFloorDb: -100,
      crosshairHz: 200,
      hidden: ['matched-z' as const],
    }
    const back = viewFromSearch(new URLSearchParams(viewToSearch(view, 'time')))
    expect(back.drawer).toBe('time')
    expect({ ...usualView(defaultSpec), ...back.view }).toEqual(view)
  })
  it('takes nothing from a broken address', () => {
    expect(viewFromSearch(new URLSearchParams('band=9-1&floor=5&at=-2&drawer=nowhere&without=x'))).toEqual({
      view: { hidden: [] },
    })
  })
})

describe('keys of commands', () => {
  const press = { key: 'z', ctrlKey: true, metaKey: false, shiftKey: false, altKey: false }
  it('match exactly their modifiers', () => {
    expect(matches('Mod+Z', press)).toBe(true)
    expect(matches('Mod+Shift+Z', press)).toBe(false)
    expect(matches('Mod+Shift+Z', { ...press, key: 'Z', shiftKey: true })).toBe(true)
    expect(matches('Mod+Z', { ...press, ctrlKey: false })).toBe(false)
  })
})

describe('what the screen derives', () => {
  it('is there for every filter that dsp accepts, also hard against half the rate', () => {
    const specs: FamilyDesign[] = [550, 599.9].map((edge) => ({
      ...defaultSpec,
      analog: { ...defaultSpec.analog, response: 'highpass', edgesHz: [edge] },
    }))
    specs.push({
      ...defaultSpec,
      analog: { ...defaultSpec.analog, response: 'bandpass', order: 12, edgesHz: [599.9, 599.999] },
    })
    for (const spec of specs) {
      for (const removeDelay of [false, true]) {
        const judged = { ...spec, budget: { ...spec.budget, removeDelay } }
        const versions = versionsOf(judged)
        const view = { ...usualView(judged), removeDelay }
        expect(deriveTraces(judged, versions, view).length).toBeGreaterThan(1)
        expect(() => deriveTrust(judged, versions)).not.toThrow()
        expect(Number.isNaN(deriveFigures(judged, versions).delaySeconds)).toBe(false)
      }
    }
  })
})
