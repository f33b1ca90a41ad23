import 'server-only'
import { and, eq, inArray, sql } from 'drizzle-orm'
import { designSpecSchema, type DesignSpec } from '@/dsp'
import type { AutosaveOutcome, DraftRecord } from '@/lib/designs/types'
import { database, type Executor, type Transaction } from '../client'
import { drafts } from '../schema'
import { reachableDesigns, type Access } from './access'
import { findDesign } from './designs'

export interface DraftSave {
  readonly designId: string
  readonly spec: DesignSpec
  readonly parentNumber: number | null
  /** The revision that the editor's page last saw; 0 when it saw none. */
  readonly revision: number
}

/** The viewer's own draft; another editor's is never read. */
export async function findDraft(
  access: Access,
  designId: string,
  on: Executor = database(),
): Promise<DraftRecord | null> {
  const [row] = await on
    .select({
      spec: drafts.spec,
      parentNumber: drafts.parentNumber,
      revision: drafts.revision,
      updatedAt: drafts.updatedAt,
    })
    .from(drafts)
    .where(
      and(
        eq(drafts.designId, designId),
        eq(drafts.accountId, access.accountId),
        inArray(drafts.designId, reachableDesigns(access, on)),
      ),
    )
  if (!row) return null
  return { ...row, spec: designSpecSchema.parse(row.spec), updatedAt: row.updatedAt.toISOString() }
}

/**
 * Saves a draft when nobody saved it since `revision`. One statement compares and writes, so that of two pages of the same editor only one
 * gets through. Null when the viewer may not edit this design.
 */
export async function saveDraft(
  tx: Transaction,
  access: Access,
  { designId, spec, parentNumber, revision }: DraftSave,
): Promise<AutosaveOutcome | null> {
  if (!(await findDesign(access, designId, tx))) return null
  const updatedAt = new Date()
  const next = { spec, parentNumber, revision: revision + 1, updatedAt }
  const [row] = await tx
    .insert(drafts)
    .values({ designId, accountId: access.accountId, ...next })
    .onConflictDoUpdate({
      target: [drafts.designId, drafts.accountId],
      set: next,
      setWhere: sql`${drafts.revision} = ${revision}`,
    })
    .returning({ revision: drafts.revision })
  if (row) return { outcome: 'saved', revision: row.revision, updatedAt: updatedAt.toISOString() }
  const current = await findDraft(access, designId, tx)
  if (!current) throw new Error('A draft that stood in the way of another can’t be found.')
  return { outcome: 'stale', current }
}

/**
 * After a version was saved, the draft that it came from starts anew from it. Its revision stays, so that the page that saved goes on
 * saving, and so that a number that was given once never comes back.
 */
export async function rebaseDraft(
  tx: Transaction,
  access: Access,
  designId: string,
  spec: DesignSpec,
  parentNumber: number,
): Promise<void> {
  await tx
    .update(drafts)
    .set({ spec, parentNumber, updatedAt: new Date() })
    .where(and(eq(drafts.designId, designId), eq(drafts.accountId, access.accountId)))
}
