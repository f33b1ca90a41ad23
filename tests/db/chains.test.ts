import { afterAll, beforeEach, describe, expect, it } from 'vitest'
import { closeConnections, pool } from '@/db/client'
import { findChainDraft, saveChainDraft } from '@/db/queries/chain-drafts'
import { findChainVersion, insertChainVersion, listChainsUsing, listChainVersions } from '@/db/queries/chain-versions'
import { findChain, listChains, lockChain, listNewestDesignVersions } from '@/db/queries/chains'
import { lockDesign, retitleDesign } from '@/db/queries/designs'
import { inTransaction } from '@/db/queries/transaction'
import { DesignError, designFromSpec, ENGINE_VERSION, type ChainSpec, type DesignSpec } from '@/dsp'
import { canonicalJson } from '@/lib/chains/canonical'
import { chainChecksum } from '@/lib/chains/checksum'
import { computeChainVersion } from '@/lib/chains/compute-version'
import { linkableDesigns } from '@/lib/chains/linkable'
import { linksOf, withLinks } from '@/lib/chains/links'
import { saveChainVersion } from '@/lib/chains/save-chain-version'
import { startingChain } from '@/lib/chains/stage-starts'
import { startingChains } from '@/lib/chains/templates'
import { coefficientsOf } from '@/lib/designs/coefficients'
import { saveVersion } from '@/lib/designs/save-version'
import type { Role } from '@/lib/designs/types'
import { feedbackDesign, linkedChain, tapsDesign } from '../helpers/chain-sources'
import { makeTeam, type TestTeam } from '../helpers/people'

let team: TestTeam
beforeEach(async () => {
  team = await makeTeam()
})
afterAll(closeConnections)

const keptTo = (toHz: number): ChainSpec => ({ ...startingChain, kept: { fromHz: 0.5, toHz } })

const save = (role: Role, spec: ChainSpec, parentNumber: number | null, onTopOf?: number) =>
  inTransaction(async (tx) => {
    const access = team.access(role)
    const chain = await lockChain(tx, access, team.chainId)
    if (!chain) throw new Error('no chain')
    const input = { chainId: team.chainId, spec, note: 'why', parentNumber, ...(onTopOf !== undefined && { onTopOf }) }
    return (await saveChainVersion({ tx, access, chain, input, computed: await computeChainVersion(spec) })).value
  })

const saveDesign = (of: TestTeam, spec: DesignSpec, parentNumber: number | null) =>
  inTransaction(async (tx) => {
    const access = of.access('owner')
    const design = await lockDesign(tx, access, of.designId)
    if (!design) throw new Error('no design')
    const input = { designId: of.designId, spec, note: 'why', parentNumber }
    await saveVersion({ tx, access, design, input, coefficients: coefficientsOf(designFromSpec(spec)) })
  })

const draft = (role: Role, spec: ChainSpec, parentNumber: number | null, revision: number) =>
  inTransaction((tx) => saveChainDraft(tx, team.access(role), { chainId: team.chainId, spec, parentNumber, revision }))

const run = (text: string, values: readonly unknown[] = []) => pool().query(text, [...values])

const names = (version = 1) => ({ designId: team.designId, version, drawing: 'TST-LP-001', title: 'A design' })

describe('a chain', () => {
  it('has a drawing number from the project’s own count', async () => {
    expect(await findChain(team.access('observer'), team.chainId)).toMatchObject({
      drawingNumber: 'TST-CH-002',
      title: 'A chain',
    })
    await expect(run(`update chains set drawing_number = 'TST-CH-999' where id = $1`, [team.chainId])).rejects.toThrow(
      /given once/,
    )
  })
})

describe('saving a version of a chain', () => {
  it('stores spec, figures, numbers, their checksum and the engine, bit by bit', async () => {
    for (const [at, spec] of [startingChains.plain, startingChains.averaging, startingChains.empty].entries()) {
      const outcome = await save('designer', spec, at === 0 ? null : at)
      expect(outcome).toMatchObject({
        outcome: 'saved',
        version: { number: at + 1, savedBy: 'designer', state: 'draft', engineVersion: ENGINE_VERSION },
      })
      expect(outcome).not.toHaveProperty('version.numbers')
      const row = await findChainVersion(team.access('observer'), team.chainId, at + 1)
      if (!row) throw new Error('lost')
      const fresh = await computeChainVersion(spec)
      expect(canonicalJson(row.spec)).toBe(canonicalJson(spec))
      expect(canonicalJson(row.figures)).toBe(canonicalJson(fresh.figures))
      expect(canonicalJson(row.numbers)).toBe(canonicalJson(fresh.numbers))
      expect(chainChecksum(row)).toBe(row.checksum)
    }
    expect((await listChains(team.access('observer')))[0]).toMatchObject({
      latest: { number: 3, savedBy: 'designer', figures: { outputRateHz: 2000 } },
    })
  })

  it('of two people on the same parent, the second is shown the first one’s', async () => {
    await save('owner', startingChain, null)
    await save('owner', keptTo(80), 1)
    expect(await save('designer', keptTo(70), 1)).toMatchObject({
      outcome: 'conflict',
      theirs: { number: 2, savedBy: 'owner', spec: { kept: { toHz: 80 } } },
    })
    expect(await save('designer', keptTo(70), 1, 2)).toMatchObject({
      outcome: 'saved',
      version: { number: 3, parentNumber: 2 },
    })
    const outcomes = await Promise.all([60, 61, 62, 63].map((hertz) => save('owner', keptTo(hertz), 3)))
    expect(outcomes.map(({ outcome }) => outcome).sort()).toEqual(['conflict', 'conflict', 'conflict', 'saved'])
  })

  it('refuses a spec whose stages make no chain, with the field', async () => {
    const refused = save('designer', keptTo(200), null)
    await expect(refused).rejects.toThrow(DesignError)
    await expect(save('designer', keptTo(200), null)).rejects.toMatchObject({ field: 'kept.toHz', nearest: 125 })
    expect(await listChainVersions(team.access('owner'), team.chainId)).toEqual([])
  })
})

