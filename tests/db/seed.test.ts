import { afterAll, describe, expect, it } from 'vitest'
import { closeConnections, pool } from '@/db/client'
import { findAccountByEmail } from '@/db/queries/accounts'
import { listDesigns, listProjects } from '@/db/queries/projects'
import { findVersion, listVersions } from '@/db/queries/versions'
import accounts from '@/db/seed/accounts.json'
import { plantDemo } from '@/db/seed/plant'
import { signIn } from '@/lib/auth/accounts'
import { checksumOfStored } from '@/lib/designs/coefficients'
import { recomputeDifference } from '@/lib/designs/recompute'
import { allRoles } from '@/lib/permissions'

afterAll(closeConnections)

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

  it('left a trail', async () => {
    const { rows } = await pool().query<{ action: string; count: number }>(
      'select action, count(*)::int as count from audit group by action order by action',
    )
    expect(rows).toEqual(
      expect.arrayContaining([
        { action: 'project.create', count: 3 },
        { action: 'design.create', count: 11 },
      ]),
    )
  })
})
