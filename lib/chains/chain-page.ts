import 'server-only'
import { notFound } from 'next/navigation'
import { findChain } from '@/db/queries/chains'
import { findChainVersion } from '@/db/queries/chain-versions'
import { requireFound } from '@/lib/auth/page-access'
import { chainParamsSchema, chainVersionParamsSchema } from './schemas'

/** What every page of one chain starts with. An id that can't be one is the id of nothing. */
export async function requireChain(params: Promise<unknown>, pathOf: (chainId: string) => string) {
  const parsed = chainParamsSchema.safeParse(await params)
  if (!parsed.success) notFound()
  const { chainId } = parsed.data
  return requireFound('chain.read', pathOf(chainId), (access) => findChain(access, chainId))
}

/** The same for one version of it. */
export async function requireChainVersion(params: Promise<unknown>) {
  const parsed = chainVersionParamsSchema.safeParse(await params)
  if (!parsed.success) notFound()
  const { chainId, number } = parsed.data
  return requireFound('chain.read', `/chains/${chainId}/versions/${number}`, async (access) => {
    const chain = await findChain(access, chainId)
    const version = await findChainVersion(access, chainId, number)
    return chain && version ? { chain, version } : null
  })
}
