import type { ChainUnit } from './spec'

export type ChainQuantity = 'acceleration' | 'velocity' | 'displacement' | 'pressure' | 'force' | 'strain' | 'voltage'

interface UnitFacts {
  readonly quantity: ChainQuantity
  /** SI units (m/s², m/s, m, Pa, N, 1, V) in one of these. */
  readonly si: number
}

/** Standard acceleration of gravity, m/s²: exact by definition (ISO 80000-3; 3rd CGPM 1901). */
const STANDARD_GRAVITY = 9.80665

export const chainUnits: Readonly<Record<ChainUnit, UnitFacts>> = {
  g: { quantity: 'acceleration', si: STANDARD_GRAVITY },
  'm/s²': { quantity: 'acceleration', si: 1 },
  'm/s': { quantity: 'velocity', si: 1 },
  'mm/s': { quantity: 'velocity', si: 1e-3 },
  m: { quantity: 'displacement', si: 1 },
  mm: { quantity: 'displacement', si: 1e-3 },
  µm: { quantity: 'displacement', si: 1e-6 },
  Pa: { quantity: 'pressure', si: 1 },
  N: { quantity: 'force', si: 1 },
  'µm/m': { quantity: 'strain', si: 1e-6 },
  V: { quantity: 'voltage', si: 1 },
}

const integrals: Partial<Record<ChainQuantity, ChainQuantity>> = { acceleration: 'velocity', velocity: 'displacement' }

/** What a quantity becomes when integrated over time so many times; null where that is nothing this product names. */
export function integralOf(quantity: ChainQuantity, times: 1 | 2): ChainQuantity | null {
  const once = integrals[quantity] ?? null
  return times === 1 || once === null ? once : (integrals[once] ?? null)
}
