import { afterEach, describe, expect, it, vi } from 'vitest'
import type { DesignSpec } from '@/dsp'
import { gatherSides } from '@/components/studio/compare/gather'
import { keptText, readCandidates, rememberCandidates } from '@/components/studio/compare/kept-candidates'
import { chosenSides, compareAddress, listed } from '@/components/studio/compare/sides'
import type { VersionSummary } from '@/lib/designs/types'
import { lowPass, sourceOf } from '../helpers/export-sources'

describe('the sides of an address', () => {
  const versions = [4, 3, 2, 1]
  const chosen = (query: Parameters<typeof chosenSides>[0], hasDraft = true) => chosenSides(query, versions, hasDraft)

  it('are versions, the draft and candidates, in their order and each once', () => {
    expect(chosen({ sides: '3,2,draft,candidate-1' })).toEqual({
      sides: [3, 2, 'draft', 'candidate-1'],
      missing: [],
      leftOut: [],
    })
    expect(chosen({ sides: 'draft, 2,2,draft' }).sides).toEqual(['draft', 2])
    expect(chosen({ sides: ['3', '', 'draft', ''] }).sides).toEqual([3, 'draft'])
  })

  it('are four at most; the rest is told', () => {
    expect(chosen({ sides: '1,2,3,4,draft' })).toMatchObject({ sides: [1, 2, 3, 4], leftOut: ['draft'] })
  })

  it('leave out what isn’t there, and say so', () => {
    expect(chosen({ sides: '9,2,draft' })).toMatchObject({ sides: [2, 'draft'], missing: [9] })
    expect(chosen({ sides: '9' })).toMatchObject({ sides: [4, 'draft'], missing: [9] })
  })

  it('take the latest version for a draft that isn’t there: the studio opens on it', () => {
    expect(chosen({ sides: 'draft,candidate-1' }, false)).toEqual({
      sides: [4, 'candidate-1'],
      missing: [],
      leftOut: [],
    })
    expect(chosen({ sides: '4,draft,2' }, false).sides).toEqual([4, 2])
    expect(chosenSides({ sides: 'draft' }, [], false)).toEqual({ sides: [], missing: ['draft'], leftOut: [] })
  })

  it.each(['-1', '0', '1e3', '2.5', 'candidate-0', 'candidate-10', 'candidate-x', '<b>', '99999999', ' '])(
    'take %j for nothing',
    (text) => {
      expect(chosen({ sides: `${text},2` })).toEqual({ sides: [2], missing: [], leftOut: [] })
    },
  )

  it('come from old links too', () => {
    expect(chosen({ a: '1', b: '3' }).sides).toEqual([1, 3])
    expect(chosen({ a: '2', b: 'draft' }).sides).toEqual([2, 'draft'])
    expect(chosen({ a: '2' }).sides).toEqual([2, 'draft'])
    expect(chosen({ b: '4' }).sides).toEqual([3, 4])
    expect(chosen({ a: '9', b: '3' }).sides).toEqual([4, 3])
    expect(chosen({ a: '3', b: '3' }).sides).toEqual([3])
  })

  it('are the last version and the draft when nothing is named', () => {
    expect(chosen({}).sides).toEqual([4, 'draft'])
    expect(chosen({}, false).sides).toEqual([3, 4])
    expect(chosenSides({}, [], true).sides).toEqual(['draft'])
    expect(chosenSides({}, [], false).sides).toEqual([])
  })

  it('come back from their own address', () => {
    const sides = [3, 'draft', 'candidate-2'] as const
    const query = new URL(compareAddress('d', sides), 'http://localhost').searchParams
    expect(chosen({ sides: query.get('sides') ?? '' }).sides).toEqual(sides)
  })

  it('are listed as one says them', () => {
    expect([[], ['a'], ['a', 'b'], ['a', 'b', 'c']].map(listed)).toEqual(['', 'a', 'a and b', 'a, b and c'])
  })
})

describe('kept candidates', () => {
  const kept = new Map<string, string>()
  const storage = {
    getItem: (key: string) => kept.get(key) ?? null,
    setItem: (key: string, text: string) => void kept.set(key, text),
    removeItem: (key: string) => void kept.delete(key),
  }
  const candidate = (label: string, spec: DesignSpec = lowPass()) => ({ label, spec })
  afterEach(() => {
    kept.clear()
    vi.unstubAllGlobals()
  })

  it('come back as they went, four at most, under their design’s own key', () => {
    vi.stubGlobal('sessionStorage', storage)
    const list = ['a', 'b', 'c', 'd', 'e'].map((label) => candidate(label))
    expect(rememberCandidates('one', list)).toBe(true)
    expect([...kept.keys()]).toEqual(['polewright.candidates.one'])
    expect(readCandidates(keptText('one'))).toEqual(list.slice(0, 4))
    expect(readCandidates(keptText('other'))).toEqual([])
  })

  it('keep their places when one of them is wrong', () => {
    const wrong = { label: 'b', spec: { ...lowPass(), sampleRateHz: -1 } }
    const text = JSON.stringify([candidate('a'), wrong, { ...candidate('c'), more: 1 }, candidate('d')])
    expect(readCandidates(text).map((one) => one?.label ?? null)).toEqual(['a', null, null, 'd'])
  })

  it.each(['', '{', 'null', '{"0":1}', '"text"', `["${'x'.repeat(1_000_001)}"]`])('are none in %.12s', (text) => {
    expect(readCandidates(text)).toEqual([])
  })

  it('are not kept when the browser refuses, or when they are too much; nothing of before is taken for them', () => {
    expect(keptText('one')).toBe(null)
    expect(rememberCandidates('one', [candidate('a')])).toBe(false)
    vi.stubGlobal('sessionStorage', storage)
    rememberCandidates('one', [candidate('before')])
    expect(rememberCandidates('one', [candidate('x'.repeat(1_000_001))])).toBe(false)
    expect(readCandidates(keptText('one'))).toEqual([])
  })
})

describe('gathered sides', () => {
  const versions: readonly VersionSummary[] = [
    { ...sourceOf(lowPass({}, 600)).version, number: 2 },
    { ...sourceOf(lowPass()).version, number: 1, note: 'First' },
  ]
  const sources = { versions, draft: lowPass({ order: 6 }), candidates: [null, { label: 'Elliptic', spec: lowPass() }] }

  it('have their specs and what the title block says', () => {
    const { sides, lost } = gatherSides([1, 'draft', 'candidate-2'], sources)
    expect(lost).toEqual([])
    expect(sides.map(({ label, detail }) => [label, detail])).toEqual([
      ['Version 1', 'First'],
      ['The draft', undefined],
      ['Candidate 2', 'Elliptic'],
    ])
    expect(sides[0]?.spec).toBe(versions[1]?.spec)
    expect(sides[0]?.checksum).toMatch(/^[0-9a-f]{4}…[0-9a-f]{4}$/)
    expect(sides[1]?.checksum).toBe('not saved')
  })

  it('say which candidates are lost or wrong, and go on without them', () => {
    const { sides, lost } = gatherSides([2, 'candidate-1', 'candidate-3'], sources)
    expect(sides.map(({ id }) => id)).toEqual([2])
    expect(lost.map(({ why }) => why)).toEqual([
      expect.stringMatching(/^Candidate 1 can’t be read here/),
      expect.stringMatching(/^Candidate 3 isn’t kept here/),
    ])
  })
})
