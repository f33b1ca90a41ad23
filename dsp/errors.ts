/**
 * The one error that dsp throws for an input it refuses.
 *
 * `field` is the path of the offending part of the input (e.g. `analog.edgesHz.0`, `sampleRateHz`, `how.method`), so that a screen
 * can put the sentence beside the word that caused it; `nearest` is the closest value that would have been accepted, in the unit
 * of that field.
 */
export class DesignError extends Error {
  override readonly name = 'DesignError'
  readonly code: string
  readonly field: string
  readonly nearest?: number | string

  constructor(code: string, field: string, message: string, nearest?: number | string) {
    super(message)
    this.code = code
    this.field = field
    if (nearest !== undefined) this.nearest = nearest
  }
}
