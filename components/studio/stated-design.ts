import { DesignError, designFromSpec, type Design, type DesignSpec } from '@/dsp'
import { coreOf } from './core-spec'
import { orRefusal } from './or-refusal'

/** Specs are never altered, so that a design can be kept beside its spec for as long as anybody holds it. */
const kept = new WeakMap<DesignSpec, Design | DesignError>()

/** The design that a spec states, or why it makes none; computed once, however many ask. */
export function statedDesign(spec: DesignSpec): Design | DesignError {
  const known = kept.get(spec)
  if (known) return known
  const core = coreOf(spec)
  const design = core === spec ? orRefusal(() => designFromSpec(spec)) : ofSpec(statedDesign(core), spec)
  kept.set(spec, design)
  return design
}

const ofSpec = (design: Design | DesignError, spec: DesignSpec): Design | DesignError =>
  design instanceof DesignError ? design : { ...design, spec }
