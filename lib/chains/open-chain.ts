import 'server-only'
import type { Access } from '@/db/queries/access'
import { findChainDraft } from '@/db/queries/chain-drafts'
import { listChainVersions } from '@/db/queries/chain-versions'
import type { ChainRow } from '@/db/queries/chains'
import type { ValidSession } from '@/lib/auth/sessions'
import { accessFor } from '@/lib/auth/viewer'
import { mayDo } from '@/lib/permissions'
import { linkableDesigns } from './linkable'
import type { ChainPageProps, ChainRecord } from './types'

/** What a page is given of a chain; the rest of the row stays here. */
export function chainRecord({ id, drawingNumber, title, projectId, projectName }: ChainRow): ChainRecord {
  return { id, drawingNumber, title, projectId, projectName }
}

/** All that the chain's page opens with. */
export async function openChain(
  session: ValidSession,
  access: Access,
  chain: ChainRow,
): Promise<Omit<ChainPageProps, 'actions'>> {
  const [versions, draft, linkable] = await Promise.all([
    listChainVersions(access, chain.id),
    findChainDraft(accessFor(session, 'chain-draft.save'), chain.id),
    linkableDesigns(access, chain.projectId),
  ])
  const { id, label } = session.account
  return {
    chain: chainRecord(chain),
    viewer: { accountId: id, label, role: chain.role, mayEdit: mayDo(chain.role, 'chain-version.save') },
    versions,
    draft,
    startingSpec: chain.startingSpec,
    linkable,
  }
}
