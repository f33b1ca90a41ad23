import * as z from 'zod'
import { designSpecSchema, type DesignSpec } from '@/dsp'

/*
 * Candidates on their way to the compare page. They stand in the tab's sessionStorage under `polewright.candidates.<designId>`, as JSON
 * [{ label, spec }], at most four, and are gone with the tab. Whatever is read from there is checked: another script, or an older page,
 * may have written it.
 */

// The content policy allows no code made from strings; zod would otherwise try.
z.config({ jitless: true })

/** A filter that was found for a design and is held beside it: in this browser's tab alone, until the next choice. */
export interface KeptCandidate {
  readonly label: string
  readonly spec: DesignSpec
}

const MOST_KEPT = 4
/** A measured response of 2000 rows takes about 120 kB. */
const MOST_CHARACTERS = 1_000_000

const keyOf = (designId: string): string => `polewright.candidates.${designId}`
const candidateSchema = z.strictObject({ label: z.string().min(1).max(200), spec: designSpecSchema })

/** Keeps candidates for the compare page; false when the browser refuses, or when they are too much to keep. */
export function rememberCandidates(designId: string, candidates: readonly KeptCandidate[]): boolean {
  try {
    const text = JSON.stringify(candidates.slice(0, MOST_KEPT).map(({ label, spec }) => ({ label, spec })))
    if (text.length > MOST_CHARACTERS) {
      // What was kept before would be taken for these.
      sessionStorage.removeItem(keyOf(designId))
      return false
    }
    sessionStorage.setItem(keyOf(designId), text)
    return true
  } catch {
    // Storage may be full or forbidden; the compare page then says that the candidates are lost.
    return false
  }
}

/** The text as it is kept; null when there is none, or where storage is forbidden. */
export function keptText(designId: string): string | null {
  try {
    return sessionStorage.getItem(keyOf(designId))
  } catch {
    return null
  }
}

/** What the text says, each entry in its place; null for one that can't be read. Nothing when the whole can't. */
export function readCandidates(text: string | null): readonly (KeptCandidate | null)[] {
  if (text === null || text.length > MOST_CHARACTERS) return []
  try {
    const entries: unknown = JSON.parse(text)
    if (!Array.isArray(entries)) return []
    return entries.slice(0, MOST_KEPT).map((entry) => candidateSchema.safeParse(entry).data ?? null)
  } catch {
    return []
  }
}
