import { describe, expect, it } from 'vitest'
import { chainViewFromSearch, chainViewToSearch } from '@/components/chain/address'
import { chainDesk } from '@/components/chain/chain-desk'
import { chainCommands } from '@/components/chain/commands'
import { computedChain } from '@/components/chain/computed-chain'
import { createChainStore, toleranceFor } from '@/components/chain/store'
import type { ToleranceResult } from '@/dsp'
import { withField, withoutStage, withStageDuplicated, withStageMoved } from '@/lib/chains/edits'
import { numberAt } from '@/lib/chains/fields'
import { startingChain } from '@/lib/chains/stage-starts'
import { notAdded, wasnt } from '@/lib/chains/words'

const opened = () => {
  const store = createChainStore(startingChain)
  return { store, desk: chainDesk(store), state: () => store.getState() }
}
const rate = (hz: number) => withField(startingChain, 'stages.2.sampleRateHz', hz)

describe('the store of a chain', () => {
  it('takes an edit as one step of undo, and brings it back', () => {
    const { state } = opened()
    expect(state().propose(rate(4000))).toBe(true)
    expect(state().past).toEqual([startingChain])
    state().undo()
    expect(state().spec).toBe(startingChain)
    state().redo()
    expect(numberAt(state().spec, 'stages.2.sampleRateHz')).toBe(4000)
  })
  it('refuses what makes no chain, says why beside the edited word, and keeps the last good one', () => {
    const { state } = opened()
    expect(state().propose(withField(startingChain, 'kept.toHz', 150), 'kept.toHz')).toBe(false)
    expect(state().refusal).toMatchObject({ field: 'kept.toHz', nearest: 125 })
    expect(state().refusal?.message).toContain('125')
    expect(state().spec).toBe(startingChain)
    expect(state().past).toHaveLength(0)
    state().dismissRefusal()
    expect(state().refusal).toBeNull()
  })
  it('keeps a nearest value away from a word that it was not computed for', () => {
    const { state } = opened()
    expect(state().propose(withField(startingChain, 'stages.2.sampleRateHz', 1000), 'stages.2.sampleRateHz')).toBe(
      false,
    )
    expect(state().refusal?.field).toBe('stages.2.sampleRateHz')
    expect(state().refusal?.nearest).toBeUndefined()
  })
  it('makes one step of undo of a gesture, and none of one that was cancelled', () => {
    const { state } = opened()
    state().begin()
    state().change(rate(2100))
    state().change(rate(2200))
    state().commit()
    expect(state().past).toEqual([startingChain])
    state().begin()
    state().change(rate(3000))
    state().cancel()
    expect(numberAt(state().spec, 'stages.2.sampleRateHz')).toBe(2200)
    expect(state().past).toHaveLength(1)
  })
  it('looks at a stage for as long as it is there', () => {
    const { state, desk } = opened()
    state().choose('s5')
    desk.edit((now) => withField(now, 'kept.toHz', 80))
    expect(state().stageId).toBe('s5')
    const without = withoutStage(state().spec, 4)
    if (without.ok) state().propose(without.spec)
    expect(state().stageId).toBeNull()
  })
  it('computes a chain once, however many ask', () => {
    expect(computedChain(startingChain)).toBe(computedChain(startingChain))
  })
  it('lets a tolerance run speak for the same stages and settings alone', () => {
    const { state } = opened()
    const result = { settings: startingChain.tolerance } as ToleranceResult
    state().keepTolerance(startingChain, result)
    expect(toleranceFor({ ...startingChain, interferers: [] }, state().tolerance)).toBe(result)
    expect(toleranceFor(rate(4000), state().tolerance)).toBeNull()
    expect(toleranceFor(startingChain, null)).toBeNull()
  })
})

