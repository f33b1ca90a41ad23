import type { DraftRecord, VersionSummary } from '@/lib/designs/types'

/*
 * What lies on the desk of this tab. The browser's Back shows a page as the server once made it; the draft and the versions that were
 * saved since are remembered here, so that going back never brings back an older sheet.
 */

export interface Sheet {
  readonly draft: DraftRecord | null
  readonly versions: readonly VersionSummary[] // newest first
}

const desk = new Map<string, Sheet>()
const place = (accountId: string, designId: string) => `${accountId} ${designId}`

/** Puts a new draft, or new versions, on the desk; the other part stays as it lies there. */
export function remember(accountId: string, designId: string, part: Partial<Sheet>): void {
  const key = place(accountId, designId)
  desk.set(key, { ...(desk.get(key) ?? { draft: null, versions: [] }), ...part })
}

/** The newer of what the page brought and what this tab remembers, part by part. */
export function freshest(accountId: string, designId: string, brought: Sheet): Sheet {
  const known = desk.get(place(accountId, designId))
  if (!known) return brought
  return {
    draft: (known.draft?.revision ?? -1) > (brought.draft?.revision ?? -1) ? known.draft : brought.draft,
    versions: (known.versions[0]?.number ?? 0) > (brought.versions[0]?.number ?? 0) ? known.versions : brought.versions,
  }
}
