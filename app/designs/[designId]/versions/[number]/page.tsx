import type { Metadata } from 'next'
import Link from 'next/link'
import { notFound } from 'next/navigation'
import { Header } from '@/components/frame/header'
import { VersionSheet } from '@/components/handover/version-sheet'
import { buttonClass } from '@/components/ui/button'
import { listChainsUsing } from '@/db/queries/chain-versions'
import { findDesign } from '@/db/queries/designs'
import { findVersion, listVersions } from '@/db/queries/versions'
import { requireFound } from '@/lib/auth/page-access'
import { designRecord } from '@/lib/designs/open-design'
import { versionParamsSchema } from '@/lib/exports/params'
import { mayDo } from '@/lib/permissions'

export const metadata: Metadata = { title: 'Version' }

/** One version as it was saved: its statement, its kept coefficients, and the files that may be made of them. */
export default async function VersionPage({ params }: { params: Promise<unknown> }) {
  const parsed = versionParamsSchema.safeParse(await params)
  if (!parsed.success) notFound()
  const { designId, number } = parsed.data
  const { access, found } = await requireFound(
    'design.read',
    `/designs/${designId}/versions/${number}`,
    async (may) => {
      const design = await findDesign(may, designId)
      const version = await findVersion(may, designId, number)
      return design && version ? { design, version } : null
    },
  )
  const design = designRecord(found.design)
  const { coefficients, ...version } = found.version
  const numbers = (await listVersions(access, designId)).map((one) => one.number)
  const uses = (await listChainsUsing(access, designId)).filter((use) => use.designVersion === version.number)
  return (
    <>
      <Header
        crumbs={[
          { label: design.projectName, href: `/projects/${design.projectId}` },
          { label: design.title, href: `/designs/${design.id}` },
          { label: `Version ${version.number}` },
        ]}
      >
        {version.parentNumber === null ? null : (
          <Link
            className={buttonClass()}
            href={`/designs/${design.id}/compare?a=${version.parentNumber}&b=${version.number}`}
          >
            Compare with version {version.parentNumber}
          </Link>
        )}
        <Link className={buttonClass('primary')} href={`/designs/${design.id}`}>
          Open in studio
        </Link>
      </Header>
      <VersionSheet
        design={design}
        version={version}
        kept={coefficients}
        numbers={numbers}
        uses={uses}
        mayExport={mayDo(found.design.role, 'version.export')}
      />
    </>
  )
}
