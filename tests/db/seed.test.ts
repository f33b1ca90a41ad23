import { afterAll, describe, expect, it } from 'vitest'
import { closeConnections, pool } from '@/db/client'
import { findAccountByEmail } from '@/db/queries/accounts'
import { findChainVersion, listChainVersions, listChainsUsing } from '@/db/queries/chain-versions'
import { listChains, type ChainListRow } from '@/db/queries/chains'
import { listDesigns, listProjects } from '@/db/queries/projects'
import { findVersion, listVersions } from '@/db/queries/versions'
import accounts from '@/db/seed/accounts.json'
import { plantDemo } from '@/db/seed/plant'
import { computeChain, worstAlias } from '@/dsp'
import { signIn } from '@/lib/auth/accounts'
import { chainChecksum } from '@/lib/chains/checksum'
import { computeChainVersion, judgedChain } from '@/lib/chains/compute-version'
import { linksOf } from '@/lib/chains/links'
import { checksumOfStored } from '@/lib/designs/coefficients'
import { recomputeDifference } from '@/lib/designs/recompute'
import { allRoles } from '@/lib/permissions'

afterAll(closeConnections)

const byDrawing = (chains: readonly ChainListRow[]) =>
  [...chains].sort((one, other) => (one.drawingNumber < other.drawingNumber ? -1 : 1))

describe('the demo', () => {
  it('is planted once, though two processes start together', async () => {
    const planted = await Promise.all([plantDemo(), plantDemo()])
    expect(planted.sort()).toEqual([false, true])
    expect(await plantDemo()).toBe(false)
  })

  it('has an account for each role at a reserved domain, and each gets in', async () => {
    expect(accounts.map(({ role }) => role).sort()).toEqual([...allRoles].sort())
    for (const { email, password } of accounts) {
      expect(email).toMatch(/@polewright\.example$/)
      await expect(signIn({ email, password }, { address: '192.0.2.1', agent: '' })).resolves.toMatchObject({
        token: expect.any(String),
      })
    }
  })

  it('has three projects, and every version is what its spec computes to', async () => {
    const observer = await findAccountByEmail('observer@polewright.example')
    const access = { accountId: observer?.id ?? '', roles: allRoles }
    expect(await listProjects(access)).toHaveLength(3)
    const designs = await listDesigns(access)
    expect(designs.length).toBeGreaterThanOrEqual(8)
    for (const design of designs) {
      const versions = await listVersions(access, design.id)
      expect(versions.length).toBeGreaterThanOrEqual(2)
      for (const { number, note, checksum, savedAt } of versions) {
        const row = await findVersion(access, design.id, number)
        if (!row) throw new Error('lost')
        expect(recomputeDifference(row)).toBeNull()
        expect(checksumOfStored(row.coefficients)).toBe(checksum)
        expect(note.length).toBeGreaterThan(20)
        expect(Date.parse(savedAt)).toBeLessThan(Date.now())
      }
      const times = versions.map(({ savedAt }) => Date.parse(savedAt))
      expect(times).toEqual([...times].sort((one, other) => other - one))
    }
  })

  it('has three chains, each version saved with what its spec computes to, its links kept', async () => {
    const observer = await findAccountByEmail('observer@polewright.example')
    const access = { accountId: observer?.id ?? '', roles: allRoles }
    const chains = byDrawing(await listChains(access))
    expect(chains.map(({ drawingNumber }) => drawingNumber)).toEqual(['HMF-CH-005', 'SPH-CH-004', 'SPH-CH-005'])
    let links = 0
    for (const chain of chains) {
      const versions = await listChainVersions(access, chain.id)
      expect(versions).toHaveLength(2)
      for (const { number, note, checksum, spec, figures } of versions) {
        const row = await findChainVersion(access, chain.id, number)
        if (!row) throw new Error('lost')
        expect({ figures, numbers: row.numbers }).toEqual(await computeChainVersion(spec))
        expect(chainChecksum(row)).toBe(checksum)
        expect(note.length).toBeGreaterThan(20)
        for (const { stageId, link } of linksOf(spec)) {
          links += 1
          expect(await listChainsUsing(access, link.designId)).toContainEqual(
            expect.objectContaining({
              chainId: chain.id,
              chainVersion: number,
              stageId,
              designVersion: link.version,
            }),
          )
        }
      }
    }
    expect(links).toBe(3)
  })

  it('has a chain that meets its sheet, one that misses nothing but its alias floor, and all seven kinds of line', async () => {
    const observer = await findAccountByEmail('observer@polewright.example')
    const chains = byDrawing(await listChains({ accountId: observer?.id ?? '', roles: allRoles }))
    const [deck, pump, velocity] = await Promise.all(chains.map(async ({ spec }) => (await judgedChain(spec)).results))
    for (const met of [deck, velocity]) expect(met?.filter((line) => line.met !== true)).toEqual([])
    expect(pump?.filter((line) => line.met !== true).map((line) => line.requirement.kind)).toEqual(['alias-floor'])
    // What the fold chart shows: the strip right above half the output rate, folded by the second decimation.
    const pumpSpec = chains[1]?.spec
    if (!pumpSpec) throw new Error('no chain')
    expect(worstAlias(computeChain(pumpSpec))).toMatchObject({ strip: 1, foldsAtStageId: 'down2' })
    const kinds = new Set(chains.flatMap(({ spec }) => spec.sheet.map(({ kind }) => kind)))
    expect(kinds.size).toBe(7)
  })

  it('left a trail', async () => {
    const { rows } = await pool().query<{ action: string; count: number }>(
      'select action, count(*)::int as count from audit group by action order by action',
    )
    expect(rows).toEqual(
      expect.arrayContaining([
        { action: 'project.create', count: 3 },
        { action: 'design.create', count: 11 },
        { action: 'chain.create', count: 3 },
        { action: 'chain-version.save', count: 6 },
      ]),
    )
  })
})
