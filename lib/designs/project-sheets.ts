import 'server-only'
import type { Access } from '@/db/queries/access'
import { listChains, type ChainListRow } from '@/db/queries/chains'
import { listDesigns, listProjects, type DesignListRow } from '@/db/queries/projects'
import { outputRateOf } from '@/lib/chains/outline'
import type { ChainLine } from '@/lib/chains/project-lines'
import { sheetTone, sheetWords } from '@/lib/chains/sheet-words'
import { chainText } from '@/lib/chains/statement'
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
    saved: latest ? savedWords(latest) : '',
  }
}

function chainLineOf({ id, drawingNumber, title, spec, latest }: ChainListRow): ChainLine {
  return {
    id,
    drawingNumber,
    title,
    statement: chainText(spec),
    rate: formatHz(outputRateOf(spec)),
    version: latest ? `v${latest.number}` : 'no version yet',
    sheet: latest ? sheetWords(latest.figures) : '',
    sheetTone: latest ? sheetTone(latest.figures) : 'open',
    saved: latest ? savedWords(latest) : '',
  }
}

const savedWords = ({ savedAt, savedBy }: { readonly savedAt: string; readonly savedBy: string }) =>
  `${formatInstant(savedAt).slice(0, 11)}, ${savedBy}`

/** The viewer's projects with their designs and chains, as the lists show them. */
export async function projectSheets(access: Access): Promise<readonly ProjectSheet[]> {
  const [projects, designs, chains] = await Promise.all([listProjects(access), listDesigns(access), listChains(access)])
  return projects.map(({ id, code, name, role }) => ({
    id,
    code,
    name,
    mayCreate: mayDo(role, 'design.create'),
    designs: designs.filter((design) => design.projectId === id).map(lineOf),
    chains: chains.filter((chain) => chain.projectId === id).map(chainLineOf),
  }))
}
