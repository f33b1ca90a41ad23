/* A draft that has not reached the server yet, kept in this browser. Storage may be switched off or full: then there is nothing to keep it in. */

const key = (id: string) => `polewright-draft-${id}`

function storage(): Storage | null {
  try {
    return globalThis.localStorage
  } catch {
    // Reading the property throws where the browser forbids storage.
    return null
  }
}

export function keepDraft(id: string, spec: unknown): void {
  try {
    storage()?.setItem(key(id), JSON.stringify(spec))
  } catch {
    // Full: the draft is still on the screen, and the save goes on.
  }
}

export function forgetKeptDraft(id: string): void {
  storage()?.removeItem(key(id))
}

/** The kept draft, checked; null when there is none or it is none of ours. The check is loaded only when there is something to check. */
export async function keptDraft<Spec>(
  id: string,
  loadCheck: () => Promise<(text: string) => Spec | null>,
): Promise<Spec | null> {
  const text = storage()?.getItem(key(id))
  if (!text) return null
  const specFrom = await loadCheck()
  return specFrom(text)
}
