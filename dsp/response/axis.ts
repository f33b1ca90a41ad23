import { DesignError } from '../errors'

export function refuseFrequency(index: number): never {
  throw new DesignError(
    'not-finite',
    `frequenciesHz.${index}`,
    `The frequency at index ${index} is not a finite number of hertz.`,
  )
}

/** f/fs folded to (−1/2, 1/2]; the folding is exact, so that half the rate gives exactly 1/2. */
export function foldedTurns(frequencyHz: number, sampleRateHz: number): number {
  const turns = frequencyHz / sampleRateHz
  return turns - Math.ceil(turns - 0.5)
}

/** sin(πx) for |x| ≤ 1/2, accurate relative to itself; exactly ±1 at the ends. */
export function sinHalfTurns(x: number): number {
  const a = Math.abs(x)
  const s = a <= 0.25 ? Math.sin(Math.PI * a) : Math.cos(Math.PI * (0.5 - a))
  return x < 0 ? -s : s
}

/** cos(πx) for |x| ≤ 1/2, accurate relative to itself; exactly 0 at the ends. */
export function cosHalfTurns(x: number): number {
  const a = Math.abs(x)
  return a <= 0.25 ? Math.cos(Math.PI * a) : Math.sin(Math.PI * (0.5 - a))
}
