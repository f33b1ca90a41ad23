import type { DesignSpec } from '@/dsp'
import type { VersionSummary } from '@/lib/designs/types'
import { formatInstant } from '@/lib/format/quantity'
import type { ComparedSpec } from './figures'
import type { KeptCandidate } from './kept-candidates'
import { candidateIndex, isCandidateId, sideLabel, type SideId } from './sides'

/** A side with what the title block says of it. */
export interface GatheredSide extends ComparedSpec {
  readonly id: SideId
  readonly drawn: string
  readonly checksum: string
}

export interface Gathered {
  readonly sides: readonly GatheredSide[]
  /** Sides that can't be shown, and what can be done about it. */
  readonly lost: readonly { readonly id: SideId; readonly why: string }[]
}

interface Sources {
  readonly versions: readonly VersionSummary[]
  readonly draft: DesignSpec | null
  /** By place; null for one that couldn't be read. */
  readonly candidates: readonly (KeptCandidate | null)[]
}

/** The specs behind the ids of an address, in its order. */
export function gatherSides(ids: readonly SideId[], sources: Sources): Gathered {
  const answers = ids.map((id) => ({ id, found: found(id, sources) }))
  return {
    sides: answers.flatMap(({ id, found }) => (typeof found === 'string' ? [] : [{ id, ...found }])),
    lost: answers.flatMap(({ id, found }) => (typeof found === 'string' ? [{ id, why: found }] : [])),
  }
}

function found(id: SideId, { versions, draft, candidates }: Sources): Omit<GatheredSide, 'id'> | string {
  const label = sideLabel(id)
  if (id === 'draft')
    return draft ? { label, spec: draft, drawn: '—', checksum: 'not saved' } : 'There is no draft of this design.'
  if (isCandidateId(id)) {
    const candidate = candidates[candidateIndex(id)]
    if (candidate) return { label, detail: candidate.label, spec: candidate.spec, drawn: '—', checksum: 'not saved' }
    const what = candidate === null ? 'can’t be read here' : 'isn’t kept here'
    return `${label} ${what}: candidates stay in the browser tab that found them. Search for it again in the studio’s Candidates, and compare from there.`
  }
  const version = versions.find(({ number }) => number === id)
  if (!version) return `${label} isn’t there.`
  return {
    label,
    detail: version.note,
    spec: version.spec,
    drawn: `${version.savedBy}, ${formatInstant(version.savedAt).slice(0, 11)}`,
    checksum: `${version.checksum.slice(0, 4)}…${version.checksum.slice(-4)}`,
  }
}
