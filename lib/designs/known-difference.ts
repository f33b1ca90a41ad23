import 'server-only'
import { ENGINE_VERSION } from '@/dsp'
import { recomputeDifference } from './recompute'
import type { RecomputeDifference } from './types'

type Version = Parameters<typeof recomputeDifference>[0] & { readonly checksum: string }

const MOST_KEPT = 200
const kept = new Map<string, RecomputeDifference | null>()

/**
 * What recomputing a version says, once in each process: a version never changes, and a long filter takes its time. The checksum names
 * its coefficients, the number and engine are part of what is said.
 */
export function knownDifference(version: Version): RecomputeDifference | null {
  const key = [version.checksum, ENGINE_VERSION, version.engineVersion, version.number].join(' ')
  const known = kept.get(key)
  if (known !== undefined) return known
  const fresh = recomputeDifference(version)
  const [oldest] = kept.keys()
  if (kept.size >= MOST_KEPT && oldest !== undefined) kept.delete(oldest)
  kept.set(key, fresh)
  return fresh
}
