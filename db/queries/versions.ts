import 'server-only'
import { and, desc, eq, inArray } from 'drizzle-orm'
import { designSpecSchema, type DesignSpec } from '@/dsp'
import type { StoredCoefficients } from '@/lib/designs/coefficients'
import type { VersionSummary } from '@/lib/designs/types'
import { database, type Executor, type Transaction } from '../client'
import { accounts, versions } from '../schema'
import { reachableDesigns, type Access } from './access'

export interface VersionRow extends VersionSummary {
  readonly coefficients: StoredCoefficients
}

const summaryColumns = {
  number: versions.number,
  note: versions.note,
  savedAt: versions.savedAt,
  savedBy: accounts.label,
  parentNumber: versions.parentNumber,
  engineVersion: versions.engineVersion,
  checksum: versions.checksum,
  spec: versions.spec,
}

interface StoredSummary extends Omit<VersionSummary, 'savedAt' | 'state'> {
  readonly savedAt: Date
}

/** Reviews and releases, which move a version's state, will have a table of their own: the version's row never changes. */
function summary({ savedAt, spec, ...row }: StoredSummary): VersionSummary {
  return { ...row, savedAt: savedAt.toISOString(), state: 'draft', spec: designSpecSchema.parse(spec) }
}

/** Newest first. Empty also for a design that isn't the viewer's. */
export async function listVersions(
  access: Access,
  designId: string,
  on: Executor = database(),
): Promise<readonly VersionSummary[]> {
  const rows = await on
    .select(summaryColumns)
    .from(versions)
    .innerJoin(accounts, eq(accounts.id, versions.savedBy))
    .where(and(eq(versions.designId, designId), inArray(versions.designId, reachableDesigns(access, on))))
    .orderBy(desc(versions.number))
  return rows.map(summary)
}

/** One version with its coefficients as they were saved; without a number, the latest. */
export async function findVersion(
  access: Access,
  designId: string,
  number: number | 'latest',
  on: Executor = database(),
): Promise<VersionRow | null> {
  const [row] = await on
    .select({ ...summaryColumns, coefficients: versions.coefficients })
    .from(versions)
    .innerJoin(accounts, eq(accounts.id, versions.savedBy))
    .where(
      and(
        eq(versions.designId, designId),
        inArray(versions.designId, reachableDesigns(access, on)),
        number === 'latest' ? undefined : eq(versions.number, number),
      ),
    )
    .orderBy(desc(versions.number))
    .limit(1)
  if (!row) return null
  const { coefficients, ...rest } = row
  return { ...summary(rest), coefficients }
}

export interface NewVersion {
  readonly designId: string
  readonly number: number
  readonly parentNumber: number | null
  readonly note: string
  readonly spec: DesignSpec
  readonly coefficients: StoredCoefficients
  readonly checksum: string
  readonly engineVersion: string
  /** Now, unless a history is being planted. */
  readonly savedAt?: Date
}

/** Only after lockDesign in the same transaction, which has checked the viewer. */
export async function insertVersion(tx: Transaction, access: Access, version: NewVersion): Promise<void> {
  await tx.insert(versions).values({ ...version, savedBy: access.accountId })
}
