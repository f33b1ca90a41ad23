import { DesignError } from '../errors'
import { bessel } from './bessel'
import { butterworth } from './butterworth'
import { chebyshev1, chebyshev2 } from './chebyshev'
import { criticallyDamped } from './critically-damped'
import { elliptic } from './elliptic'
import type { AnalogSpec } from '../spec'
import type { Prototype } from './prototype'

function needed(value: number | undefined, field: string, nearest: number): number {
  if (value !== undefined) return value
  throw new DesignError('missing-value', field, `This family needs ${field.split('.').at(-1)}.`, nearest)
}

/** The prototype of a spec that has passed checkAnalogSpec. One line a family: a new one is added here and in spec.ts. */
export function prototypeOf(spec: AnalogSpec): Prototype {
  switch (spec.family) {
    case 'butterworth':
      return butterworth(spec.order)
    case 'chebyshev1':
      return chebyshev1(spec.order, needed(spec.rippleDb, 'analog.rippleDb', 0.5))
    case 'chebyshev2':
      return chebyshev2(spec.order, needed(spec.attenuationDb, 'analog.attenuationDb', 60))
    case 'elliptic':
      return elliptic(
        spec.order,
        needed(spec.rippleDb, 'analog.rippleDb', 0.5),
        needed(spec.attenuationDb, 'analog.attenuationDb', 60),
      )
    case 'bessel':
      return bessel(spec.order, spec.normalization ?? 'magnitude')
    case 'critically-damped':
      return criticallyDamped(spec.order)
  }
}
