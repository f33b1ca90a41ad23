import 'server-only'
import { database, type Executor } from '../client'
import { audit } from '../schema'

export interface Trail {
  readonly actor: string | null
  readonly team: string | null
  readonly action: string
  /** Kind and id, e.g. "design:…". */
  readonly object: string
  readonly details?: Readonly<Record<string, string | number | boolean | null>>
}

/** Adds one row to the trail, in the transaction of what it speaks of. */
export async function recordTrail(trail: Trail, on: Executor = database()): Promise<void> {
  await on.insert(audit).values({ ...trail, details: trail.details ?? {} })
}
