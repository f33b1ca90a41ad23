import type { Metadata } from 'next'
import Link from 'next/link'
import { ChainVersionSheet } from '@/components/chain-versions/chain-version-sheet'
import { Header } from '@/components/frame/header'
import { buttonClass } from '@/components/ui/button'
import { listChainVersions } from '@/db/queries/chain-versions'
import { requireChainVersion } from '@/lib/chains/chain-page'
import { knownResults } from '@/lib/chains/known-results'
import { linksOf } from '@/lib/chains/links'
import { chainRecord } from '@/lib/chains/open-chain'
import { chainSummaryOf } from '@/lib/chains/save-chain-version'
import { lacksStages } from '@/lib/exports/chain-test-vector'
import { mayDo } from '@/lib/permissions'

export const metadata: Metadata = { title: 'Version' }

/** One version of a chain as it was saved: its figures, its sheet, the designs it is tied to, and the files that may be made of it. */
export default async function ChainVersionPage({ params }: { params: Promise<unknown> }) {
  const { access, found } = await requireChainVersion(params)
  const chain = chainRecord(found.chain)
  const version = chainSummaryOf(found.version)
  const numbers = (await listChainVersions(access, chain.id)).map((one) => one.number)
  return (
    <>
      <Header
        crumbs={[
          { label: chain.projectName, href: `/projects/${chain.projectId}` },
          { label: chain.title, href: `/chains/${chain.id}` },
          { label: `Version ${version.number}` },
        ]}
      >
        {version.parentNumber === null ? null : (
          <Link
            className={buttonClass()}
            href={`/chains/${chain.id}/compare?left=${version.parentNumber}&right=${version.number}`}
          >
            Compare with version {version.parentNumber}
          </Link>
        )}
        <Link className={buttonClass('primary')} href={`/chains/${chain.id}`}>
          Open chain
        </Link>
      </Header>
      <ChainVersionSheet
        chain={chain}
        version={version}
        results={await knownResults(version)}
        links={linksOf(version.spec)}
        numbers={numbers}
        lacksStages={lacksStages(found.version)}
        mayExport={mayDo(found.chain.role, 'chain-version.export')}
      />
    </>
  )
}
