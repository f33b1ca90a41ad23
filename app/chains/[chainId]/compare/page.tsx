import type { Metadata } from 'next'
import Link from 'next/link'
import { ChainCompare } from '@/components/chain-versions/chain-compare'
import { chosenVersions } from '@/components/chain-versions/chosen-versions'
import { Header } from '@/components/frame/header'
import { buttonClass } from '@/components/ui/button'
import { listChainVersions } from '@/db/queries/chain-versions'
import { requireChain } from '@/lib/chains/chain-page'
import { knownResults } from '@/lib/chains/known-results'
import { chainRecord } from '@/lib/chains/open-chain'

export const metadata: Metadata = { title: 'Compare' }

interface PageProps {
  readonly params: Promise<unknown>
  readonly searchParams: Promise<Readonly<Record<string, string | readonly string[] | undefined>>>
}

/** `?left=2&right=3`: two versions side by side; unasked, the newest and the one that it came from. */
export default async function ChainComparePage({ params, searchParams }: PageProps) {
  const { access, found } = await requireChain(params, (id) => `/chains/${id}/compare`)
  const chain = chainRecord(found)
  const versions = await listChainVersions(access, chain.id)
  const chosen = chosenVersions(await searchParams, versions)
  const results = chosen ? await Promise.all([chosen.left, chosen.right].map(knownResults)) : []
  return (
    <>
      <Header
        crumbs={[
          { label: chain.projectName, href: `/projects/${chain.projectId}` },
          { label: chain.title, href: `/chains/${chain.id}` },
          { label: 'Compare' },
        ]}
      >
        <Link className={buttonClass()} href={`/chains/${chain.id}`}>
          Open chain
        </Link>
      </Header>
      <ChainCompare numbers={versions.map(({ number }) => number)} chosen={chosen} results={results} />
    </>
  )
}
