import type { DesignSpec } from '@/dsp'

/* A draft that has not reached the server yet, kept in this browser. Storage may be switched off or full: then there is nothing to keep it in. */

const key = (designId: string) => `polewright-draft-${designId}`

function storage(): Storage | null {
  try {
    return globalThis.localStorage
  } catch {
    // Reading the property throws where the browser forbids storage.
    return null
  }
}

export function keepDraft(designId: string, spec: DesignSpec): void {
  try {
    storage()?.setItem(key(designId), JSON.stringify(spec))
  } catch {
    // Full: the draft is still on the screen, and the save goes on.
  }
}

export function forgetKeptDraft(designId: string): void {
  storage()?.removeItem(key(designId))
}

/** The kept draft, checked; null when there is none or it is none of ours. The check is loaded only when there is something to check. */
export async function keptDraft(designId: string): Promise<DesignSpec | null> {
  const text = storage()?.getItem(key(designId))
  if (!text) return null
  const { specFrom } = await import('./spec-from')
  return specFrom(text)
}
