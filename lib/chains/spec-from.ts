import * as z from 'zod'
import { chainSpecSchema, type ChainSpec } from '@/dsp'

// The content policy allows no code made from strings; zod would otherwise try.
z.config({ jitless: true })

/** A chain from its JSON text; null when it is none. */
export function chainSpecFrom(text: string): ChainSpec | null {
  try {
    return chainSpecSchema.parse(JSON.parse(text))
  } catch {
    // Not JSON, or not a chain: either way nothing to bring back.
    return null
  }
}
