import 'server-only'
import type { Access } from '@/db/queries/access'
import { listDesignVersions } from '@/db/queries/chains'
import type { Transaction } from '@/db/queries/transaction'
import { DesignError, type ChainSpec, type DesignLink } from '@/dsp'
import { sameValue } from '@/lib/designs/same-value'
import { linksOf, withLinks } from './links'

/**
 * Holds every link of a chain against the design version that it names, and gives the chain with the names that those designs have today.
 * @throws DesignError with the link's field: no such design of this team, no such version, or another spec than that version's; nearest the
 *   design's newest version
 */
export async function checkedLinks(
  tx: Transaction,
  access: Access,
  teamId: string,
  spec: ChainSpec,
): Promise<ChainSpec> {
  const links = linksOf(spec)
  const rows = await listDesignVersions(access, [...new Set(links.map(({ link }) => link.designId))], tx)
  const names = new Map<string, Pick<DesignLink, 'drawing' | 'title'>>()
  for (const { field, link } of links) {
    // A member of two teams sees both, but a chain is made of its own team's designs.
    const ofDesign = rows.filter((row) => row.designId === link.designId && row.teamId === teamId)
    const [newest] = ofDesign
    if (!newest)
      throw new DesignError(
        'link-not-there',
        `${field}.designId`,
        'The design that this stage is tied to is not one of this team’s, or has no version; tie it to another one, or state the filter in the chain.',
      )
    const { drawingNumber, title } = newest
    const named = ofDesign.find(({ number }) => number === link.version)
    if (!named)
      throw new DesignError(
        'link-version-not-there',
        `${field}.version`,
        `${drawingNumber} has no version ${link.version}; its newest is version ${newest.number}.`,
        newest.number,
      )
    if (!sameValue(named.spec, link.spec))
      throw new DesignError(
        'link-spec-differs',
        `${field}.version`,
        `What this stage holds is not version ${link.version} of ${drawingNumber}; tie it anew, for instance to the newest, version ${newest.number}.`,
        newest.number,
      )
    names.set(link.designId, { drawing: drawingNumber, title })
  }
  return withLinks(spec, (link) => ({ ...link, ...names.get(link.designId) }))
}
