import 'server-only'
import type { z } from 'zod'
import type { Access } from '@/db/queries/access'
import type { DesignRow } from '@/db/queries/designs'
import { rebaseDraft } from '@/db/queries/drafts'
import type { Transaction } from '@/db/queries/transaction'
import { findVersion, insertVersion, type VersionRow } from '@/db/queries/versions'
import { ENGINE_VERSION } from '@/dsp'
import type { Done } from '@/lib/actions/action'
import { AppError } from '@/lib/errors'
import { checksumOfStored, type StoredCoefficients } from './coefficients'
import type { saveVersionSchema } from './schemas'
import type { SaveVersionOutcome, VersionSummary } from './types'

/** What the browser hears of a version; coefficients stay here. */
function summaryOf(row: VersionRow): VersionSummary {
  const { number, note, savedAt, savedBy, state, parentNumber, engineVersion, checksum, spec } = row
  return { number, note, savedAt, savedBy, state, parentNumber, engineVersion, checksum, spec }
}

interface Save {
  readonly tx: Transaction
  readonly access: Access
  /** Locked by the caller: nobody else numbers a version of it meanwhile. */
  readonly design: DesignRow
  readonly input: z.output<typeof saveVersionSchema>
  /** Of the input's spec, computed by the caller before the transaction: a slow design must hold no lock. */
  readonly coefficients: StoredCoefficients
}

/**
 * Saves the next version, computed on this side from its spec, whatever the browser had computed. When the latest version isn't the one that this
 * spec came from, nothing is saved and the latest is shown, unless the user has seen exactly that one and saves on top of it.
 */
export async function saveVersion({
  tx,
  access,
  design,
  input,
  coefficients,
}: Save): Promise<Done<SaveVersionOutcome>> {
  const latest = await findVersion(access, design.id, 'latest', tx)
  const latestNumber = latest?.number ?? null
  if (input.parentNumber !== latestNumber && (input.onTopOf ?? null) !== latestNumber) {
    if (latest) return { value: { outcome: 'conflict', theirs: summaryOf(latest) }, trail: null }
    throw new AppError('not-valid', 'This design has no version yet, so that nothing can be based on one.', {
      field: 'parentNumber',
    })
  }

  const number = (latestNumber ?? 0) + 1
  const checksum = checksumOfStored(coefficients)
  await insertVersion(tx, access, {
    designId: design.id,
    number,
    parentNumber: latestNumber,
    note: input.note,
    spec: input.spec,
    coefficients,
    checksum,
    engineVersion: ENGINE_VERSION,
  })
  await rebaseDraft(tx, access, design.id, input.spec, number)
  const saved = await findVersion(access, design.id, number, tx)
  if (!saved) throw new Error('A version that was just saved can’t be found.')
  return {
    value: { outcome: 'saved', version: summaryOf(saved) },
    trail: { team: design.teamId, object: `design:${design.id}`, details: { number, checksum } },
  }
}
