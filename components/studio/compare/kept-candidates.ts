import * as z from 'zod'
import { designSpecSchema, type DesignSpec } from '@/dsp'

// The content policy allows no code made from strings; zod would otherwise try.
z.config({ jitless: true })

/** A filter that was found for a design and is held beside it: in this browser's tab alone, until the next choice. */
export interface KeptCandidate {
  readonly label: string
  readonly spec: DesignSpec
}

const MOST_KEPT = 4
const keyOf = (designId: string): string => `polewright.candidates.${designId}`
const listSchema = z.array(z.strictObject({ label: z.string().max(200), spec: designSpecSchema })).max(MOST_KEPT)

/** Keeps candidates for the compare page; false when the browser refuses. */
export function rememberCandidates(designId: string, candidates: readonly KeptCandidate[]): boolean {
  try {
    sessionStorage.setItem(keyOf(designId), JSON.stringify(candidates.slice(0, MOST_KEPT)))
    return true
  } catch {
    // Storage may be full or forbidden; the compare page then says that the candidates are lost.
    return false
  }
}

/** What was kept; nothing when it is lost or not to be read. */
export function keptCandidates(designId: string): readonly KeptCandidate[] {
  try {
    return listSchema.parse(JSON.parse(sessionStorage.getItem(keyOf(designId)) ?? '[]'))
  } catch {
    return []
  }
}
