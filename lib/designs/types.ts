import type { DesignSpec } from '@/dsp'

/*
 * What travels between the server and the studio. The server side (app, db) fills these; the screens receive them, and the functions
 * below, as props.
 */

/** The five roles of a team member, from most to least. */
export type Role = 'owner' | 'designer' | 'reviewer' | 'integrator' | 'observer'

export type VersionState = 'draft' | 'in-review' | 'approved' | 'returned' | 'released' | 'superseded' | 'withdrawn'

export interface VersionSummary {
  readonly number: number
  readonly note: string
  readonly savedAt: string // ISO 8601
  readonly savedBy: string // display label, never an e-mail address
  readonly state: VersionState
  readonly parentNumber: number | null
  readonly engineVersion: string
  /** SHA-256 of the canonical coefficients, hex. */
  readonly checksum: string
  readonly spec: DesignSpec
}

/** Where a recomputation on opening differs from what was stored with the version. */
export interface RecomputeDifference {
  readonly versionNumber: number
  readonly storedEngine: string
  readonly currentEngine: string
  readonly worstRelative: number
}

export interface DraftRecord {
  readonly spec: DesignSpec
  /** The version this draft started from; null before the first version. */
  readonly parentNumber: number | null
  /** Grows by one with each autosave; a save that names an older revision is refused, not merged. */
  readonly revision: number
  readonly updatedAt: string
}

export interface DesignRecord {
  readonly id: string
  readonly drawingNumber: string
  readonly title: string
  readonly projectId: string
  readonly projectName: string
}

export interface Viewer {
  readonly accountId: string
  readonly label: string
  readonly role: Role
  readonly mayEdit: boolean
}

export interface SaveVersionInput {
  readonly designId: string
  readonly spec: DesignSpec
  readonly note: string
  readonly parentNumber: number | null
  /** Set when the user has been shown the other version and chose to save on top of it. */
  readonly onTopOf?: number
}

export type SaveVersionOutcome =
  | { readonly outcome: 'saved'; readonly version: VersionSummary }
  /** Someone else saved on the same parent first. Nothing is lost: the draft stands, and both are shown. */
  | { readonly outcome: 'conflict'; readonly theirs: VersionSummary }
  | { readonly outcome: 'refused'; readonly problem: Problem }

/** A refusal as the screens show it: a code, a sentence, the field it belongs to and the nearest value that works. */
export interface Problem {
  readonly code: string
  readonly message: string
  readonly field?: string
  readonly nearest?: number | string
}

/** Answer of PUT /api/designs/[designId]/draft, and of a chain's. */
export type AutosaveOutcome<Draft = DraftRecord> =
  | { readonly outcome: 'saved'; readonly revision: number; readonly updatedAt: string }
  /** The same person has the draft open elsewhere and saved there since. */
  | { readonly outcome: 'stale'; readonly current: Draft }

export interface StudioActions {
  saveVersion(input: SaveVersionInput): Promise<SaveVersionOutcome>
  renameDesign(designId: string, title: string): Promise<{ readonly problem?: Problem }>
}

export interface StudioProps {
  readonly design: DesignRecord
  readonly viewer: Viewer
  readonly versions: readonly VersionSummary[] // newest first
  readonly draft: DraftRecord | null
  readonly difference: RecomputeDifference | null
  readonly actions: StudioActions
}
