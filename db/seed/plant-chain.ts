import { ENGINE_VERSION } from '@/dsp'
import { chainChecksum } from '@/lib/chains/checksum'
import { computeChainVersion } from '@/lib/chains/compute-version'
import { linksOf } from '@/lib/chains/links'
import type { Access } from '../queries/access'
import { recordTrail } from '../queries/audit'
import { insertChainVersion } from '../queries/chain-versions'
import { insertChain } from '../queries/chains'
import type { Transaction } from '../queries/transaction'
import type { LinkTo, SeedChain, SeedChainVersion } from './chains'
import type { SeedDesign } from './projects'

const DAY_MS = 86_400_000

export interface PlantedDesign {
  readonly id: string
  readonly drawingNumber: string
  readonly design: SeedDesign
}

/** Links to the designs that were planted in the same project, by their titles. */
export const linkAmong =
  (planted: readonly PlantedDesign[]): LinkTo =>
  (title, version) => {
    const found = planted.find(({ design }) => design.title === title)
    const spec = found?.design.versions[version - 1]?.spec
    if (!found || !spec) throw new Error(`The demo has no version ${version} of a design "${title}".`)
    return { designId: found.id, version, drawing: found.drawingNumber, title, spec }
  }

interface Plot {
  readonly team: string
  readonly projectId: string
  readonly chain: SeedChain
  readonly access: Record<SeedChainVersion['by'], Access>
  readonly linkTo: LinkTo
}

export async function plantChain(tx: Transaction, { team, projectId, chain, access, linkTo }: Plot): Promise<void> {
  const [first] = chain.versions
  if (!first) throw new Error(`The demo's chain "${chain.title}" has no version.`)
  const starting = first.spec(linkTo)
  const made = await insertChain(tx, access[first.by], { projectId, title: chain.title, spec: starting })
  if (!made) throw new Error(`The demo's chain "${chain.title}" could not be made.`)
  const object = `chain:${made.id}`
  const details = { drawingNumber: made.drawingNumber }
  await recordTrail({ actor: access[first.by].accountId, team, action: 'chain.create', object, details }, tx)
  for (const [index, { spec: specFor, note, by, daysAgo }] of chain.versions.entries()) {
    const spec = specFor(linkTo)
    const computed = await computeChainVersion(spec)
    const number = index + 1
    await insertChainVersion(tx, access[by], {
      chainId: made.id,
      number,
      parentNumber: index === 0 ? null : index,
      note,
      spec,
      ...computed,
      checksum: chainChecksum({ spec, ...computed }),
      engineVersion: ENGINE_VERSION,
      links: linksOf(spec).map(({ stageId, link }) => ({
        stageId,
        designId: link.designId,
        designVersion: link.version,
      })),
      savedAt: new Date(Date.now() - daysAgo * DAY_MS),
    })
    await recordTrail(
      { actor: access[by].accountId, team, action: 'chain-version.save', object, details: { number } },
      tx,
    )
  }
}
