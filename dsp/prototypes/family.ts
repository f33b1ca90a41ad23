import { butterworth } from './butterworth'
import type { Prototype } from './prototype'
import type { AnalogSpec } from '../spec'

export function prototypeOf(spec: AnalogSpec): Prototype {
  return butterworth(spec.order)
}