describe('versions of a chain, past all of our code', () => {
  const insert = (number: number, parent: number | null) =>
    run(
      `insert into chain_versions (chain_id, number, parent_number, note, spec, figures, numbers, checksum, engine_version, saved_by)
       values ($1, $2, $3, 'a note', '{"stages": []}', '{}', '{}', $4, '1.0.0', $5)`,
      [team.chainId, number, parent, 'a'.repeat(64), team.members.owner.id],
    )

  beforeEach(async () => {
    await save('owner', startingChain, null)
  })

  it.each([
    ['update', `update chain_versions set note = 'another'`],
    ['delete', 'delete from chain_versions'],
    ['truncate', 'truncate chain_versions cascade'],
    ['upsert', `insert into chain_versions select * from chain_versions on conflict (id) do update set note = 'x'`],
  ])('can not be changed by %s', async (_, statement) => {
    await expect(run(statement)).rejects.toThrow(/append-only|not the next one/)
    expect(await findChainVersion(team.access('owner'), team.chainId, 1)).toMatchObject({ note: 'why' })
  })

  it.each([
    ['a number that is taken', 1, null],
    ['a number that leaves a gap', 3, 1],
    ['no parent after the first', 2, null],
    ['a parent that is not there', 2, 7],
    ['itself as parent', 2, 2],
  ])('refuse %s', async (_, number, parent) => {
    await expect(insert(number, parent)).rejects.toThrow()
  })

  it('can not be lost with their chain', async () => {
    await expect(run('delete from chains where id = $1', [team.chainId])).rejects.toThrow(/foreign key|append-only/)
  })
})

