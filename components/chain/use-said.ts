import { useEffect, useState } from 'react'
import type { ChainDesk } from './chain-desk'

/** What is said of the last edit, or of why there was none; it goes with the next one, and with undo and redo. */
export function useSaid<Words>(desk: ChainDesk): readonly [Words | null, (words: Words | null) => void] {
  const [said, say] = useState<Words | null>(null)
  useEffect(() => desk.onEdit(() => say(null)), [desk])
  return [said, say]
}
