import 'server-only'
import type { Access } from '@/db/queries/access'
import { listNewestDesignVersions } from '@/db/queries/chains'
import { isFirDesign, isOwnDesign, type DesignSpec } from '@/dsp'
import type { LinkableDesign } from './types'

/** Taps have no analog original, and a measured table has none that is known by its roots. */
const hasAnalog = (spec: DesignSpec): boolean =>
  !isFirDesign(spec) && !(isOwnDesign(spec) && spec.own.given === 'measured')

/** The designs of a project that a stage can be tied to, each with its newest version. */
export async function linkableDesigns(access: Access, projectId: string): Promise<readonly LinkableDesign[]> {
  const rows = await listNewestDesignVersions(access, projectId)
  return rows.map(({ designId, number, drawingNumber, title, spec }) => ({
    link: { designId, version: number, drawing: drawingNumber, title, spec },
    hasAnalog: hasAnalog(spec),
  }))
}
