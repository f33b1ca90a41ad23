import 'server-only'
import type { Access } from '@/db/queries/access'
import type { DesignRow } from '@/db/queries/designs'
import { findDraft } from '@/db/queries/drafts'
import { findVersion, listVersions } from '@/db/queries/versions'
import type { ValidSession } from '@/lib/auth/sessions'
import { accessFor } from '@/lib/auth/viewer'
import { mayDo } from '@/lib/permissions'
import { knownDifference } from './known-difference'
import type { DesignRecord, DraftRecord, StudioProps, Viewer } from './types'

/** What the studio is given of a design; the rest of the row stays here. */
export function designRecord({ id, drawingNumber, title, projectId, projectName }: DesignRow): DesignRecord {
  return { id, drawingNumber, title, projectId, projectName }
}

function viewerOf(session: ValidSession, design: DesignRow): Viewer {
  const { id, label } = session.account
  return { accountId: id, label, role: design.role, mayEdit: mayDo(design.role, 'version.save') }
}

/** The viewer's own draft; before the first version, everybody starts from what the design was opened with. */
async function openDraft(session: ValidSession, design: DesignRow, hasVersions: boolean): Promise<DraftRecord | null> {
  const own = await findDraft(accessFor(session, 'draft.save'), design.id)
  if (own || hasVersions) return own
  return { spec: design.startingSpec, parentNumber: null, revision: 0, updatedAt: new Date().toISOString() }
}

/** All that the studio opens with; the latest version is computed anew, once in each process, and held against what was stored. */
export async function openDesign(
  session: ValidSession,
  access: Access,
  design: DesignRow,
): Promise<Omit<StudioProps, 'actions'>> {
  const [versions, latest] = await Promise.all([
    listVersions(access, design.id),
    findVersion(access, design.id, 'latest'),
  ])
  return {
    design: designRecord(design),
    viewer: viewerOf(session, design),
    versions,
    draft: await openDraft(session, design, versions.length > 0),
    difference: latest ? knownDifference(latest) : null,
  }
}