describe('links', () => {
  beforeEach(async () => {
    await saveDesign(team, tapsDesign, null)
    await saveDesign(team, feedbackDesign, 1)
  })

  it('are kept, and tell where a design is used', async () => {
    await save('designer', linkedChain(tapsDesign, names(1)), null)
    await save('designer', linkedChain(feedbackDesign, names(2)), 1)
    expect(await listChainsUsing(team.access('observer'), team.designId)).toEqual([
      expect.objectContaining({ chainId: team.chainId, chainVersion: 2, stageId: 'tied', designVersion: 2 }),
      expect.objectContaining({ chainId: team.chainId, chainVersion: 1, stageId: 'tied', designVersion: 1 }),
    ])
  })

  it('are refused when they name a version that isn’t there, with the newest', async () => {
    await expect(save('designer', linkedChain(tapsDesign, names(7)), null)).rejects.toMatchObject({
      code: 'link-version-not-there',
      field: 'stages.3.filter.link.version',
      nearest: 2,
    })
  })

  it('are refused when the stage holds another spec than that version’s', async () => {
    const tampered = { ...tapsDesign, budget: { ...tapsDesign.budget, magnitudeDb: 3 } }
    await expect(save('designer', linkedChain(tampered, names(1)), null)).rejects.toMatchObject({
      code: 'link-spec-differs',
      field: 'stages.3.filter.link.version',
      nearest: 2,
    })
    expect(await listChainVersions(team.access('owner'), team.chainId)).toEqual([])
  })

  it('are refused when the design is another team’s, or none, in the same words', async () => {
    const other = await makeTeam()
    await saveDesign(other, tapsDesign, null)
    for (const designId of [other.designId, '00000000-0000-4000-8000-000000000000'])
      await expect(save('designer', linkedChain(tapsDesign, { ...names(1), designId }), null)).rejects.toMatchObject({
        code: 'link-not-there',
        field: 'stages.3.filter.link.designId',
      })
    // Nor does it help to be in both teams: a chain is made of its own team's designs.
    await run(`insert into memberships (team_id, account_id, role) values ($1, $2, 'owner')`, [
      other.id,
      team.members.designer.id,
    ])
    await expect(
      save('designer', linkedChain(tapsDesign, { ...names(1), designId: other.designId }), null),
    ).rejects.toMatchObject({ code: 'link-not-there' })
  })

  it('carry the names that the design has today', async () => {
    await inTransaction((tx) => retitleDesign(tx, team.access('owner'), team.designId, 'A better title'))
    const outcome = await save('designer', linkedChain(tapsDesign, { ...names(1), drawing: 'XXX-LP-999' }), null)
    if (outcome.outcome !== 'saved') throw new Error('refused')
    expect(linksOf(outcome.version.spec).map(({ link }) => [link.drawing, link.title])).toEqual([
      ['TST-LP-001', 'A better title'],
    ])
  })

  it('can’t be changed, taken away, or made up afterwards', async () => {
    await save('designer', linkedChain(tapsDesign, names(1)), null)
    for (const statement of [
      'update chain_links set design_version = 2',
      'delete from chain_links',
      'truncate chain_links',
    ])
      await expect(run(statement)).rejects.toThrow(/append-only/)
    await expect(
      run(
        `insert into chain_links (chain_version_id, stage_id, design_id, design_version)
         select id, 's1', $1, 1 from chain_versions where chain_id = $2`,
        [team.designId, team.chainId],
      ),
    ).rejects.toThrow(/does not state this link/)
  })

  it('can’t name a version that isn’t there, even past our own check', async () => {
    const spec = withLinks(linkedChain(tapsDesign, names(1)), (link) => ({ ...link, version: 9 }))
    const access = team.access('owner')
    const insert = inTransaction(async (tx) => {
      await lockChain(tx, access, team.chainId)
      const computed = await computeChainVersion(spec)
      const links = [{ stageId: 'tied', designId: team.designId, designVersion: 9 }]
      await insertChainVersion(tx, access, {
        chainId: team.chainId,
        number: 1,
        parentNumber: null,
        note: 'x',
        spec,
        ...computed,
        checksum: chainChecksum({ spec, ...computed }),
        engineVersion: ENGINE_VERSION,
        links,
      })
    })
    await expect(insert).rejects.toMatchObject({ cause: { constraint: 'chain_links_version_fk' } })
    expect(await listChainVersions(access, team.chainId)).toEqual([])
  })

  it('are offered with the newest version of each design, and whether its analog original is known', async () => {
    expect(await listNewestDesignVersions(team.access('observer'), team.projectId)).toHaveLength(1)
    expect(await linkableDesigns(team.access('observer'), team.projectId)).toEqual([
      { link: { ...names(2), spec: feedbackDesign }, hasAnalog: true },
    ])
    await saveDesign(team, tapsDesign, 2)
    expect(await linkableDesigns(team.access('observer'), team.projectId)).toMatchObject([
      { link: { version: 3 }, hasAnalog: false },
    ])
  })
})

describe('drafts of a chain', () => {
  it('count up, one for each editor, and an older page is told so', async () => {
    expect(await draft('designer', keptTo(90), null, 0)).toMatchObject({ outcome: 'saved', revision: 1 })
    expect(await draft('designer', keptTo(91), null, 1)).toMatchObject({ outcome: 'saved', revision: 2 })
    expect(await draft('designer', keptTo(50), null, 1)).toMatchObject({
      outcome: 'stale',
      current: { revision: 2, spec: { kept: { toHz: 91 } } },
    })
    await draft('owner', keptTo(40), null, 0)
    expect(await findChainDraft(team.access('designer'), team.chainId)).toMatchObject({ spec: { kept: { toHz: 91 } } })
    expect(await findChainDraft(team.access('reviewer'), team.chainId)).toBeNull()
    const outcomes = await Promise.all([50, 60, 70].map((hertz) => draft('designer', keptTo(hertz), null, 2)))
    expect(outcomes.filter((one) => one?.outcome === 'saved')).toHaveLength(1)
  })

  it('may hold what makes no chain, and start anew from the version they became', async () => {
    expect(await draft('designer', keptTo(200), null, 0)).toMatchObject({ outcome: 'saved' })
    await save('designer', keptTo(80), null)
    expect(await findChainDraft(team.access('designer'), team.chainId)).toMatchObject({
      revision: 1,
      parentNumber: 1,
      spec: { kept: { toHz: 80 } },
    })
  })

  it('hold up to 512 kB, whichever way they come', async () => {
    const put = (characters: number) =>
      run(
        `insert into chain_drafts (chain_id, account_id, spec, revision)
         values ($1, $2, jsonb_build_object('a', repeat('x', $3::int)), 1)
         on conflict (chain_id, account_id) do update set spec = excluded.spec`,
        [team.chainId, team.members.owner.id, characters],
      )
    await put(524_000)
    await expect(put(524_400)).rejects.toThrow(/chain_drafts_spec_size/)
  })
})
