/*
 * What lies on the desk of this tab. The browser's Back shows a page as the server once made it; the draft and the versions that were
 * saved since are remembered here, so that going back never brings back an older sheet.
 */

interface Numbered {
  readonly number: number
}
interface Revised {
  readonly revision: number
}

export interface Sheet<Draft extends Revised, Version extends Numbered> {
  readonly draft: Draft | null
  readonly versions: readonly Version[] // newest first
}

const desk = new Map<string, Sheet<Revised, Numbered>>()
const place = (accountId: string, id: string) => `${accountId} ${id}`

/** Puts a new draft, or new versions, on the desk; the other part stays as it lies there. */
export function remember(accountId: string, id: string, part: Partial<Sheet<Revised, Numbered>>): void {
  const key = place(accountId, id)
  desk.set(key, { ...(desk.get(key) ?? { draft: null, versions: [] }), ...part })
}

/** The newer of what the page brought and what this tab remembers, part by part. */
export function freshest<Draft extends Revised, Version extends Numbered>(
  accountId: string,
  id: string,
  brought: Sheet<Draft, Version>,
): Sheet<Draft, Version> {
  // What lies in this place was put there by a page of the same kind: ids are never shared.
  const known = desk.get(place(accountId, id)) as Sheet<Draft, Version> | undefined
  if (!known) return brought
  return {
    draft: (known.draft?.revision ?? -1) > (brought.draft?.revision ?? -1) ? known.draft : brought.draft,
    versions: (known.versions[0]?.number ?? 0) > (brought.versions[0]?.number ?? 0) ? known.versions : brought.versions,
  }
}
