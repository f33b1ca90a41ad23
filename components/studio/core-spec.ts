import { isFamilyDesign, isFirDesign, type DesignSpec } from '@/dsp'

/*
 * A requirement says nothing of the filter itself. Specs that differ in their sheet alone have one core, the same object, so that nothing
 * that is computed of the filter runs again while a requirement is typed or pulled.
 */

/** By the part that makes the design, which every edit of the sheet hands on as it is. */
const cores = new WeakMap<object, DesignSpec>()

const partOf = (spec: DesignSpec): object =>
  isFamilyDesign(spec) ? spec.analog : isFirDesign(spec) ? spec.fir : spec.own
const howOf = (spec: DesignSpec): unknown => (isFirDesign(spec) ? null : spec.how)

/** Whether two specs differ in their sheets at most. */
export const sharesCore = (one: DesignSpec, other: DesignSpec): boolean =>
  partOf(one) === partOf(other) &&
  howOf(one) === howOf(other) &&
  one.budget === other.budget &&
  one.sampleRateHz === other.sampleRateHz

/** The spec without its sheet. */
export function coreOf(spec: DesignSpec): DesignSpec {
  const known = cores.get(partOf(spec))
  if (known && sharesCore(known, spec)) return known
  const core = spec.sheet === undefined ? spec : bare(spec)
  cores.set(partOf(core), core)
  return core
}

function bare(spec: DesignSpec): DesignSpec {
  const core = { ...spec }
  delete core.sheet
  return core
}
