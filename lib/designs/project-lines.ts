import type { ChainLine } from '@/lib/chains/project-lines'

/*
 * What the lists show; filled by the pages.
 */

export interface DesignLine {
  readonly id: string
  readonly drawingNumber: string
  readonly title: string
  readonly statement: string
  readonly rate: string
  /** "v3", or "no version yet". */
  readonly version: string
  readonly state: string
  /** "28 Oct 2026, designer, signal chains"; empty before the first version. */
  readonly saved: string
}

export interface ProjectSheet {
  readonly id: string
  readonly code: string
  readonly name: string
  readonly mayCreate: boolean
  readonly designs: readonly DesignLine[]
  readonly chains: readonly ChainLine[]
}
