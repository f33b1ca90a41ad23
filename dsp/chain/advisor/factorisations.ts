import { MOST_DECIMATION } from '../limits'

/** Decimation in more stages than this saves nothing in practice (Crochiere & Rabiner 1983, §5.3: two or three stages are nearly always enough). */
export const MOST_PLAN_STAGES = 4

/** Every ordered way to write a whole number as a product of at most four factors from 2 to 256; for 1 the empty one. */
export function factorisations(total: number, most: number = MOST_PLAN_STAGES): number[][] {
  if (total === 1) return [[]]
  if (most === 0) return []
  const found: number[][] = []
  for (let factor = 2; factor <= Math.min(total, MOST_DECIMATION); factor++) {
    if (total % factor !== 0) continue
    for (const rest of factorisations(total / factor, most - 1)) found.push([factor, ...rest])
  }
  return found
}
