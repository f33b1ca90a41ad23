import 'server-only'
import type { Access } from '@/db/queries/access'
import { listDesigns, listProjects, type DesignListRow } from '@/db/queries/projects'
import type { DesignLine, ProjectSheet } from './project-lines'
import { formatHz, formatInstant } from '@/lib/format/quantity'
import { mayDo } from '@/lib/permissions'
import { statementText } from './statement'
import { stateWords } from './words'

function lineOf({ id, drawingNumber, title, spec, latest }: DesignListRow): DesignLine {
  return {
    id,
    drawingNumber,
    title,
    statement: statementText(spec),
    rate: formatHz(spec.sampleRateHz),
    version: latest ? `v${latest.number}` : 'no version yet',
    state: stateWords.draft,
    saved: latest ? `${formatInstant(latest.savedAt).slice(0, 11)}, ${latest.savedBy}` : '',
  }
}

/** The viewer's projects with their designs, as the lists show them. */
export async function projectSheets(access: Access): Promise<readonly ProjectSheet[]> {
  const [projects, designs] = await Promise.all([listProjects(access), listDesigns(access)])
  return projects.map(({ id, code, name, role }) => ({
    id,
    code,
    name,
    mayCreate: mayDo(role, 'design.create'),
    designs: designs.filter((design) => design.projectId === id).map(lineOf),
  }))
}
