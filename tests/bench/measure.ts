/**
 * Milliseconds of processor time of each of `rounds` calls, after `warmup` that aren't counted. Processor and not wall time, so that a
 * busy machine tells (nearly) the same; on an idle one they are equal, all of this being single-threaded.
 */
export function times(rounds: number, warmup: number, run: () => void): number[] {
  for (let i = 0; i < warmup; i++) run()
  return Array.from({ length: rounds }, () => {
    const start = process.cpuUsage()
    run()
    const { user, system } = process.cpuUsage(start)
    return (user + system) / 1000
  })
}

export const median = (values: readonly number[]): number => {
  const sorted = [...values].sort((left, right) => left - right)
  return sorted[Math.floor(sorted.length / 2)] ?? Number.NaN
}

export const least = (values: readonly number[]): number => Math.min(...values)

export const format = (milliseconds: number): string => `${milliseconds.toPrecision(3)} ms`
