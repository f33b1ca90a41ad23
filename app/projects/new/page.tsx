import type { Metadata } from 'next'
import { signOut } from '@/app/(account)/actions'
import { NewProjectForm } from '@/components/projects/new-project-form'
import { SignedInPage } from '@/components/projects/signed-in-page'
import { Notice } from '@/components/ui/notice'
import { listTeams } from '@/db/queries/teams'
import { accessFor, requireSession } from '@/lib/auth/viewer'
import { createProject } from '../actions'

export const metadata: Metadata = { title: 'New project' }

export default async function NewProjectPage() {
  const session = await requireSession('/projects/new')
  const teams = await listTeams(accessFor(session, 'project.create'))
  return (
    <SignedInPage
      crumbs={[{ label: 'Projects', href: '/projects' }, { label: 'New project' }]}
      label={session.account.label}
      signOut={signOut}
    >
      <h1 className="mb-6 text-[26px]">New project</h1>
      {teams.length > 0 ? (
        <NewProjectForm teams={teams.map(({ id, name }) => ({ id, name }))} createProject={createProject} />
      ) : (
        <Notice kind="note">
          Projects are created by owners and designers; your role in your team is another one.
        </Notice>
      )}
    </SignedInPage>
  )
}
