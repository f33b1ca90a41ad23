import { RecordingError } from '@/lib/recordings/errors'
import { guessFile, tryPlan } from '@/lib/recordings/open'
import type { MemoryBudget } from '@/lib/recordings/sample-store'
import type { Settled, TableGuess } from '@/lib/recordings/table/guess'
import type { TablePlan } from '@/lib/recordings/table/plan'
import type { PlanChange, TablePreview } from './shapes'

interface OnDesk {
  readonly file: File | Blob
  readonly name: string
  readonly settled: Settled
  readonly guess: TableGuess
  readonly plan: TablePlan
}

/** A text file whose reading is being settled: detected, corrected, tried on its first lines. */
export class TableDesk {
  private on: OnDesk | null = null

  constructor(private readonly budget: MemoryBudget) {}

  async lay(file: Blob, name: string): Promise<TablePreview> {
    const guess = await guessFile(file)
    this.on = { file, name, settled: {}, guess, plan: guess.plan }
    return this.preview(this.on)
  }

  async change(change: PlanChange): Promise<TablePreview> {
    const on = this.needed()
    if ('plan' in change) this.on = { ...on, plan: change.plan }
    else {
      const settled = merged(on.settled, change.settled)
      const guess = await guessFile(on.file, settled)
      this.on = { ...on, settled, guess, plan: keptNames(on, change.settled, guess.plan) }
    }
    return this.preview(this.needed())
  }

  settled(): { file: Blob; name: string; plan: TablePlan } {
    const { file, name, plan } = this.needed()
    return { file, name, plan }
  }

  clear(): void {
    this.on = null
  }

  private needed(): OnDesk {
    if (!this.on) throw new RecordingError('unexpected', 'There is no table to read. Choose a file first.')
    return this.on
  }

  private async preview({ file, name, guess, plan }: OnDesk): Promise<TablePreview> {
    const basis = { fileName: name, fileBytes: file.size, plan, columns: guess.columns, firstLines: guess.firstLines }
    try {
      const sample = await tryPlan(file, name, plan, this.budget)
      sample.release()
      return {
        ...basis,
        timing: sample.timing,
        rowsTried: sample.source.frames,
        flaws: sample.flaws.slice(0, 5),
        problem: null,
      }
    } catch (cause) {
      if (!(cause instanceof RecordingError)) throw cause
      return { ...basis, timing: null, rowsTried: 0, flaws: [], problem: cause.toProblem() }
    }
  }
}

/** Another delimiter makes other lines and columns: what was settled of those is detected anew. */
function merged(before: Settled, change: Settled): Settled {
  if (change.delimiter === undefined && change.decimal === undefined) return { ...before, ...change }
  const { delimiter, decimal, statedRateHz } = { ...before, ...change }
  return {
    ...(delimiter === undefined ? {} : { delimiter }),
    ...(decimal === undefined ? {} : { decimal }),
    ...(statedRateHz === undefined ? {} : { statedRateHz }),
  }
}

/** Names, units and choice of columns that were typed stay, as long as the columns and their header do. */
function keptNames(on: OnDesk, change: Settled, plan: TablePlan): TablePlan {
  if (change.delimiter !== undefined || change.headerLine !== undefined || plan.delimiter !== on.plan.delimiter)
    return plan
  const typed = new Map(on.plan.channels.map((channel) => [channel.column, channel]))
  return { ...plan, channels: plan.channels.map((channel) => typed.get(channel.column) ?? channel) }
}
