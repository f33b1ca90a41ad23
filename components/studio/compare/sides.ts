/* Which sides a comparison has, as its address says them: `?sides=3,2,draft,candidate-1`, the first of them the base. */

export const MOST_SIDES = 4

/** A numbered version, the viewer's own draft, or a candidate by its place among those that the tab keeps, from 1 on. */
export type SideId = number | 'draft' | `candidate-${number}`

type Query = Readonly<Record<string, string | readonly string[] | undefined>>

export interface ChosenSides {
  readonly sides: readonly SideId[]
  /** What was asked for by its right name and isn't there. */
  readonly missing: readonly SideId[]
  /** What was asked for beyond the four. */
  readonly leftOut: readonly SideId[]
}

export const isCandidateId = (id: SideId): id is `candidate-${number}` =>
  typeof id === 'string' && id.startsWith('candidate-')

/** From 0 on. */
export const candidateIndex = (id: `candidate-${number}`): number => Number(id.slice('candidate-'.length)) - 1

export const candidateId = (index: number): SideId => `candidate-${index + 1}`

/** "Version 3", "The draft", "Candidate 1". */
export function sideLabel(id: SideId): string {
  if (id === 'draft') return 'The draft'
  return isCandidateId(id) ? `Candidate ${candidateIndex(id) + 1}` : `Version ${id}`
}

/** The same within a sentence: "version 3", "the draft". */
export const inSentence = (label: string): string => label.charAt(0).toLowerCase() + label.slice(1)

/** "a", "a and b", "a, b and c". */
export function listed(words: readonly string[]): string {
  const last = words.at(-1) ?? ''
  return words.length < 2 ? last : `${words.slice(0, -1).join(', ')} and ${last}`
}

export function parseSide(text: string): SideId | null {
  if (text === 'draft') return text
  if (/^candidate-[1-9]$/.test(text)) return text as SideId
  return /^[1-9]\d{0,6}$/.test(text) ? Number(text) : null
}

/**
 * The sides that an address asks for and that are there. Links of old, `?a=3&b=draft`, name base and other; what they don't name, or what
 * isn't there, is the nearest that is. Without a draft of one's own the studio opens on the latest version, which then stands for it.
 * Candidates are known in the browser alone, so that any candidate passes here.
 *
 * @param versions numbers of the saved versions, newest first
 */
export function chosenSides(query: Query, versions: readonly number[], hasDraft: boolean): ChosenSides {
  const isThere = (id: SideId) => (id === 'draft' ? hasDraft : isCandidateId(id) || versions.includes(id))
  const named = [query.sides ?? []].flat().flatMap((text) => text.split(','))
  const drafted = (id: SideId | null) => (id === 'draft' && !hasDraft ? (versions[0] ?? id) : id)
  const asked = [...new Set(named.map((text) => drafted(parseSide(text.trim()))).filter((id) => id !== null))]
  const there = asked.filter(isThere)
  const missing = asked.filter((id) => !isThere(id))
  if (there.length > 0) return { sides: there.slice(0, MOST_SIDES), missing, leftOut: there.slice(MOST_SIDES) }

  const pick = (text: string | readonly string[] | undefined, otherwise: SideId): SideId => {
    const id = typeof text === 'string' ? parseSide(text) : null
    return id !== null && isThere(id) ? id : otherwise
  }
  const other = pick(query.b, hasDraft ? 'draft' : (versions[0] ?? 'draft'))
  const base = pick(query.a, versions.find((number) => number !== other) ?? other)
  return { sides: [...new Set([base, other])].filter(isThere), missing, leftOut: [] }
}

/** Address of a comparison of a design; the first of the sides is the base. */
export const compareAddress = (designId: string, sides: readonly SideId[]): string =>
  `/designs/${designId}/compare?sides=${sides.join(',')}`
