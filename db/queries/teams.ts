import 'server-only'
import { and, asc, eq, sql } from 'drizzle-orm'
import type { Role } from '@/lib/designs/types'
import { database, type Executor, type Transaction } from '../client'
import { accounts, memberships, teams } from '../schema'
import { admits, type Access } from './access'

export interface TeamRow {
  readonly id: string
  readonly name: string
  /** The viewer's own. */
  readonly role: Role
}

export interface MemberRow {
  readonly accountId: string
  readonly label: string
  readonly role: Role
}

const teamColumns = { id: teams.id, name: teams.name, role: memberships.role }

export async function listTeams(access: Access, on: Executor = database()): Promise<readonly TeamRow[]> {
  return on
    .select(teamColumns)
    .from(teams)
    .innerJoin(memberships, and(eq(memberships.teamId, teams.id), admits(access)))
    .orderBy(asc(teams.createdAt), asc(teams.name))
}

export async function findTeam(access: Access, teamId: string, on: Executor = database()): Promise<TeamRow | null> {
  const [row] = await on
    .select(teamColumns)
    .from(teams)
    .innerJoin(memberships, and(eq(memberships.teamId, teams.id), admits(access)))
    .where(eq(teams.id, teamId))
  return row ?? null
}

/** Roles from most to least, then by label. Empty for a team that isn't the viewer's. */
export async function listMembers(
  access: Access,
  teamId: string,
  on: Executor = database(),
): Promise<readonly MemberRow[]> {
  if (!(await findTeam(access, teamId, on))) return []
  const rank = sql`array_position(array['owner','designer','reviewer','integrator','observer'], ${memberships.role})`
  return on
    .select({ accountId: accounts.id, label: accounts.label, role: memberships.role })
    .from(memberships)
    .innerJoin(accounts, eq(accounts.id, memberships.accountId))
    .where(eq(memberships.teamId, teamId))
    .orderBy(rank, asc(accounts.label))
}

/** A team and its first member, who owns it. */
export async function insertTeam(tx: Transaction, name: string, ownerId: string): Promise<string> {
  const [row] = await tx.insert(teams).values({ name }).returning({ id: teams.id })
  if (!row) throw new Error('The database gave no id for a new team.')
  await insertMember(tx, row.id, ownerId, 'owner')
  return row.id
}

export async function insertMember(tx: Transaction, teamId: string, accountId: string, role: Role): Promise<void> {
  await tx.insert(memberships).values({ teamId, accountId, role })
}
