import { computeChain, type ChainSpec, type ComputedChain, type DesignError } from '@/dsp'
import { orRefusal } from '@/components/studio/or-refusal'

/** Specs are never altered, so that a chain can be kept beside its spec for as long as anybody holds it. */
const kept = new WeakMap<ChainSpec, ComputedChain | DesignError>()

/** The chain that a spec comes to, or why it makes none; computed once, however many ask. */
export function computedChain(spec: ChainSpec): ComputedChain | DesignError {
  const known = kept.get(spec)
  if (known) return known
  const chain = orRefusal(() => computeChain(spec))
  kept.set(spec, chain)
  return chain
}
