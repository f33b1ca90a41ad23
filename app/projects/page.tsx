import type { Metadata } from 'next'
import Link from 'next/link'
import { signOut } from '@/app/(account)/actions'
import { duplicateChain } from '@/app/chains/actions'
import { ChainList } from '@/components/projects/chain-list'
import { DesignList } from '@/components/projects/design-list'
import { SignedInPage } from '@/components/projects/signed-in-page'
import { buttonClass } from '@/components/ui/button'
import { listTeams } from '@/db/queries/teams'
import { accessFor, requireSession } from '@/lib/auth/viewer'
import { projectSheets } from '@/lib/designs/project-sheets'
import { mayDo } from '@/lib/permissions'
import { duplicateDesign } from './actions'

export const metadata: Metadata = { title: 'Projects' }

export default async function ProjectsPage() {
  const session = await requireSession('/projects')
  const access = accessFor(session, 'project.read')
  const [teams, projects] = await Promise.all([listTeams(access), projectSheets(access)])
  const mayCreate = teams.some(({ role }) => mayDo(role, 'project.create'))
  return (
    <SignedInPage crumbs={[{ label: 'Projects' }]} label={session.account.label} signOut={signOut}>
      <div className="flex flex-wrap items-baseline justify-between gap-3">
        <h1 className="text-[26px]">Projects</h1>
        {mayCreate && projects.length > 0 ? (
          <Link href="/projects/new" className={buttonClass('primary')}>
            New project
          </Link>
        ) : null}
      </div>
      {projects.length === 0 ? (
        <Empty mayCreate={mayCreate} />
      ) : (
        projects.map((project) => (
          <section key={project.id} aria-labelledby={`project-${project.id}`} className="mt-10">
            <div className="flex flex-wrap items-baseline justify-between gap-x-4 gap-y-1 pb-2">
              <h2 id={`project-${project.id}`} className="text-[19px]">
                <Link
                  href={`/projects/${project.id}`}
                  className="inline-block py-0.5 underline-offset-4 hover:underline"
                >
                  {project.name}
                </Link>
              </h2>
              <span className="numeric text-[13px] text-pencil">{project.code}</span>
            </div>
            {project.designs.length > 0 ? (
              <DesignList designs={project.designs} duplicateDesign={project.mayCreate ? duplicateDesign : null} />
            ) : (
              <p className="border-t border-graph-strong py-3 text-[14px] text-pencil">
                No design yet.{' '}
                {project.mayCreate ? (
                  <Link
                    href={`/projects/${project.id}`}
                    className="inline-block py-1 text-spruce underline underline-offset-2"
                  >
                    Create the first one
                  </Link>
                ) : null}
              </p>
            )}
            {project.chains.length > 0 ? (
              <>
                <h3 className="mt-5 pb-1 text-[15px]">Measurement chains</h3>
                <ChainList chains={project.chains} duplicateChain={project.mayCreate ? duplicateChain : null} />
              </>
            ) : null}
          </section>
        ))
      )}
    </SignedInPage>
  )
}

function Empty({ mayCreate }: { mayCreate: boolean }) {
  return (
    <div className="mt-8 flex max-w-[60ch] flex-col items-start gap-4 border-t border-graph-strong pt-6">
      <p>
        A project is a measurement job or a product line; its designs are the filters in it.{' '}
        {mayCreate ? 'Start with the first one.' : 'Your team has none yet.'}
      </p>
      {mayCreate ? (
        <Link href="/projects/new" className={buttonClass('primary')}>
          Create a project
        </Link>
      ) : null}
      <p className="text-[14px] text-pencil">
        To see a desk in use, sign in with one of the demo accounts that the start command printed.
      </p>
    </div>
  )
}
