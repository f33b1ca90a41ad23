import 'server-only'
import type { z } from 'zod'
import type { Access } from '@/db/queries/access'
import { rebaseChainDraft } from '@/db/queries/chain-drafts'
import { findChainVersion, insertChainVersion, type ChainVersionRow } from '@/db/queries/chain-versions'
import type { ChainRow } from '@/db/queries/chains'
import type { Transaction } from '@/db/queries/transaction'
import { ENGINE_VERSION } from '@/dsp'
import type { Done } from '@/lib/actions/action'
import { AppError } from '@/lib/errors'
import { checkedLinks } from './checked-links'
import { chainChecksum } from './checksum'
import type { ComputedChainVersion } from './compute-version'
import { linksOf } from './links'
import type { saveChainVersionSchema } from './schemas'
import { withNamesOf } from './stored-numbers'
import type { ChainVersionSummary, SaveChainVersionOutcome } from './types'

/** What the browser hears of a version; its numbers stay here. */
export function chainSummaryOf({ numbers: _, ...summary }: ChainVersionRow): ChainVersionSummary {
  return summary
}

interface Save {
  readonly tx: Transaction
  readonly access: Access
  /** Locked by the caller: nobody else numbers a version of it meanwhile. */
  readonly chain: ChainRow
  readonly input: z.output<typeof saveChainVersionSchema>
  /** Of the input's spec, computed by the caller before the transaction. */
  readonly computed: ComputedChainVersion
}

/**
 * Saves the next version, its links held against the designs that they name. When the latest version isn't the one that this spec came
 * from, nothing is saved and the latest is shown, unless the user has seen exactly that one and saves on top of it.
 * @throws DesignError as checkedLinks
 */
export async function saveChainVersion({
  tx,
  access,
  chain,
  input,
  computed,
}: Save): Promise<Done<SaveChainVersionOutcome>> {
  const latest = await findChainVersion(access, chain.id, 'latest', tx)
  const latestNumber = latest?.number ?? null
  if (input.parentNumber !== latestNumber && (input.onTopOf ?? null) !== latestNumber) {
    if (latest) return { value: { outcome: 'conflict', theirs: chainSummaryOf(latest) }, trail: null }
    throw new AppError('not-valid', 'This chain has no version yet, so that nothing can be based on one.', {
      field: 'parentNumber',
    })
  }

  const spec = await checkedLinks(tx, access, chain.teamId, input.spec)
  const number = (latestNumber ?? 0) + 1
  const kept = { ...computed, numbers: withNamesOf(computed.numbers, spec) }
  const checksum = chainChecksum({ spec, ...kept })
  await insertChainVersion(tx, access, {
    chainId: chain.id,
    number,
    parentNumber: latestNumber,
    note: input.note,
    spec,
    ...kept,
    checksum,
    engineVersion: ENGINE_VERSION,
    links: linksOf(spec).map(({ stageId, link }) => ({
      stageId,
      designId: link.designId,
      designVersion: link.version,
    })),
  })
  await rebaseChainDraft(tx, access, chain.id, spec, number)
  const saved = await findChainVersion(access, chain.id, number, tx)
  if (!saved) throw new Error('A version that was just saved can’t be found.')
  return {
    value: { outcome: 'saved', version: chainSummaryOf(saved) },
    trail: { team: chain.teamId, object: `chain:${chain.id}`, details: { number, checksum } },
  }
}
