import { afterAll, beforeEach, describe, expect, it } from 'vitest'
import { closeConnections } from '@/db/client'
import { lockDesign } from '@/db/queries/designs'
import { findDraft, saveDraft } from '@/db/queries/drafts'
import { inTransaction } from '@/db/queries/transaction'
import { findVersion, listVersions } from '@/db/queries/versions'
import { DesignError, designFromSpec, ENGINE_VERSION, type DesignSpec } from '@/dsp'
import { canonicalText, checksumOf, checksumOfStored, coefficientsOf } from '@/lib/designs/coefficients'
import { defaultSpec } from '@/lib/designs/edits'
import { saveVersion } from '@/lib/designs/save-version'
import type { Role } from '@/lib/designs/types'
import { makeTeam, type TestTeam } from '../helpers/people'

let team: TestTeam
beforeEach(async () => {
  team = await makeTeam()
})
afterAll(closeConnections)

const withCorner = (hertz: number): DesignSpec => ({
  ...defaultSpec,
  analog: { ...defaultSpec.analog, edgesHz: [hertz] },
})

const save = (role: Role, spec: DesignSpec, parentNumber: number | null, onTopOf?: number) =>
  inTransaction(async (tx) => {
    const access = team.access(role)
    const design = await lockDesign(tx, access, team.designId)
    if (!design) throw new Error('no design')
    const input = {
      designId: team.designId,
      spec,
      note: 'why',
      parentNumber,
      ...(onTopOf !== undefined && { onTopOf }),
    }
    const coefficients = coefficientsOf(designFromSpec(spec))
    return (await saveVersion({ tx, access, design, input, coefficients })).value
  })

const draft = (role: Role, spec: DesignSpec, parentNumber: number | null, revision: number) =>
  inTransaction((tx) => saveDraft(tx, team.access(role), { designId: team.designId, spec, parentNumber, revision }))

describe('saving a version', () => {
  it('stores spec, coefficients, their checksum and the engine', async () => {
    const outcome = await save('designer', defaultSpec, null)
    expect(outcome).toMatchObject({
      outcome: 'saved',
      version: { number: 1, parentNumber: null, savedBy: 'designer', state: 'draft', engineVersion: ENGINE_VERSION },
    })
    const row = await findVersion(team.access('observer'), team.designId, 1)
    const fresh = designFromSpec(defaultSpec)
    expect(row?.spec).toEqual(defaultSpec)
    expect(row?.coefficients).toEqual(coefficientsOf(fresh))
    expect(row?.checksum).toBe(checksumOf(fresh))
  })

  it('keeps each number bit by bit through the database, so that the stored numbers still match their checksum', async () => {
    const specs: DesignSpec[] = [
      defaultSpec,
      withCorner(2e-3),
      {
        ...defaultSpec,
        analog: { ...defaultSpec.analog, response: 'bandpass', order: 12, edgesHz: [1 / 3, 100 * Math.SQRT2] },
      },
    ]
    for (const [at, spec] of specs.entries()) await save('designer', spec, at === 0 ? null : at)
    for (const [at, spec] of specs.entries()) {
      const row = await findVersion(team.access('owner'), team.designId, at + 1)
      if (!row) throw new Error('lost')
      expect(canonicalText(row.coefficients)).toBe(canonicalText(coefficientsOf(designFromSpec(spec))))
      expect(checksumOfStored(row.coefficients)).toBe(row.checksum)
    }
  })

  it('does not tell coefficients to the browser', async () => {
    const outcome = await save('designer', defaultSpec, null)
    expect(JSON.stringify(outcome)).not.toContain('coefficients')
  })

  it('refuses a spec whose numbers make no filter, and saves nothing', async () => {
    await expect(save('designer', withCorner(900), null)).rejects.toThrow(DesignError)
    expect(await listVersions(team.access('owner'), team.designId)).toEqual([])
  })
})

