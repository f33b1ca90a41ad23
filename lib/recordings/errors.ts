/** Why a recording was refused. Codes are stable; messages are for people. */
export type RecordingCode =
  | 'too-large'
  | 'empty'
  | 'unknown-type'
  | 'compressed'
  | 'truncated'
  | 'bad-header'
  | 'bad-rate'
  | 'not-text'
  | 'line-too-long'
  | 'no-numbers'
  | 'bad-plan'
  | 'time-order'
  | 'no-resampling'
  | 'not-finite'
  | 'rate-differs'
  | 'too-short'
  | 'cannot-save'
  | 'design-refused'
  | 'out-of-room'
  | 'cancelled'
  | 'unexpected'

export interface RecordingPlace {
  /** Line of a text file, counted from 1 as an editor counts them. */
  readonly row?: number
  /** Byte offset in the file, from 0. */
  readonly byte?: number
}

/** The same as data: errors lose their own fields on the way out of a worker, plain objects don't. */
export interface RecordingProblem extends RecordingPlace {
  readonly code: RecordingCode
  readonly message: string
}

/** The one error that reading, running and writing a recording throw for something they refuse. */
export class RecordingError extends Error {
  override readonly name = 'RecordingError'
  readonly code: RecordingCode
  readonly row?: number
  readonly byte?: number

  constructor(code: RecordingCode, message: string, place: RecordingPlace = {}, cause?: unknown) {
    super(message, cause === undefined ? undefined : { cause })
    this.code = code
    if (place.row !== undefined) this.row = place.row
    if (place.byte !== undefined) this.byte = place.byte
  }

  toProblem(): RecordingProblem {
    return {
      code: this.code,
      message: this.message,
      ...(this.row === undefined ? {} : { row: this.row }),
      ...(this.byte === undefined ? {} : { byte: this.byte }),
    }
  }
}
