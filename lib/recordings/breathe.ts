import { RecordingError } from './errors'
import type { TaskControl } from './types'

const SLICE_MS = 40

/**
 * Lets a long loop in a worker hear a cancel: a promise that is already settled never lets a message in, a timer does. Yields at most
 * every 40 ms, so that the loop isn't slowed.
 */
export function createBreath(control: TaskControl): (done: number, total: number) => Promise<void> {
  let last = performance.now()
  return async (done, total) => {
    if (performance.now() - last < SLICE_MS) return
    control.progress(done, total)
    await new Promise((resolve) => setTimeout(resolve, 0))
    if (control.cancelled()) throw new RecordingError('cancelled', 'Stopped. Nothing was changed.')
    last = performance.now()
  }
}
