/* What the lists show of a chain; filled by the pages. */

export interface ChainLine {
  readonly id: string
  readonly drawingNumber: string
  readonly title: string
  readonly statement: string
  /** Of the stored samples. */
  readonly rate: string
  /** "v3", or "no version yet". */
  readonly version: string
  /** "All 4 met", "3 of 4 met"; empty before the first version and where nothing is asked. */
  readonly sheet: string
  readonly sheetTone: 'met' | 'missed' | 'open'
  /** "28 Oct 2026, designer, signal chains"; empty before the first version. */
  readonly saved: string
}
