import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { createAutosave } from '@/components/drafting/autosave'
import { createStudioStore } from '@/components/studio/store'
import { defaultSpec, withEdge } from '@/lib/designs/edits'
import { MOST_MEASURED_ROWS, type DesignSpec } from '@/dsp'

vi.mock('@/components/drafting/kept-draft', () => ({ keepDraft: vi.fn(), forgetKeptDraft: vi.fn() }))

const at = (hertz: number) => withEdge(defaultSpec, 0, hertz)
const asked = vi.fn<typeof fetch>()

beforeEach(() => {
  vi.useFakeTimers()
  vi.stubGlobal('fetch', asked)
  vi.stubGlobal('addEventListener', vi.fn())
  vi.stubGlobal('removeEventListener', vi.fn())
})
afterEach(() => {
  vi.useRealTimers()
  vi.unstubAllGlobals()
  asked.mockReset()
})

const saved = (revision: number) => Response.json({ outcome: 'saved', revision, updatedAt: '2026-01-01T00:00:00Z' })

function studio(spec: DesignSpec = defaultSpec) {
  const store = createStudioStore(spec)
  const autosave = createAutosave({
    kind: 'designs',
    id: 'd',
    store,
    draft: null,
    parentNumber: null,
    onSaved: vi.fn(),
  })
  autosave.start()
  return { store, autosave }
}

describe('a draft that the server refuses', () => {
  it('is not sent again until the next edit, and the server’s sentence is shown', async () => {
    asked.mockResolvedValueOnce(Response.json({ detail: 'At most 3 fit here.' }, { status: 422 }))
    const { store, autosave } = studio()
    store.getState().propose(at(130))
    await vi.advanceTimersByTimeAsync(60_000)
    expect(asked).toHaveBeenCalledTimes(1)
    expect(autosave.state.getState()).toEqual({ kind: 'refused', message: 'At most 3 fit here.' })

    asked.mockResolvedValueOnce(saved(1))
    store.getState().propose(at(140))
    await vi.advanceTimersByTimeAsync(2000)
    expect(asked).toHaveBeenCalledTimes(2)
    expect(autosave.state.getState()).toMatchObject({ kind: 'idle' })
  })

  it('is sent again by itself when it was only the way that failed', async () => {
    asked.mockRejectedValueOnce(new TypeError('failed')).mockResolvedValueOnce(saved(1))
    const { store, autosave } = studio()
    store.getState().propose(at(130))
    await vi.advanceTimersByTimeAsync(10_000)
    expect(asked).toHaveBeenCalledTimes(2)
    expect(autosave.state.getState()).toMatchObject({ kind: 'idle' })
  })
})

describe('a draft that is long', () => {
  it('does not ask to outlive its page, which browsers refuse; a short one does', async () => {
    asked.mockImplementation(() => Promise.resolve(saved(1)))
    const { store } = studio()
    store.getState().propose(at(130))
    await vi.advanceTimersByTimeAsync(2000)
    expect(asked.mock.calls[0]?.[1]?.keepalive).toBe(true)

    const { format, sampleRateHz, budget } = defaultSpec
    const rows = Array.from(
      { length: MOST_MEASURED_ROWS },
      (_, k) => [(k + 1) / 7, -Math.abs(1.4 * Math.sin(k / 900)), -9.9 * Math.sin(k / 900)] as const,
    )
    const how = { method: 'fitted', upToHz: 100, order: 2 } as const
    const own = { given: 'measured', name: 'long', rows } as const
    expect(store.getState().propose({ format, sampleRateHz, budget, own, how })).toBe(true)
    await vi.advanceTimersByTimeAsync(2000)
    expect(asked.mock.calls[1]?.[1]?.keepalive).toBe(false)
  })
})
