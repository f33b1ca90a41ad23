import type { ChainRequirementResult, ChainSpec, DesignLink } from '@/dsp'
import type { DesignRecord, Problem, VersionState, Viewer } from '@/lib/designs/types'

/* What travels between the server and the chain page. */

/** A line of the sheet as it was judged when the version was saved, in the order of the spec's lines, which say what was asked. */
export type StoredLine = Omit<ChainRequirementResult, 'requirement'>

/** The figures a version was saved with, computed by the server. */
export interface ChainFigures {
  readonly outputRateHz: number
  readonly delaySeconds: number
  readonly worstAliasDb: number
  readonly effectiveBits: number
  readonly multipliesPerStoredSample: number
  /** Lines of the sheet: met, missed, and those that can't be judged. */
  readonly met: number
  readonly missed: number
  readonly unjudged: number
  /** The tolerance run of the version's own seed: 95th percentile between two channels. */
  readonly match: readonly { readonly hz: number; readonly gainDb: number; readonly phaseDegrees: number }[]
  /** Missing in versions that were saved before they were kept. */
  readonly lines?: readonly StoredLine[]
}

export interface ChainVersionSummary {
  readonly number: number
  readonly note: string
  readonly savedAt: string // ISO 8601
  readonly savedBy: string // display label, never an e-mail address
  readonly state: VersionState
  readonly parentNumber: number | null
  readonly engineVersion: string
  /** SHA-256 of the canonical spec, figures and numbers, hex. */
  readonly checksum: string
  readonly spec: ChainSpec
  readonly figures: ChainFigures
}

export interface ChainDraftRecord {
  readonly spec: ChainSpec
  readonly parentNumber: number | null
  readonly revision: number
  readonly updatedAt: string
}

/** Answer of PUT /api/chains/[chainId]/draft. */
export type ChainAutosaveOutcome =
  | { readonly outcome: 'saved'; readonly revision: number; readonly updatedAt: string }
  | { readonly outcome: 'stale'; readonly current: ChainDraftRecord }

export interface SaveChainVersionInput {
  readonly chainId: string
  readonly spec: ChainSpec
  readonly note: string
  readonly parentNumber: number | null
  readonly onTopOf?: number
}

export type SaveChainVersionOutcome =
  | { readonly outcome: 'saved'; readonly version: ChainVersionSummary }
  | { readonly outcome: 'conflict'; readonly theirs: ChainVersionSummary }
  | { readonly outcome: 'refused'; readonly problem: Problem }

/** A design of the same project that a stage can be tied to: its newest version. */
export interface LinkableDesign {
  readonly link: DesignLink
  /** Whether its analog original is known by its roots, which an anti-alias stage needs. */
  readonly hasAnalog: boolean
}

/** Like a design's record: id, drawing number, title, project. */
export type ChainRecord = DesignRecord

export interface ChainActions {
  saveVersion(input: SaveChainVersionInput): Promise<SaveChainVersionOutcome>
  renameChain(chainId: string, title: string): Promise<{ readonly problem?: Problem }>
}

export interface ChainPageProps {
  readonly chain: ChainRecord
  readonly viewer: Viewer
  readonly versions: readonly ChainVersionSummary[] // newest first
  readonly draft: ChainDraftRecord | null
  /** What a chain without versions opens with. */
  readonly startingSpec: ChainSpec
  readonly linkable: readonly LinkableDesign[]
  readonly actions: ChainActions
}
