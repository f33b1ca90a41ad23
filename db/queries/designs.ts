import 'server-only'
import { responseOf, type ResponseName } from '@/lib/designs/outline'
import { and, eq, inArray } from 'drizzle-orm'
import { designSpecSchema, type DesignSpec } from '@/dsp'
import type { DesignRecord, Role } from '@/lib/designs/types'
import { database, type Executor, type Transaction } from '../client'
import { designs, memberships, projects } from '../schema'
import { admits, reachableProjects, type Access } from './access'
import { takeSerial } from './projects'

export interface DesignRow extends DesignRecord {
  readonly teamId: string
  readonly startingSpec: DesignSpec
  /** The viewer's own, in the design's team. */
  readonly role: Role
}

const designColumns = {
  id: designs.id,
  drawingNumber: designs.drawingNumber,
  title: designs.title,
  projectId: designs.projectId,
  projectName: projects.name,
  teamId: projects.teamId,
  startingSpec: designs.startingSpec,
  role: memberships.role,
}

export async function findDesign(
  access: Access,
  designId: string,
  on: Executor = database(),
): Promise<DesignRow | null> {
  const [row] = await on
    .select(designColumns)
    .from(designs)
    .innerJoin(projects, eq(projects.id, designs.projectId))
    .innerJoin(memberships, and(eq(memberships.teamId, projects.teamId), admits(access)))
    .where(eq(designs.id, designId))
  return row ? { ...row, startingSpec: designSpecSchema.parse(row.startingSpec) } : null
}

/** As findDesign, and nobody else can lock this design until the transaction ends: version numbers are given under this lock. */
export async function lockDesign(tx: Transaction, access: Access, designId: string): Promise<DesignRow | null> {
  await tx.select({ id: designs.id }).from(designs).where(eq(designs.id, designId)).for('update')
  return findDesign(access, designId, tx)
}

const responseLetters: Record<ResponseName, string> = {
  lowpass: 'LP',
  highpass: 'HP',
  bandpass: 'BP',
  bandstop: 'BS',
  multiband: 'MB',
  differentiator: 'DF',
  own: 'OR',
}

export interface NewDesign {
  readonly projectId: string
  readonly title: string
  readonly spec: DesignSpec
}

/** Gives the next drawing number of the project, such as HMF-LP-012. Null when the viewer may not. */
export async function insertDesign(
  tx: Transaction,
  access: Access,
  { projectId, title, spec }: NewDesign,
): Promise<{ readonly id: string; readonly drawingNumber: string } | null> {
  const next = await takeSerial(tx, access, projectId)
  if (!next) return null
  const { code, serial } = next
  const drawingNumber = `${code}-${responseLetters[responseOf(spec)]}-${String(serial).padStart(3, '0')}`
  const [row] = await tx
    .insert(designs)
    .values({ projectId, serial, drawingNumber, title, startingSpec: spec, createdBy: access.accountId })
    .returning({ id: designs.id, drawingNumber: designs.drawingNumber })
  return row ?? null
}

/** False when the viewer may not. */
export async function retitleDesign(
  tx: Transaction,
  access: Access,
  designId: string,
  title: string,
): Promise<boolean> {
  const rows = await tx
    .update(designs)
    .set({ title })
    .where(and(eq(designs.id, designId), inArray(designs.projectId, reachableProjects(access, tx))))
    .returning({ id: designs.id })
  return rows.length === 1
}
