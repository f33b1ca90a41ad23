import type { Metadata } from 'next'
import { notFound } from 'next/navigation'
import { z } from 'zod'
import { signOut } from '@/app/(account)/actions'
import { createChain, duplicateChain } from '@/app/chains/actions'
import { ChainList } from '@/components/projects/chain-list'
import { DesignList } from '@/components/projects/design-list'
import { NewChainForm } from '@/components/projects/new-chain-form'
import { NewDesignForm } from '@/components/projects/new-design-form'
import { SignedInPage } from '@/components/projects/signed-in-page'
import { requireFound } from '@/lib/auth/page-access'
import { projectSheets } from '@/lib/designs/project-sheets'
import { createDesign, duplicateDesign } from '../actions'

export const metadata: Metadata = { title: 'Project' }

const paramsSchema = z.object({ projectId: z.uuid() })

export default async function ProjectPage({ params }: { params: Promise<unknown> }) {
  const parsed = paramsSchema.safeParse(await params)
  if (!parsed.success) notFound()
  const { projectId } = parsed.data
  const { session, found: project } = await requireFound('project.read', `/projects/${projectId}`, async (access) => {
    const sheets = await projectSheets(access)
    return sheets.find(({ id }) => id === projectId) ?? null
  })
  return (
    <SignedInPage
      crumbs={[{ label: 'Projects', href: '/projects' }, { label: project.name }]}
      label={session.account.label}
      signOut={signOut}
    >
      <div className="flex flex-wrap items-baseline justify-between gap-x-4 gap-y-1 pb-4">
        <h1 className="text-[26px]">{project.name}</h1>
        <span className="numeric text-pencil">{project.code}</span>
      </div>
      {project.designs.length > 0 ? (
        <DesignList designs={project.designs} duplicateDesign={project.mayCreate ? duplicateDesign : null} />
      ) : (
        <p className="border-t border-graph-strong pt-4">
          {project.mayCreate
            ? 'No design yet. Give the first one a title; the studio opens with a low-pass that you change word by word.'
            : 'No design yet.'}
        </p>
      )}
      {project.mayCreate ? (
        <section aria-label="New design" className="mt-8 max-w-2xl">
          <NewDesignForm projectId={project.id} createDesign={createDesign} />
        </section>
      ) : null}
      <section aria-labelledby="chains-heading" className="mt-12">
        <h2 id="chains-heading" className="pb-3 text-[19px]">
          Measurement chains
        </h2>
        {project.chains.length > 0 ? (
          <ChainList chains={project.chains} duplicateChain={project.mayCreate ? duplicateChain : null} />
        ) : (
          <p className="border-t border-graph-strong pt-4">
            {project.mayCreate
              ? 'No chain yet. A chain goes from the sensor to the stored sample, and says whether the samples can be trusted.'
              : 'No chain yet.'}
          </p>
        )}
        {project.mayCreate ? (
          <div className="mt-8 max-w-3xl">
            <NewChainForm projectId={project.id} createChain={createChain} />
          </div>
        ) : null}
      </section>
    </SignedInPage>
  )
}
