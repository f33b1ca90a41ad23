import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { closeConnections, pool } from '@/db/client'
import type { Access } from '@/db/queries/access'
import { findChainDraft, saveChainDraft } from '@/db/queries/chain-drafts'
import { findChainVersion, listChainsUsing, listChainVersions } from '@/db/queries/chain-versions'
import {
  findChain,
  insertChain,
  listChains,
  listDesignVersions,
  listNewestDesignVersions,
  lockChain,
  retitleChain,
} from '@/db/queries/chains'
import { findDesign, insertDesign, lockDesign, retitleDesign } from '@/db/queries/designs'
import { findDraft, saveDraft } from '@/db/queries/drafts'
import { findProject, insertProject, listDesigns, listProjects, takeSerial } from '@/db/queries/projects'
import { findTeam, listMembers, listTeams } from '@/db/queries/teams'
import { inTransaction } from '@/db/queries/transaction'
import { findVersion, listVersions } from '@/db/queries/versions'
import { startingChain } from '@/lib/chains/stage-starts'
import { defaultSpec } from '@/lib/designs/edits'
import { rolesFor } from '@/lib/permissions'
import { makeTeam, type TestTeam } from '../helpers/people'

let ours: TestTeam
let theirs: TestTeam
beforeAll(async () => {
  ours = await makeTeam()
  theirs = await makeTeam()
})
afterAll(closeConnections)

describe('rows of another team', () => {
  const stranger = (): Access => theirs.access('owner')

  it('are not found', async () => {
    expect(await findTeam(stranger(), ours.id)).toBeNull()
    expect(await listMembers(stranger(), ours.id)).toEqual([])
    expect(await findProject(stranger(), ours.projectId)).toBeNull()
    expect(await findDesign(stranger(), ours.designId)).toBeNull()
    expect(await listVersions(stranger(), ours.designId)).toEqual([])
    expect(await findVersion(stranger(), ours.designId, 'latest')).toBeNull()
    expect(await findDraft(stranger(), ours.designId)).toBeNull()
    expect(await findChain(stranger(), ours.chainId)).toBeNull()
    expect(await listChainVersions(stranger(), ours.chainId)).toEqual([])
    expect(await findChainVersion(stranger(), ours.chainId, 'latest')).toBeNull()
    expect(await findChainDraft(stranger(), ours.chainId)).toBeNull()
    expect(await listChainsUsing(stranger(), ours.designId)).toEqual([])
    expect(await listNewestDesignVersions(stranger(), ours.projectId)).toEqual([])
    expect(await listDesignVersions(stranger(), [ours.designId])).toEqual([])
  })

  it('are not listed', async () => {
    expect((await listTeams(stranger())).map(({ id }) => id)).toEqual([theirs.id])
    expect((await listProjects(stranger())).map(({ id }) => id)).toEqual([theirs.projectId])
    expect((await listDesigns(stranger())).map(({ id }) => id)).toEqual([theirs.designId])
    expect((await listChains(stranger())).map(({ id }) => id)).toEqual([theirs.chainId])
  })

  it('are not changed', async () => {
    await inTransaction(async (tx) => {
      expect(await lockDesign(tx, stranger(), ours.designId)).toBeNull()
      expect(await retitleDesign(tx, stranger(), ours.designId, 'Mine now')).toBe(false)
      expect(await takeSerial(tx, stranger(), ours.projectId)).toBeNull()
      expect(
        await insertDesign(tx, stranger(), { projectId: ours.projectId, title: 'Mine', spec: defaultSpec }),
      ).toBeNull()
      expect(await insertProject(tx, stranger(), { teamId: ours.id, code: 'NEW', name: 'Mine' })).toBeNull()
      const draft = { designId: ours.designId, spec: defaultSpec, parentNumber: null, revision: 0 }
      expect(await saveDraft(tx, stranger(), draft)).toBeNull()
      expect(await lockChain(tx, stranger(), ours.chainId)).toBeNull()
      expect(await retitleChain(tx, stranger(), ours.chainId, 'Mine now')).toBe(false)
      const chain = { projectId: ours.projectId, title: 'Mine', spec: startingChain }
      expect(await insertChain(tx, stranger(), chain)).toBeNull()
      const chainDraft = { chainId: ours.chainId, spec: startingChain, parentNumber: null, revision: 0 }
      expect(await saveChainDraft(tx, stranger(), chainDraft)).toBeNull()
    })
    expect(await findChain(ours.access('owner'), ours.chainId)).toMatchObject({ title: 'A chain' })
    expect(await findDesign(ours.access('owner'), ours.designId)).toMatchObject({ title: 'A design' })
  })
})

describe('roles', () => {
  it('are asked in the query: an observer’s write finds nothing to write to', async () => {
    const observer = ours.access('observer', rolesFor('design.rename'))
    await inTransaction(async (tx) => {
      expect(await retitleDesign(tx, observer, ours.designId, 'Mine now')).toBe(false)
    })
  })

  it('count at once when they change', async () => {
    const access = ours.access('reviewer', rolesFor('design.rename'))
    const rename = () => inTransaction((tx) => retitleDesign(tx, access, ours.designId, 'A design'))
    expect(await rename()).toBe(false)
    await pool().query(`update memberships set role = 'designer' where account_id = $1`, [access.accountId])
    expect(await rename()).toBe(true)
    await pool().query(`delete from memberships where account_id = $1`, [access.accountId])
    expect(await rename()).toBe(false)
    expect(await findDesign(ours.access('reviewer'), ours.designId)).toBeNull()
  })
})

describe('drawing numbers', () => {
  it('count through a project without gap or double, also when many are made at once', async () => {
    const access = theirs.access('designer')
    const made = await Promise.all(
      Array.from({ length: 8 }, () =>
        inTransaction((tx) =>
          insertDesign(tx, access, { projectId: theirs.projectId, title: 'One of many', spec: defaultSpec }),
        ),
      ),
    )
    expect(made.map((one) => one?.drawingNumber).sort()).toEqual(
      [3, 4, 5, 6, 7, 8, 9, 10].map((serial) => `TST-LP-${String(serial).padStart(3, '0')}`),
    )
  })
})
