/** A measured response, ready to be asked between its rows. */
export interface MeasuredTable {
  readonly frequenciesHz: Float64Array
  readonly magnitudeDb: Float64Array
  /** Unwrapped. */
  readonly phaseRadians: Float64Array
}
