import 'server-only'
import { and, asc, desc, eq, inArray } from 'drizzle-orm'
import { chainSpecSchema, type ChainSpec } from '@/dsp'
import type { StoredChainNumbers } from '@/lib/chains/stored-numbers'
import type { ChainFigures, ChainVersionSummary } from '@/lib/chains/types'
import { database, type Executor, type Transaction } from '../client'
import { accounts, chainLinks, chains, chainVersions } from '../schema'
import { reachableChains, type Access } from './access'

export interface ChainVersionRow extends ChainVersionSummary {
  readonly numbers: StoredChainNumbers
}

const summaryColumns = {
  number: chainVersions.number,
  note: chainVersions.note,
  savedAt: chainVersions.savedAt,
  savedBy: accounts.label,
  parentNumber: chainVersions.parentNumber,
  engineVersion: chainVersions.engineVersion,
  checksum: chainVersions.checksum,
  spec: chainVersions.spec,
  figures: chainVersions.figures,
}

interface StoredSummary extends Omit<ChainVersionSummary, 'savedAt' | 'state'> {
  readonly savedAt: Date
}

/** Reviews and releases, which move a version's state, will have a table of their own: the version's row never changes. */
function summary({ savedAt, spec, ...row }: StoredSummary): ChainVersionSummary {
  return { ...row, savedAt: savedAt.toISOString(), state: 'draft', spec: chainSpecSchema.parse(spec) }
}

/** Newest first. Empty also for a chain that isn't the viewer's. */
export async function listChainVersions(
  access: Access,
  chainId: string,
  on: Executor = database(),
): Promise<readonly ChainVersionSummary[]> {
  const rows = await on
    .select(summaryColumns)
    .from(chainVersions)
    .innerJoin(accounts, eq(accounts.id, chainVersions.savedBy))
    .where(and(eq(chainVersions.chainId, chainId), inArray(chainVersions.chainId, reachableChains(access, on))))
    .orderBy(desc(chainVersions.number))
  return rows.map(summary)
}

/** One version with its numbers as they were saved; without a number, the latest. */
export async function findChainVersion(
  access: Access,
  chainId: string,
  number: number | 'latest',
  on: Executor = database(),
): Promise<ChainVersionRow | null> {
  const [row] = await on
    .select({ ...summaryColumns, numbers: chainVersions.numbers })
    .from(chainVersions)
    .innerJoin(accounts, eq(accounts.id, chainVersions.savedBy))
    .where(
      and(
        eq(chainVersions.chainId, chainId),
        inArray(chainVersions.chainId, reachableChains(access, on)),
        number === 'latest' ? undefined : eq(chainVersions.number, number),
      ),
    )
    .orderBy(desc(chainVersions.number))
    .limit(1)
  if (!row) return null
  const { numbers, ...rest } = row
  return { ...summary(rest), numbers }
}

export interface NewChainLink {
  readonly stageId: string
  readonly designId: string
  readonly designVersion: number
}

export interface NewChainVersion {
  readonly chainId: string
  readonly number: number
  readonly parentNumber: number | null
  readonly note: string
  readonly spec: ChainSpec
  readonly figures: ChainFigures
  readonly numbers: StoredChainNumbers
  readonly checksum: string
  readonly engineVersion: string
  readonly links: readonly NewChainLink[]
  /** Now, unless a history is being planted. */
  readonly savedAt?: Date
}

/** A version with its links. Only after lockChain in the same transaction, which has checked the viewer. */
export async function insertChainVersion(
  tx: Transaction,
  access: Access,
  { links, ...version }: NewChainVersion,
): Promise<void> {
  const [row] = await tx
    .insert(chainVersions)
    .values({ ...version, savedBy: access.accountId })
    .returning({ id: chainVersions.id })
  if (!row) throw new Error('The database gave no id for a new version of a chain.')
  if (links.length > 0) await tx.insert(chainLinks).values(links.map((link) => ({ ...link, chainVersionId: row.id })))
}

export interface ChainUse {
  readonly chainId: string
  readonly drawingNumber: string
  readonly title: string
  readonly chainVersion: number
  readonly stageId: string
  readonly designVersion: number
}

/** Where a design is used: every version of a chain, as far as the viewer reaches, with a stage tied to one of the design's versions. */
export async function listChainsUsing(
  access: Access,
  designId: string,
  on: Executor = database(),
): Promise<readonly ChainUse[]> {
  return on
    .select({
      chainId: chains.id,
      drawingNumber: chains.drawingNumber,
      title: chains.title,
      chainVersion: chainVersions.number,
      stageId: chainLinks.stageId,
      designVersion: chainLinks.designVersion,
    })
    .from(chainLinks)
    .innerJoin(chainVersions, eq(chainVersions.id, chainLinks.chainVersionId))
    .innerJoin(chains, eq(chains.id, chainVersions.chainId))
    .where(and(eq(chainLinks.designId, designId), inArray(chains.id, reachableChains(access, on))))
    .orderBy(asc(chains.drawingNumber), desc(chainVersions.number), asc(chainLinks.stageId))
}