describe('two people on the same parent', () => {
  it('the second is shown the first one’s version and loses nothing', async () => {
    await save('owner', defaultSpec, null)
    await draft('designer', withCorner(90), 1, 0)
    await save('owner', withCorner(100), 1)
    const outcome = await save('designer', withCorner(90), 1)
    expect(outcome).toMatchObject({
      outcome: 'conflict',
      theirs: { number: 2, savedBy: 'owner', spec: withCorner(100) },
    })
    expect(await listVersions(team.access('owner'), team.designId)).toHaveLength(2)
    expect(await findDraft(team.access('designer'), team.designId)).toMatchObject({
      spec: withCorner(90),
      parentNumber: 1,
    })

    const onTop = await save('designer', withCorner(90), 1, 2)
    expect(onTop).toMatchObject({ outcome: 'saved', version: { number: 3, parentNumber: 2, spec: withCorner(90) } })
  })

  it('having seen an older version is not enough', async () => {
    await save('owner', defaultSpec, null)
    await save('owner', withCorner(100), 1)
    await save('owner', withCorner(110), 2)
    expect(await save('designer', withCorner(90), 1, 2)).toMatchObject({ outcome: 'conflict', theirs: { number: 3 } })
  })

  it('at the same moment, exactly one gets through', async () => {
    await save('owner', defaultSpec, null)
    const outcomes = await Promise.all(
      [60, 70, 80, 90, 100, 110].map((hertz, at) => save(at % 2 ? 'owner' : 'designer', withCorner(hertz), 1)),
    )
    expect(outcomes.filter(({ outcome }) => outcome === 'saved')).toHaveLength(1)
    expect(outcomes.filter(({ outcome }) => outcome === 'conflict')).toHaveLength(5)
    const versions = await listVersions(team.access('owner'), team.designId)
    expect(versions.map(({ number }) => number)).toEqual([2, 1])
  })

  it('also for the very first version', async () => {
    const outcomes = await Promise.all([save('owner', withCorner(100), null), save('designer', withCorner(90), null)])
    expect(outcomes.map(({ outcome }) => outcome).sort()).toEqual(['conflict', 'saved'])
  })
})

describe('drafts', () => {
  it('count up, and an older page of the same editor is told so', async () => {
    expect(await draft('designer', withCorner(90), null, 0)).toMatchObject({ outcome: 'saved', revision: 1 })
    expect(await draft('designer', withCorner(91), null, 1)).toMatchObject({ outcome: 'saved', revision: 2 })
    expect(await draft('designer', withCorner(50), null, 1)).toMatchObject({
      outcome: 'stale',
      current: { revision: 2, spec: withCorner(91) },
    })
    expect(await draft('designer', withCorner(50), null, 0)).toMatchObject({ outcome: 'stale' })
    expect(await findDraft(team.access('designer'), team.designId)).toMatchObject({ revision: 2, spec: withCorner(91) })
  })

  it('of two pages at the same moment, one gets through', async () => {
    await draft('designer', defaultSpec, null, 0)
    const outcomes = await Promise.all([50, 60, 70, 80].map((hertz) => draft('designer', withCorner(hertz), null, 1)))
    expect(outcomes.filter((one) => one?.outcome === 'saved')).toHaveLength(1)
  })

  it('are one for each editor', async () => {
    await draft('designer', withCorner(90), null, 0)
    await draft('owner', withCorner(80), null, 0)
    expect(await findDraft(team.access('designer'), team.designId)).toMatchObject({ spec: withCorner(90) })
    expect(await findDraft(team.access('owner'), team.designId)).toMatchObject({ spec: withCorner(80) })
    expect(await findDraft(team.access('reviewer'), team.designId)).toBeNull()
  })

  it('may hold what makes no filter', async () => {
    expect(await draft('designer', withCorner(900), null, 0)).toMatchObject({ outcome: 'saved' })
  })

  it('start anew from the version they became, and the page that saved goes on', async () => {
    await draft('designer', withCorner(90), null, 0)
    await save('designer', withCorner(90), null)
    expect(await findDraft(team.access('designer'), team.designId)).toMatchObject({
      revision: 1,
      parentNumber: 1,
      spec: withCorner(90),
    })
    expect(await draft('designer', withCorner(95), 1, 1)).toMatchObject({ outcome: 'saved', revision: 2 })
  })
})
