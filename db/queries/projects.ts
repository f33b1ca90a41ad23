import 'server-only'
import { and, asc, desc, eq, inArray, sql } from 'drizzle-orm'
import { designSpecSchema, type DesignSpec } from '@/dsp'
import type { Role } from '@/lib/designs/types'
import { database, type Executor, type Transaction } from '../client'
import { accounts, designs, memberships, projects, versions } from '../schema'
import { admits, admittingTeams, type Access } from './access'

export interface ProjectRow {
  readonly id: string
  readonly teamId: string
  readonly code: string
  readonly name: string
  /** The viewer's own, in the project's team. */
  readonly role: Role
}

export interface DesignListRow {
  readonly id: string
  readonly projectId: string
  readonly drawingNumber: string
  readonly title: string
  /** Of the latest version, or what the design was opened with. */
  readonly spec: DesignSpec
  readonly latest: { readonly number: number; readonly savedAt: string; readonly savedBy: string } | null
}

const projectColumns = {
  id: projects.id,
  teamId: projects.teamId,
  code: projects.code,
  name: projects.name,
  role: memberships.role,
}

export async function listProjects(access: Access, on: Executor = database()): Promise<readonly ProjectRow[]> {
  return on
    .select(projectColumns)
    .from(projects)
    .innerJoin(memberships, and(eq(memberships.teamId, projects.teamId), admits(access)))
    .orderBy(asc(projects.createdAt), asc(projects.code))
}

export async function findProject(
  access: Access,
  projectId: string,
  on: Executor = database(),
): Promise<ProjectRow | null> {
  const [row] = await on
    .select(projectColumns)
    .from(projects)
    .innerJoin(memberships, and(eq(memberships.teamId, projects.teamId), admits(access)))
    .where(eq(projects.id, projectId))
  return row ?? null
}

/** All designs of the viewer's projects, each with its latest version. */
export async function listDesigns(access: Access, on: Executor = database()): Promise<readonly DesignListRow[]> {
  const latest = on
    .selectDistinctOn([versions.designId], {
      designId: versions.designId,
      number: versions.number,
      spec: versions.spec,
      savedAt: versions.savedAt,
      savedBy: versions.savedBy,
    })
    .from(versions)
    .orderBy(versions.designId, desc(versions.number))
    .as('latest')
  const rows = await on
    .select({
      id: designs.id,
      projectId: designs.projectId,
      drawingNumber: designs.drawingNumber,
      title: designs.title,
      startingSpec: designs.startingSpec,
      spec: latest.spec,
      number: latest.number,
      savedAt: latest.savedAt,
      savedBy: accounts.label,
    })
    .from(designs)
    .innerJoin(projects, eq(projects.id, designs.projectId))
    .innerJoin(memberships, and(eq(memberships.teamId, projects.teamId), admits(access)))
    .leftJoin(latest, eq(latest.designId, designs.id))
    .leftJoin(accounts, eq(accounts.id, latest.savedBy))
    .orderBy(asc(designs.serial))
  return rows.map(({ startingSpec, spec, number, savedAt, savedBy, ...design }) => ({
    ...design,
    spec: designSpecSchema.parse(spec ?? startingSpec),
    latest: number && savedAt && savedBy ? { number, savedAt: savedAt.toISOString(), savedBy } : null,
  }))
}

export interface NewProject {
  readonly teamId: string
  readonly code: string
  readonly name: string
}

/** Null when the viewer may not, `'taken'` when the team has a project of that code. */
export async function insertProject(
  tx: Transaction,
  access: Access,
  { teamId, code, name }: NewProject,
): Promise<{ readonly id: string } | 'taken' | null> {
  const [member] = await tx
    .select({ teamId: memberships.teamId })
    .from(memberships)
    .where(and(eq(memberships.teamId, teamId), admits(access)))
  if (!member) return null
  const [row] = await tx
    .insert(projects)
    .values({ teamId, code, name, createdBy: access.accountId })
    .onConflictDoNothing()
    .returning({ id: projects.id })
  return row ?? 'taken'
}

/** Takes the project's next serial, under its row's lock until the transaction ends. Null when the viewer may not. */
export async function takeSerial(
  tx: Transaction,
  access: Access,
  projectId: string,
): Promise<{ readonly code: string; readonly serial: number } | null> {
  const [row] = await tx
    .update(projects)
    .set({ lastSerial: sql`${projects.lastSerial} + 1` })
    .where(and(eq(projects.id, projectId), inArray(projects.teamId, admittingTeams(access, tx))))
    .returning({ code: projects.code, serial: projects.lastSerial })
  return row ?? null
}
