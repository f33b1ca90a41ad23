import 'server-only'
import { and, asc, desc, eq, inArray } from 'drizzle-orm'
import { chainSpecSchema, designSpecSchema, type ChainSpec, type DesignSpec } from '@/dsp'
import type { ChainFigures, ChainRecord } from '@/lib/chains/types'
import type { Role } from '@/lib/designs/types'
import { database, type Executor, type Transaction } from '../client'
import { accounts, chains, chainVersions, designs, memberships, projects, versions } from '../schema'
import { admits, reachableDesigns, reachableProjects, type Access } from './access'
import { takeSerial } from './projects'

export interface ChainRow extends ChainRecord {
  readonly teamId: string
  readonly startingSpec: ChainSpec
  /** The viewer's own, in the chain's team. */
  readonly role: Role
}

const chainColumns = {
  id: chains.id,
  drawingNumber: chains.drawingNumber,
  title: chains.title,
  projectId: chains.projectId,
  projectName: projects.name,
  teamId: projects.teamId,
  startingSpec: chains.startingSpec,
  role: memberships.role,
}

export async function findChain(access: Access, chainId: string, on: Executor = database()): Promise<ChainRow | null> {
  const [row] = await on
    .select(chainColumns)
    .from(chains)
    .innerJoin(projects, eq(projects.id, chains.projectId))
    .innerJoin(memberships, and(eq(memberships.teamId, projects.teamId), admits(access)))
    .where(eq(chains.id, chainId))
  return row ? { ...row, startingSpec: chainSpecSchema.parse(row.startingSpec) } : null
}

/** As findChain, and nobody else can lock this chain until the transaction ends: version numbers are given under this lock. */
export async function lockChain(tx: Transaction, access: Access, chainId: string): Promise<ChainRow | null> {
  await tx.select({ id: chains.id }).from(chains).where(eq(chains.id, chainId)).for('update')
  return findChain(access, chainId, tx)
}

export interface NewChain {
  readonly projectId: string
  readonly title: string
  readonly spec: ChainSpec
}

/** Gives the next drawing number of the project, such as HMF-CH-013. Null when the viewer may not. */
export async function insertChain(
  tx: Transaction,
  access: Access,
  { projectId, title, spec }: NewChain,
): Promise<{ readonly id: string; readonly drawingNumber: string } | null> {
  const next = await takeSerial(tx, access, projectId)
  if (!next) return null
  const { code, serial } = next
  const drawingNumber = `${code}-CH-${String(serial).padStart(3, '0')}`
  const [row] = await tx
    .insert(chains)
    .values({ projectId, serial, drawingNumber, title, startingSpec: spec, createdBy: access.accountId })
    .returning({ id: chains.id, drawingNumber: chains.drawingNumber })
  return row ?? null
}

/** False when the viewer may not. */
export async function retitleChain(tx: Transaction, access: Access, chainId: string, title: string): Promise<boolean> {
  const rows = await tx
    .update(chains)
    .set({ title })
    .where(and(eq(chains.id, chainId), inArray(chains.projectId, reachableProjects(access, tx))))
    .returning({ id: chains.id })
  return rows.length === 1
}

export interface ChainListRow {
  readonly id: string
  readonly projectId: string
  readonly drawingNumber: string
  readonly title: string
  /** Of the latest version, or what the chain was opened with. */
  readonly spec: ChainSpec
  readonly latest: {
    readonly number: number
    readonly savedAt: string
    readonly savedBy: string
    readonly figures: ChainFigures
  } | null
}

/** All chains of the viewer's projects, each with its latest version. */
export async function listChains(access: Access, on: Executor = database()): Promise<readonly ChainListRow[]> {
  const latest = on
    .selectDistinctOn([chainVersions.chainId], {
      chainId: chainVersions.chainId,
      number: chainVersions.number,
      spec: chainVersions.spec,
      figures: chainVersions.figures,
      savedAt: chainVersions.savedAt,
      savedBy: chainVersions.savedBy,
    })
    .from(chainVersions)
    .orderBy(chainVersions.chainId, desc(chainVersions.number))
    .as('latest')
  const rows = await on
    .select({
      id: chains.id,
      projectId: chains.projectId,
      drawingNumber: chains.drawingNumber,
      title: chains.title,
      startingSpec: chains.startingSpec,
      spec: latest.spec,
      figures: latest.figures,
      number: latest.number,
      savedAt: latest.savedAt,
      savedBy: accounts.label,
    })
    .from(chains)
    .innerJoin(projects, eq(projects.id, chains.projectId))
    .innerJoin(memberships, and(eq(memberships.teamId, projects.teamId), admits(access)))
    .leftJoin(latest, eq(latest.chainId, chains.id))
    .leftJoin(accounts, eq(accounts.id, latest.savedBy))
    .orderBy(asc(chains.serial), asc(chains.drawingNumber))
  return rows.map(({ startingSpec, spec, figures, number, savedAt, savedBy, ...chain }) => ({
    ...chain,
    spec: chainSpecSchema.parse(spec ?? startingSpec),
    latest:
      number && savedAt && savedBy && figures ? { number, savedAt: savedAt.toISOString(), savedBy, figures } : null,
  }))
}

export interface DesignVersionRow {
  readonly designId: string
  readonly number: number
  readonly drawingNumber: string
  readonly title: string
  readonly projectId: string
  readonly teamId: string
  readonly spec: DesignSpec
}

const designVersionColumns = {
  designId: versions.designId,
  number: versions.number,
  drawingNumber: designs.drawingNumber,
  title: designs.title,
  projectId: designs.projectId,
  teamId: projects.teamId,
  spec: versions.spec,
}

/** The newest version of each design of a project, by drawing number: what a stage can be tied to. */
export async function listNewestDesignVersions(
  access: Access,
  projectId: string,
  on: Executor = database(),
): Promise<readonly DesignVersionRow[]> {
  const rows = await on
    .selectDistinctOn([designs.serial], designVersionColumns)
    .from(versions)
    .innerJoin(designs, eq(designs.id, versions.designId))
    .innerJoin(projects, eq(projects.id, designs.projectId))
    .where(and(eq(designs.projectId, projectId), inArray(designs.id, reachableDesigns(access, on))))
    .orderBy(asc(designs.serial), desc(versions.number))
  return rows.map((row) => ({ ...row, spec: designSpecSchema.parse(row.spec) }))
}

/** All versions of these designs as far as the viewer reaches them, newest first. */
export async function listDesignVersions(
  access: Access,
  designIds: readonly string[],
  on: Executor = database(),
): Promise<readonly DesignVersionRow[]> {
  if (designIds.length === 0) return []
  const rows = await on
    .select(designVersionColumns)
    .from(versions)
    .innerJoin(designs, eq(designs.id, versions.designId))
    .innerJoin(projects, eq(projects.id, designs.projectId))
    .where(and(inArray(designs.id, [...designIds]), inArray(designs.id, reachableDesigns(access, on))))
    .orderBy(asc(designs.serial), desc(versions.number))
  return rows.map((row) => ({ ...row, spec: designSpecSchema.parse(row.spec) }))
}
