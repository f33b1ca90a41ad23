import * as z from 'zod'
import { designSpecSchema, type DesignSpec } from '@/dsp'

// The content policy allows no code made from strings; zod would otherwise try.
z.config({ jitless: true })

/** A spec from its JSON text; null when it is none. */
export function specFrom(text: string): DesignSpec | null {
  try {
    return designSpecSchema.parse(JSON.parse(text))
  } catch {
    // Not JSON, or not a spec: either way nothing to bring back.
    return null
  }
}
