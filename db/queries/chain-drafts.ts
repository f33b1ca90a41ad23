import 'server-only'
import { and, eq, inArray, sql } from 'drizzle-orm'
import { chainSpecSchema, type ChainSpec } from '@/dsp'
import type { ChainAutosaveOutcome, ChainDraftRecord } from '@/lib/chains/types'
import { database, type Executor, type Transaction } from '../client'
import { chainDrafts } from '../schema'
import { reachableChains, type Access } from './access'
import { findChain } from './chains'

export interface ChainDraftSave {
  readonly chainId: string
  readonly spec: ChainSpec
  readonly parentNumber: number | null
  /** The revision that the editor's page last saw; 0 when it saw none. */
  readonly revision: number
}

/** The viewer's own draft; another editor's is never read. */
export async function findChainDraft(
  access: Access,
  chainId: string,
  on: Executor = database(),
): Promise<ChainDraftRecord | null> {
  const [row] = await on
    .select({
      spec: chainDrafts.spec,
      parentNumber: chainDrafts.parentNumber,
      revision: chainDrafts.revision,
      updatedAt: chainDrafts.updatedAt,
    })
    .from(chainDrafts)
    .where(
      and(
        eq(chainDrafts.chainId, chainId),
        eq(chainDrafts.accountId, access.accountId),
        inArray(chainDrafts.chainId, reachableChains(access, on)),
      ),
    )
  if (!row) return null
  return { ...row, spec: chainSpecSchema.parse(row.spec), updatedAt: row.updatedAt.toISOString() }
}

/**
 * Saves a draft when nobody saved it since `revision`. One statement compares and writes, so that of two pages of the same editor only one
 * gets through. Null when the viewer may not edit this chain.
 */
export async function saveChainDraft(
  tx: Transaction,
  access: Access,
  { chainId, spec, parentNumber, revision }: ChainDraftSave,
): Promise<ChainAutosaveOutcome | null> {
  if (!(await findChain(access, chainId, tx))) return null
  const updatedAt = new Date()
  const next = { spec, parentNumber, revision: revision + 1, updatedAt }
  const [row] = await tx
    .insert(chainDrafts)
    .values({ chainId, accountId: access.accountId, ...next })
    .onConflictDoUpdate({
      target: [chainDrafts.chainId, chainDrafts.accountId],
      set: next,
      setWhere: sql`${chainDrafts.revision} = ${revision}`,
    })
    .returning({ revision: chainDrafts.revision })
  if (row) return { outcome: 'saved', revision: row.revision, updatedAt: updatedAt.toISOString() }
  const current = await findChainDraft(access, chainId, tx)
  if (!current) throw new Error('A draft that stood in the way of another can’t be found.')
  return { outcome: 'stale', current }
}

/** After a version was saved, the draft that it came from starts anew from it; its revision stays, as that of a design's does. */
export async function rebaseChainDraft(
  tx: Transaction,
  access: Access,
  chainId: string,
  spec: ChainSpec,
  parentNumber: number,
): Promise<void> {
  await tx
    .update(chainDrafts)
    .set({ spec, parentNumber, updatedAt: new Date() })
    .where(and(eq(chainDrafts.chainId, chainId), eq(chainDrafts.accountId, access.accountId)))
}
