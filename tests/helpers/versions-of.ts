import { deriveVersions, type Versions } from '@/components/studio/derive'
import type { DesignSpec, FamilyDesign, Filter } from '@/dsp'

/** The versions of a spec that is known to make a design. */
export function versionsOf(spec: FamilyDesign): Versions & { readonly analog: Filter<'s'> }
export function versionsOf(spec: DesignSpec): Versions
export function versionsOf(spec: DesignSpec): Versions {
  const versions = deriveVersions(spec)
  if (!versions) throw new Error('This spec makes no design.')
  return versions
}
