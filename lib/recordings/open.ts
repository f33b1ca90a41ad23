import { RecordingError } from './errors'
import type { MemoryBudget } from './sample-store'
import { sniff, type FileKind } from './sniff'
import { guessTable, type Settled, type TableGuess } from './table/guess'
import type { TablePlan, TextEncoding } from './table/plan'
import { readTable } from './table/read'
import { decodeSample, findEncoding, SAMPLE_BYTES, splitLines } from './table/text'
import { statedTiming } from './table/timing'
import { MAX_FILE_BYTES, QUIET, type Recording } from './types'
import { describeFormat, megabytes, readWavLayout } from './wav/header'
import { wavSource } from './wav/source'

/** Refuses what is too large, empty or of another kind; says by content what the file is. */
export async function identify(file: Blob): Promise<FileKind> {
  if (file.size > MAX_FILE_BYTES) {
    throw new RecordingError(
      'too-large',
      `The file has ${megabytes(file.size)}; ${megabytes(MAX_FILE_BYTES)} at most can be tried here. Cut a part out of it that shows what you want to see.`,
    )
  }
  return sniff(new Uint8Array(await headOf(file, 64)))
}

async function headOf(file: Blob, bytes: number): Promise<ArrayBuffer> {
  try {
    return await file.slice(0, bytes).arrayBuffer()
  } catch (cause) {
    throw new RecordingError(
      'truncated',
      'The file can’t be read. Was it moved, or is it a folder? Choose it again.',
      { byte: 0 },
      cause,
    )
  }
}

/** Opens a WAVE file: its header only; samples are read from the file when they are wanted. */
export async function openWav(file: Blob, name: string): Promise<Recording> {
  const layout = await readWavLayout(file)
  return {
    kind: 'wav',
    name,
    sampleRateHz: layout.sampleRateHz,
    channels: Array.from({ length: layout.channelCount }, (_, channel) => ({
      name: `channel ${channel + 1}`,
      unit: '',
    })),
    source: wavSource(file, layout),
    storage: describeFormat(layout),
    notes: layout.notes,
    flaws: [],
    flawCount: 0,
    timing: statedTiming(layout.sampleRateHz, 'header'),
    rowOf: () => undefined,
    release: () => undefined, // the file is the store
  }
}

/** The whole lines at the beginning of a text file. */
async function firstLines(file: Blob): Promise<{ lines: string[]; encoding: TextEncoding }> {
  const head = new Uint8Array(await headOf(file, SAMPLE_BYTES))
  const found = findEncoding(head)
  const cutOff = file.size > SAMPLE_BYTES
  const lines = splitLines(decodeSample(head, found), cutOff)
  if (cutOff && lines.length === 0)
    throw new RecordingError(
      'line-too-long',
      `The first line is longer than ${SAMPLE_BYTES / 1024} kB; this is no table of samples.`,
      { row: 1 },
    )
  return { lines, encoding: found.encoding }
}

/** Detects how a text file is written, around what the reader has settled. */
export async function guessFile(file: Blob, settled: Settled = {}): Promise<TableGuess> {
  const { lines, encoding } = await firstLines(file)
  return guessTable(lines, encoding, settled)
}

/** Tries a plan on the beginning of the file: the rows, the rate and the jitter that it gives. */
export async function tryPlan(file: Blob, name: string, plan: TablePlan, budget: MemoryBudget): Promise<Recording> {
  const { lines } = await firstLines(file)
  return readTable(new Blob([lines.join('\n')]), name, { ...plan, encoding: 'utf-8' }, budget, QUIET)
}
