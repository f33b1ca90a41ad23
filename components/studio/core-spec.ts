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

/** The spec without its sheet. */
export function coreOf(spec: DesignSpec): DesignSpec {
  const known = cores.get(partOf(spec))
  if (known && howOf(known) === howOf(spec) && known.budget === spec.budget && known.sampleRateHz === spec.sampleRateHz)
    return known
  const core = spec.sheet === undefined ? spec : bare(spec)
  cores.set(partOf(core), core)
  return core
}

function bare(spec: DesignSpec): DesignSpec {
  const core = { ...spec }
  delete core.sheet
  return core
}
