import type { Metadata } from 'next'
import { ChainPage } from '@/components/chain/chain-page'
import { requireChain } from '@/lib/chains/chain-page'
import { openChain } from '@/lib/chains/open-chain'
import type { ChainActions } from '@/lib/chains/types'
import { renameChain, saveVersion } from '../actions'

export async function generateMetadata({ params }: { params: Promise<unknown> }): Promise<Metadata> {
  const { found } = await requireChain(params, (id) => `/chains/${id}`)
  return { title: found.title }
}

const actions: ChainActions = { saveVersion, renameChain }

export default async function ChainRoute({ params }: { params: Promise<unknown> }) {
  const { session, access, found } = await requireChain(params, (id) => `/chains/${id}`)
  return <ChainPage {...await openChain(session, access, found)} actions={actions} />
}
