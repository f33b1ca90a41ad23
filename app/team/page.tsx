import type { Metadata } from 'next'
import { signOut } from '@/app/(account)/actions'
import { SignedInPage } from '@/components/projects/signed-in-page'
import { listMembers, listTeams } from '@/db/queries/teams'
import { accessFor, requireSession } from '@/lib/auth/viewer'
import type { Role } from '@/lib/designs/types'

export const metadata: Metadata = { title: 'Team' }

const duties: Record<Role, string> = {
  owner: 'everything, and who is in the team',
  designer: 'creates and edits designs, saves versions',
  reviewer: 'reads designs, takes coefficients out',
  integrator: 'reads designs, takes coefficients out',
  observer: 'reads designs',
}

export default async function TeamPage() {
  const session = await requireSession('/team')
  const access = accessFor(session, 'team.read')
  const teams = await listTeams(access)
  const members = await Promise.all(teams.map(async (team) => ({ team, people: await listMembers(access, team.id) })))
  return (
    <SignedInPage
      crumbs={[{ label: 'Projects', href: '/projects' }, { label: 'Team' }]}
      label={session.account.label}
      signOut={signOut}
    >
      <h1 className="text-[26px]">Team</h1>
      {members.map(({ team, people }) => (
        <section key={team.id} aria-labelledby={`team-${team.id}`} className="mt-8">
          <h2 id={`team-${team.id}`} className="pb-2 text-[19px]">
            {team.name}
          </h2>
          <div className="overflow-x-auto">
            <table className="w-full border-t border-graph-strong text-left text-[14px]">
              <thead>
                <tr className="border-b border-graph text-[13px] text-pencil">
                  <th scope="col" className="py-2 pr-4 font-medium">
                    Member
                  </th>
                  <th scope="col" className="py-2 pr-4 font-medium">
                    Role
                  </th>
                  <th scope="col" className="py-2 font-medium">
                    May
                  </th>
                </tr>
              </thead>
              <tbody>
                {people.map((member) => (
                  <tr key={member.accountId} className="border-b border-graph align-baseline">
                    <td className="py-2 pr-4">
                      {member.label}
                      {member.accountId === session.account.id ? <span className="text-pencil"> (you)</span> : null}
                    </td>
                    <td className="py-2 pr-4">{member.role}</td>
                    <td className="py-2 text-pencil">{duties[member.role]}</td>
                  </tr>
                ))}
              </tbody>
            </table>
          </div>
        </section>
      ))}
    </SignedInPage>
  )
}
