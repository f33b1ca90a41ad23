import { createRunner, type DigitalFilter } from '@/dsp'

/** What is left of the response to a step when it counts as settled. */
const REST = 0.01
const BLOCK = 4096
/** Beyond this a start-up is as long as a recording, and no number helps. */
const MOST_FRAMES = 1 << 24

/**
 * Samples until the response to a unit step stays within 1 % of its largest value around where it ends. The end is known from the
 * coefficients; how long to look, from the slowest pole.
 */
export function settlingFramesOf({ sections, poles }: Pick<DigitalFilter, 'sections' | 'poles'>): number {
  const end = sections.reduce((gain, s) => (gain * (s.b0 + s.b1 + s.b2)) / (1 + s.a1 + s.a2), 1)
  const slowest = poles.reduce((radius, pole) => Math.max(radius, Math.hypot(pole.re, pole.im)), 0)
  // e^(−9) is a hundredth of a hundredth; each further pole as slow as the slowest draws the decay out
  const decay = slowest > 0 ? (9 + 2 * poles.length) / -Math.log(slowest) : 0
  const look = Math.min(MOST_FRAMES, Math.ceil(decay) + 2 * sections.length + 1)
  const runner = createRunner(sections)
  const out = new Float64Array(BLOCK)
  const step = new Float64Array(BLOCK).fill(1)
  const largest: number[] = []
  let greatest = Math.abs(end)
  // largest deviation in each block first: the last block that isn't settled is then run again
  for (let from = 0; from < look; from += BLOCK) {
    runner.process(step, out)
    let worst = 0
    for (const value of out) {
      worst = Math.max(worst, Math.abs(value - end))
      greatest = Math.max(greatest, Math.abs(value))
    }
    largest.push(worst)
  }
  const limit = REST * greatest
  const last = largest.findLastIndex((worst) => worst > limit)
  if (last < 0) return 0
  runner.reset()
  for (let block = 0; block <= last; block += 1) runner.process(step, out)
  return last * BLOCK + out.findLastIndex((value) => Math.abs(value - end) > limit) + 1
}
