import { guessFile } from '@/lib/recordings/open'
import { MemoryBudget } from '@/lib/recordings/sample-store'
import { readTable } from '@/lib/recordings/table/read'
import { QUIET } from '@/lib/recordings/types'

const ROWS = 1_000_000

/** A table of a million rows of four: time and three channels, as a logger writes them. */
function makeTable(): Blob {
  const lines = ['time [s],x [m/s2],y [m/s2],z [m/s2]']
  let state = 1
  const next = () => {
    state = (Math.imul(state, 1_664_525) + 1_013_904_223) >>> 0
    return (state / 2 ** 32 - 0.5) * 20
  }
  for (let i = 0; i < ROWS; i += 1)
    lines.push(`${(i / 1000).toFixed(3)},${next().toFixed(5)},${next().toFixed(5)},${next().toFixed(5)}`)
  return new Blob([lines.join('\n')])
}

async function medianMs(times: number, task: () => Promise<void>): Promise<number> {
  const taken: number[] = []
  for (let k = 0; k < times; k += 1) {
    const start = performance.now()
    await task()
    taken.push(performance.now() - start)
  }
  return taken.sort((a, b) => a - b)[Math.floor(times / 2)] ?? NaN
}

/** Reading a table of a million rows of four against split and Number on the same text, in one run. Median of five. */
export async function benchRecordings(): Promise<{ name: string; ms: number; againstMs: number; ratio: number }> {
  const file = makeTable()
  const { plan } = await guessFile(file)
  const ms = await medianMs(5, async () => {
    const recording = await readTable(file, 'bench', plan, new MemoryBudget(1e9), QUIET)
    if (recording.source.frames !== ROWS || recording.sampleRateHz !== 1000)
      throw new Error('the table was not read as written')
  })
  const againstMs = await medianMs(3, async () => {
    const columns = [0, 1, 2, 3].map(() => new Float64Array(ROWS))
    const lines = (await file.text()).split('\n')
    for (let i = 0; i < ROWS; i += 1)
      (lines[i + 1] ?? '').split(',').forEach((cell, k) => (columns[k]![i] = Number(cell)))
  })
  return {
    name: `table of ${ROWS} rows × 4, read and timed, against split and Number`,
    ms,
    againstMs,
    ratio: ms / againstMs,
  }
}
