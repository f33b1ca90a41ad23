import { and, eq, inArray, type SQL } from 'drizzle-orm'
import type { Role } from '@/lib/designs/types'
import type { Executor } from '../client'
import { chains, designs, memberships, projects } from '../schema'

/**
 * Who asks, and in which roles the asked-for action is permitted. Every query on a team's data takes one and joins it, so that rows of
 * other teams are as absent as rows that never were. The role is read with the row: a changed role counts from the next query on.
 */
export interface Access {
  readonly accountId: string
  readonly roles: readonly Role[]
}

/** The condition of a join with memberships. */
export function admits(access: Access): SQL | undefined {
  return and(eq(memberships.accountId, access.accountId), inArray(memberships.role, [...access.roles]))
}

/** Ids of the teams that admit the viewer, as a subquery. */
export const admittingTeams = (access: Access, on: Executor) =>
  on.select({ id: memberships.teamId }).from(memberships).where(admits(access))

/** Ids of the projects, of the designs and of the chains of those teams. */
export const reachableProjects = (access: Access, on: Executor) =>
  on
    .select({ id: projects.id })
    .from(projects)
    .where(inArray(projects.teamId, admittingTeams(access, on)))

export const reachableDesigns = (access: Access, on: Executor) =>
  on
    .select({ id: designs.id })
    .from(designs)
    .where(inArray(designs.projectId, reachableProjects(access, on)))

export const reachableChains = (access: Access, on: Executor) =>
  on
    .select({ id: chains.id })
    .from(chains)
    .where(inArray(chains.projectId, reachableProjects(access, on)))