describe('the desk of a chain', () => {
  it('answers a refusal with the nearest number, and leaves the store without one', () => {
    const { state, desk } = opened()
    const refusal = desk.setNumber('stages.4.filter.passHz', 400)
    expect(refusal?.message).toBeTruthy()
    expect(refusal?.nearest).toBeGreaterThan(90)
    expect(state().refusal).toBeNull()
    expect(desk.setNumber('stages.4.filter.passHz', refusal?.nearest ?? 0)).toBeNull()
    expect(state().past).toHaveLength(1)
  })
  it('makes one step of undo of a run of arrow keys, which stops at the bound', () => {
    const { state, desk } = opened()
    for (let press = 0; press < 20; press += 1) desk.step('stages.2.resolution.bits', 1)
    desk.stepped()
    expect(numberAt(state().spec, 'stages.2.resolution.bits')).toBe(32)
    expect(state().past).toEqual([startingChain])
  })
  it('says why a stage can’t be moved, and moves one that can', () => {
    const { state, desk } = opened()
    expect(desk.editStages((now) => withStageMoved(now, 4, 1))).toContain('behind the converter')
    expect(desk.editStages((now) => withStageMoved(now, 4, 3))).toBeNull()
    expect(state().spec.stages.map(({ id }) => id)).toEqual(['s1', 's2', 's3', 's5', 's4'])
    expect(state().stageId).toBe('s5')
    expect(state().past).toHaveLength(1)
  })
  it('tells of edits, undo and redo, so that what was said of the one before goes; not of what was refused', () => {
    const { state, desk } = opened()
    let told = 0
    const end = desk.onEdit(() => (told += 1))
    desk.editStages((now) => withStageMoved(now, 4, 1))
    expect(told).toBe(0)
    desk.editStages((now) => withStageMoved(now, 4, 3))
    state().undo()
    state().redo()
    expect(told).toBe(3)
    end()
    state().undo()
    expect(told).toBe(3)
  })
  it('knows where a stage may be put before it is let go there', () => {
    const { desk } = opened()
    expect(desk.wouldTake((now) => withStageMoved(now, 4, 3))).toBe(true)
    expect(desk.wouldTake((now) => withStageMoved(now, 4, 1))).toBe(false)
    // A band kept to 90 Hz needs more than another halving leaves.
    expect(desk.wouldTake((now) => withStageDuplicated(now, 4))).toBe(false)
  })
  it('adds, moves and removes lines of the sheet, one step each', () => {
    const { state, desk } = opened()
    for (const kind of ['usable-band', 'phase', 'delay', 'channel-match', 'effective-bits', 'flatness'] as const)
      expect(desk.addLine(kind)).toBeNull()
    expect(state().past).toHaveLength(6)
    desk.moveLine(7, -1)
    expect(state().spec.sheet.at(-1)).toMatchObject({ kind: 'effective-bits' })
    desk.removeLine(0)
    expect(state().spec.sheet).toHaveLength(7)
  })
  it('adds an interferer and takes it away', () => {
    const { state, desk } = opened()
    desk.addInterferer({ kind: 'tone', name: 'pump', hz: 147, level: 0.8 })
    expect(desk.setNumber('interferers.0.hz', 0)?.message).toContain('above')
    expect(desk.setNumber('interferers.0.level', 0.5)).toBeNull()
    desk.removeInterferer(0)
    expect(state().spec.interferers).toEqual([])
  })
})

describe('a refusal', () => {
  it('says what it was that was refused', () => {
    expect(notAdded('decimate', 'The band ends at 62.5 Hz.')).toBe(
      'A decimation wasn’t added: the band ends at 62.5 Hz.',
    )
    expect(wasnt('The stage wasn’t moved', 'Kaiser 3 is none.')).toBe('The stage wasn’t moved: Kaiser 3 is none.')
  })
})

describe('commands of the chain page', () => {
  it('are off where nobody may edit', () => {
    const { store } = opened()
    store.getState().propose(rate(4000))
    const can = (mayEdit: boolean) =>
      chainCommands(store, { mayEdit, openSave: () => undefined })
        .find(({ id }) => id === 'undo')
        ?.when()
    expect(can(true)).toBe(true)
    expect(can(false)).toBe(false)
  })
})

describe('the address of a chain page', () => {
  it('opens as its sender saw it, and takes nothing else', () => {
    const search = chainViewToSearch('noise', 35)
    expect(chainViewFromSearch(new URLSearchParams(search))).toEqual({ drawer: 'noise', traceHz: 35 })
    expect(chainViewFromSearch(new URLSearchParams('drawer=nothing&at=-3'))).toEqual({ traceHz: null })
  })
})
