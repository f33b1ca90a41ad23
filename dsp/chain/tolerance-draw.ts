import { seededUniform } from '../numeric/random'
import type { AnalogSection } from './analog-sections'
import type { ToleranceSettings } from './spec'

/** A bijection of 32-bit words that changes half the bits when one changes (the finaliser of MurmurHash3; constants from memory). */
function mixed(word: number): number {
  let hash = word | 0
  hash = Math.imul(hash ^ (hash >>> 16), 0x85ebca6b)
  hash = Math.imul(hash ^ (hash >>> 13), 0xc2b2ae35)
  return (hash ^ (hash >>> 16)) >>> 0
}

/**
 * Seed of one channel's own stream. Different for every channel of a run, since each step is a bijection; two rounds, so that the channels
 * of one seed aren't those of another shifted along.
 *
 * @param seed whole, 0 … 2³² − 1
 * @param channel whole, from 0
 */
export const channelSeed = (seed: number, channel: number): number => mixed(mixed(channel ^ mixed(seed)) + seed)

/** f0 and Q of unity-gain Sallen–Key parts, relative to their nominal values, from each part relative to its own. */
export interface RelativeSection {
  readonly f0: number
  readonly q: number
}

/**
 * Low-pass with R1 = R2: f0 = 1/(2π√(R1·R2·C1·C2)), Q = √(R1·R2·C1·C2) / (C2·(R1 + R2)), C1 from the output to the node of the resistors,
 * C2 from the amplifier's input to ground (R. P. Sallen & E. L. Key, IRE Trans. Circuit Theory 2(1), 1955).
 */
export function lowPassOfParts(r1: number, r2: number, c1: number, c2: number): RelativeSection {
  const root = Math.sqrt(r1 * r2 * c1 * c2)
  return { f0: 1 / root, q: (2 * root) / (c2 * (r1 + r2)) }
}

/** High-pass with C1 = C2, R and C changing places: Q = √(R1·R2·C1·C2) / (R1·(C1 + C2)), R1 from the output to the node. */
export function highPassOfParts(r1: number, r2: number, c1: number, c2: number): RelativeSection {
  const root = Math.sqrt(r1 * r2 * c1 * c2)
  return { f0: 1 / root, q: (2 * root) / (r1 * (c1 + c2)) }
}

type Drawn = Pick<AnalogSection, 'order' | 'response'>

/**
 * One channel: f0 and Q of each section over their nominal values, f0 first, side by side; Q is 1 for order 1.
 *
 * Everything is drawn evenly (uniform distribution) within ± percent and independently. `parts`: R1, R2, C1, C2 of a unity-gain Sallen–Key
 * section, high-pass ones of its dual, R and C of a first-order one with f0 = 1/(2πRC). Sections with zeros elsewhere have no such circuit:
 * their poles are drawn as those of a low-pass. `sections`: f0 and Q themselves.
 *
 * @param into as long as twice the number of sections
 */
export function drawChannel(
  settings: ToleranceSettings,
  sections: readonly Drawn[],
  channel: number,
  into: Float64Array,
): void {
  const uniform = seededUniform(channelSeed(settings.seed, channel))
  const within = (percent: number) => 1 + (percent / 100) * (2 * uniform() - 1)
  const { spread } = settings
  sections.forEach(({ order, response }, index) => {
    let drawn: RelativeSection
    if (spread.of === 'sections') {
      const f0 = within(spread.f0Percent)
      drawn = { f0, q: order === 1 ? 1 : within(spread.qPercent) }
    } else if (order === 1) {
      const [r, c] = [within(spread.percent), within(spread.percent)]
      drawn = { f0: 1 / (r * c), q: 1 }
    } else {
      const { percent } = spread
      const [r1, r2, c1, c2] = [within(percent), within(percent), within(percent), within(percent)]
      drawn = response === 'high-pass' ? highPassOfParts(r1, r2, c1, c2) : lowPassOfParts(r1, r2, c1, c2)
    }
    into[2 * index] = drawn.f0
    into[2 * index + 1] = drawn.q
  })
}
