import { insertAccount } from '@/db/queries/accounts'
import type { Access } from '@/db/queries/access'
import { insertChain } from '@/db/queries/chains'
import { insertDesign } from '@/db/queries/designs'
import { insertProject } from '@/db/queries/projects'
import { insertMember, insertTeam } from '@/db/queries/teams'
import { inTransaction } from '@/db/queries/transaction'
import { createSession } from '@/lib/auth/sessions'
import { startingChain } from '@/lib/chains/stage-starts'
import { defaultSpec } from '@/lib/designs/edits'
import type { Role } from '@/lib/designs/types'
import { allRoles } from '@/lib/permissions'
import type { DesignSpec } from '@/dsp'

let count = 0

/** An account that can't sign in (its hash is none), with a session. */
export async function makeAccount(label = 'someone'): Promise<{ id: string; email: string; token: string }> {
  const email = `person-${process.pid}-${++count}@test.example`
  const account = await inTransaction((tx) => insertAccount(tx, { email, label, passwordHash: 'none' }))
  if (!account) throw new Error('taken')
  const { token } = await createSession(account.id, 'test browser')
  return { id: account.id, email, token }
}

export interface Member {
  readonly id: string
  readonly email: string
  readonly token: string
}

export interface TestTeam {
  readonly id: string
  readonly members: Record<Role, Member>
  readonly projectId: string
  readonly designId: string
  readonly chainId: string
  access(role: Role, roles?: readonly Role[]): Access
}

/** A team with one member in each role, a project, and a design and a chain without versions. */
export async function makeTeam(spec: DesignSpec = defaultSpec): Promise<TestTeam> {
  const people = await Promise.all(allRoles.map(async (role) => [role, await makeAccount(role)] as const))
  const members = Object.fromEntries(people) as Record<Role, Member>
  return inTransaction(async (tx) => {
    const id = await insertTeam(tx, 'A team', members.owner.id)
    for (const [role, member] of people) if (role !== 'owner') await insertMember(tx, id, member.id, role)
    const access = (role: Role, roles: readonly Role[] = allRoles): Access => ({ accountId: members[role].id, roles })
    const project = await insertProject(tx, access('owner'), { teamId: id, code: 'TST', name: 'A project' })
    if (project === null || project === 'taken') throw new Error('no project')
    const design = await insertDesign(tx, access('owner'), { projectId: project.id, title: 'A design', spec })
    if (!design) throw new Error('no design')
    const chain = await insertChain(tx, access('owner'), {
      projectId: project.id,
      title: 'A chain',
      spec: startingChain,
    })
    if (!chain) throw new Error('no chain')
    return { id, members, projectId: project.id, designId: design.id, chainId: chain.id, access }
  })
}
