import type { Metadata } from 'next'
import Link from 'next/link'
import { notFound } from 'next/navigation'
import { Header } from '@/components/frame/header'
import { CompareView } from '@/components/studio/compare/compare-view'
import { chosenSides } from '@/components/studio/compare/sides'
import { buttonClass } from '@/components/ui/button'
import { findDesign } from '@/db/queries/designs'
import { findDraft } from '@/db/queries/drafts'
import { listVersions } from '@/db/queries/versions'
import { requireFound } from '@/lib/auth/page-access'
import { designRecord } from '@/lib/designs/open-design'
import { designParamsSchema } from '@/lib/designs/schemas'

export const metadata: Metadata = { title: 'Compare' }

interface PageProps {
  readonly params: Promise<unknown>
  readonly searchParams: Promise<Readonly<Record<string, string | readonly string[] | undefined>>>
}

/** `?sides=3,2,draft,candidate-1`: up to four, the first of them the base. Links of old, `?a=3&b=draft`, name two. */
export default async function ComparePage({ params, searchParams }: PageProps) {
  const parsed = designParamsSchema.safeParse(await params)
  if (!parsed.success) notFound()
  const { designId } = parsed.data
  const { access, found } = await requireFound('design.read', `/designs/${designId}/compare`, (may) =>
    findDesign(may, designId),
  )
  const design = designRecord(found)
  const [versions, draft] = await Promise.all([listVersions(access, designId), findDraft(access, designId)])
  const draftSpec = draft?.spec ?? (versions.length === 0 ? found.startingSpec : null)
  const chosen = chosenSides(
    await searchParams,
    versions.map(({ number }) => number),
    draftSpec !== null,
  )
  return (
    <>
      <Header
        crumbs={[
          { label: design.projectName, href: `/projects/${design.projectId}` },
          { label: design.title, href: `/designs/${design.id}` },
          { label: 'Compare' },
        ]}
      >
        <Link className={buttonClass()} href={`/designs/${design.id}`}>
          Open in studio
        </Link>
      </Header>
      <CompareView design={design} versions={versions} draft={draftSpec} {...chosen} />
    </>
  )
}
