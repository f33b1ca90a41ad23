/** One tone: what it comes to in the stored samples, for a level of 1 at the sensor. */
export interface ProofLine {
  /** “wanted”, “image from the 3rd strip”, “interferer “pump””. Strips count as in the fold chart: the base band is the first. */
  readonly what: string
  readonly inputHz: number
  readonly landsHz: number
  readonly computedDb: number
  readonly measuredDb: number
  /** Most that the two may differ by, from the noise of the converter and the method. */
  readonly boundDb: number
  /** `not above`: the level lies in the noise of the converter, and is only held not to lie above the two together: it was not measured. */
  readonly comparison: 'within' | 'not above'
  readonly agrees: boolean
}

export interface ProofResult {
  readonly inputRateHz: number
  /** In one period; what the filters remember of those before is run besides. */
  readonly samplesIn: number
  readonly samplesStored: number
  readonly lines: readonly ProofLine[]
  /** Slope of the phase about the middle of the kept band. */
  readonly delay: {
    readonly computedSeconds: number
    readonly measuredSeconds: number
    readonly boundSeconds: number
    readonly agrees: boolean
  }
  /** Of the stored samples, dB against (chain's unit)²/Hz; what the converter adds is counted in the computed one by its mean about a line. */
  readonly spectrum: {
    readonly frequenciesHz: Float64Array
    readonly measuredDensityDb: Float64Array
    readonly computedDensityDb: Float64Array
  }
  readonly notes: readonly string[]
  /** Every line and the delay agree, something wanted was measured, and an image where the weak fold stands out of the noise. */
  readonly agrees: boolean
}
