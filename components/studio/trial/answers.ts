import { DesignError } from '@/dsp'
import { RecordingError, type RecordingProblem } from '@/lib/recordings/errors'
import type { Answer } from './shapes'

/** What was asked, or why it was refused, as data. */
export async function answered<Value>(ask: () => Promise<Value>): Promise<Answer<Value>> {
  try {
    return { ok: true, value: await ask() }
  } catch (cause) {
    return { ok: false, problem: problemOf(cause) }
  }
}

export function problemOf(cause: unknown): RecordingProblem {
  if (cause instanceof RecordingError) return cause.toProblem()
  if (cause instanceof DesignError) {
    const nearest = cause.nearest === undefined ? '' : ` The nearest value that works: ${cause.nearest}.`
    return {
      code: 'design-refused',
      message: `${cause.message}${cause.message.includes(String(cause.nearest)) ? '' : nearest}`,
    }
  }
  return {
    code: 'unexpected',
    message: `This went wrong inside: ${cause instanceof Error ? cause.message : String(cause)}`,
  }
}
