import { renderToStaticMarkup } from 'react-dom/server'
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest'
import { createChain, duplicateChain, saveVersion } from '@/app/chains/actions'
import { PUT } from '@/app/api/chains/[chainId]/draft/route'
import { GET } from '@/app/api/chains/[chainId]/versions/[number]/export/route'
import { GET as getSchema } from '@/app/api/formats/chain/route'
import ChainComparePage from '@/app/chains/[chainId]/compare/page'
import ChainVersionPage from '@/app/chains/[chainId]/versions/[number]/page'
import DesignVersionPage from '@/app/designs/[designId]/versions/[number]/page'
import FormatsPage from '@/app/formats/page'
import ProjectPage from '@/app/projects/[projectId]/page'
import { closeConnections, pool } from '@/db/client'
import { findChainVersion } from '@/db/queries/chain-versions'
import { findChain } from '@/db/queries/chains'
import { lockDesign } from '@/db/queries/designs'
import { inTransaction } from '@/db/queries/transaction'
import { designFromSpec, type ChainSpec } from '@/dsp'
import { linksOf } from '@/lib/chains/links'
import { startingChain } from '@/lib/chains/stage-starts'
import { startingChains } from '@/lib/chains/templates'
import { coefficientsOf } from '@/lib/designs/coefficients'
import { saveVersion as saveDesignVersion } from '@/lib/designs/save-version'
import type { Role } from '@/lib/designs/types'
import { chainFile } from '@/lib/exports/chain-file'
import { chainFileSchema } from '@/lib/exports/chain-json'
import { linkedChain, tapsDesign } from '../helpers/chain-sources'
import { beginRequest, headers } from '../helpers/next-request'
import { makeTeam, type TestTeam } from '../helpers/people'

vi.mock('next/headers', () => import('../helpers/next-request'))
vi.mock('next/navigation', async (original) => ({
  ...(await original<object>()),
  useRouter: () => ({ push: () => undefined, refresh: () => undefined }),
}))

let team: TestTeam
let foreign: TestTeam

const save = (spec: unknown, parentNumber: number | null, chainId = team.chainId) => {
  beginRequest({ token: team.members.designer.token })
  return saveVersion({ chainId, spec: spec as ChainSpec, note: 'why it changed', parentNumber })
}

const linked = (version = 1) =>
  linkedChain(tapsDesign, { designId: team.designId, version, drawing: 'TST-LP-001', title: 'A design' })

beforeAll(async () => {
  team = await makeTeam()
  foreign = await makeTeam()
  await inTransaction(async (tx) => {
    const access = team.access('owner')
    const design = await lockDesign(tx, access, team.designId)
    if (!design) throw new Error('no design')
    const input = { designId: team.designId, spec: tapsDesign, note: 'taps', parentNumber: null }
    const coefficients = coefficientsOf(designFromSpec(tapsDesign))
    await saveDesignVersion({ tx, access, design, input, coefficients })
  })
  expect(await save(startingChain, null)).toMatchObject({ outcome: 'saved', version: { number: 1 } })
  expect(await save(linked(), 1)).toMatchObject({ outcome: 'saved', version: { number: 2 } })
})
afterAll(closeConnections)

describe('saving a version of a chain', () => {
  const stages = startingChain.stages
  it.each([
    ['an unknown key', { ...startingChain, extra: 1 }, 'spec', undefined],
    ['a band beyond half the output rate', { ...startingChain, kept: { fromHz: 1, toHz: 150 } }, 'kept.toHz', 125],
    [
      'a second stage of one name',
      { ...startingChain, stages: [...stages, { ...stages[4], id: 's4' }] },
      'stages.5.id',
      's6',
    ],
    [
      'no converter',
      { ...startingChain, stages: stages.filter(({ kind }) => kind !== 'converter') },
      'stages',
      'converter',
    ],
    ['stages out of order', { ...startingChain, stages: [...stages].reverse() }, 'stages.0.kind', 'sensor'],
    [
      'a factor of half',
      { ...startingChain, stages: [...stages.slice(0, 4), { ...stages[4], factor: 0.5 }] },
      'spec.stages.4.factor',
      undefined,
    ],
    [
      'a single channel',
      { ...startingChain, tolerance: { ...startingChain.tolerance, channels: 1 } },
      'spec.tolerance.channels',
      undefined,
    ],
  ])('refuses %s, naming the field', async (_, spec, field, nearest) => {
    const answer = await save(spec, 2)
    if (answer.outcome !== 'refused') throw new Error('not refused')
    expect(answer.problem.field).toBe(field)
    expect(answer.problem.nearest).toBe(nearest)
    expect(await findChainVersion(team.access('owner'), team.chainId, 3)).toBeNull()
  })

  it('refuses a link that was tampered with, or that names nothing, and says what there is', async () => {
    const tampered = linkedChain(
      { ...tapsDesign, budget: { ...tapsDesign.budget, phaseDegrees: 9 } },
      { designId: team.designId, version: 1, drawing: 'TST-LP-001', title: 'A design' },
    )
    expect(await save(tampered, 2)).toMatchObject({
      outcome: 'refused',
      problem: { code: 'link-spec-differs', field: 'stages.3.filter.link.version', nearest: 1 },
    })
    expect(await save(linked(4), 2)).toMatchObject({
      outcome: 'refused',
      problem: { code: 'link-version-not-there', nearest: 1 },
    })
  })

  it('keeps the design’s own title and drawing number, whatever a link says of them', async () => {
    beginRequest({ token: team.members.designer.token })
    const made = await createChain({ projectId: team.projectId, title: 'Named falsely', template: 'plain' })
    if (!made.ok) throw new Error(made.problem.message)
    const { chainId } = made.value
    const names = { designId: team.designId, version: 1, drawing: 'XXX-LP-999', title: 'Something else' }
    const saved = await save(linkedChain(tapsDesign, names), null, chainId)
    if (saved.outcome !== 'saved') throw new Error('not saved')
    const row = await findChainVersion(team.access('owner'), chainId, 1)
    for (const spec of [saved.version.spec, row?.spec])
      expect(spec && linksOf(spec).map(({ link }) => [link.drawing, link.title])).toEqual([['TST-LP-001', 'A design']])
    expect(JSON.stringify(row)).not.toMatch(/XXX-LP-999|Something else/)
  })

  it('leaves a trail', async () => {
    const { rows } = await pool().query(
      `select details->>'number' as number from audit where object = $1 and action = 'chain-version.save' order by id`,
      [`chain:${team.chainId}`],
    )
    expect(rows).toEqual([{ number: '1' }, { number: '2' }])
  })
})

describe('making chains', () => {
  it('begins with the template that was asked for, and a copy with the latest version', async () => {
    beginRequest({ token: team.members.designer.token })
    const made = await createChain({ projectId: team.projectId, title: 'Fast', template: 'averaging' })
    if (!made.ok) throw new Error(made.problem.message)
    expect(await findChain(team.access('owner'), made.value.chainId)).toMatchObject({
      drawingNumber: 'TST-CH-004',
      startingSpec: startingChains.averaging,
    })
    const copy = await duplicateChain({ chainId: team.chainId })
    if (!copy.ok) throw new Error(copy.problem.message)
    expect(await findChain(team.access('owner'), copy.value.chainId)).toMatchObject({
      title: 'Copy of A chain',
      startingSpec: linked(),
    })
    expect(await createChain({ projectId: team.projectId, title: 'x', template: 'other' })).toMatchObject({
      ok: false,
      problem: { field: 'template' },
    })
  })
})

describe('PUT /api/chains/[chainId]/draft', () => {
  const put = async (body: unknown, { chainId = team.chainId, type = 'application/json' } = {}) => {
    beginRequest({ token: team.members.designer.token })
    const own = new Headers(await headers())
    own.set('content-type', type)
    const address = `http://127.0.0.1:3000/api/chains/${chainId}/draft`
    const request = new Request(address, { method: 'PUT', headers: own, body: JSON.stringify(body) })
    const response = await PUT(request, { params: Promise.resolve({ chainId }) })
    return { status: response.status, body: (await response.json()) as Record<string, unknown> }
  }
  const draft = { spec: startingChain, parentNumber: 2, revision: 0 }

  it('saves, says which revision it now is, and tells an older page so', async () => {
    // What makes no chain stands on the screen too.
    const spec = { ...startingChain, kept: { fromHz: 1, toHz: 5000 } }
    expect(await put({ ...draft, spec })).toMatchObject({ status: 200, body: { outcome: 'saved', revision: 1 } })
    expect(await put(draft)).toMatchObject({ status: 409, body: { outcome: 'stale', current: { revision: 1 } } })
  })

  it.each([
    ['an unknown key', { extra: 1 }, ''],
    ['a version that is not there', { revision: 1, parentNumber: 7 }, 'parentNumber'],
    ['a negative revision', { revision: -1 }, 'revision'],
  ])('refuses %s', async (_, change, field) => {
    const refused = await put({ ...draft, ...change })
    expect(refused).toMatchObject({ status: 422, body: { code: 'not-valid', ...(field && { field }) } })
  })

  it('refuses a link whose title the database could not keep', async () => {
    const spec = linkedChain(tapsDesign, { designId: team.designId, version: 1, drawing: 'X', title: 'a\u0000b' })
    expect(await put({ ...draft, spec, revision: 1 })).toMatchObject({ status: 422 })
  })

  it('refuses another content type, more than 512 kB, and what can’t be an id', async () => {
    expect(await put(draft, { type: 'text/plain' })).toMatchObject({ status: 415 })
    expect(await put({ ...draft, padding: 'x'.repeat(524_288) })).toMatchObject({ status: 413 })
    expect(await put(draft, { chainId: '../..' })).toMatchObject({ status: 404 })
  })
})

describe('GET /api/chains/[chainId]/versions/[number]/export', () => {
  const get = async (
    query: string,
    { number = '2', chainId = team.chainId, token = team.members.integrator.token as string | null } = {},
  ) => {
    beginRequest({ token })
    const address = `http://127.0.0.1:3000/api/chains/${chainId}/versions/${number}/export?${query}`
    const request = new Request(address, { headers: new Headers(await headers()) })
    const response = await GET(request, { params: Promise.resolve({ chainId, number }) })
    return { status: response.status, headers: response.headers, text: await response.text() }
  }

  it.each([
    ['json', 'application/json; charset=utf-8', 'json'],
    ['c', 'text/x-c; charset=utf-8', 'h'],
  ] as const)('hands over %s as a download that nobody stores or guesses at', async (as, type, extension) => {
    const got = await get(`as=${as}`)
    expect(got.status).toBe(200)
    expect(got.headers.get('content-type')).toBe(type)
    expect(got.headers.get('content-disposition')).toBe(`attachment; filename="tst_ch_002_v2.${extension}"`)
    expect(got.headers.get('x-content-type-options')).toBe('nosniff')
    expect(got.headers.get('cache-control')).toBe('private, no-store')
    expect(got.headers.get('content-security-policy')).toContain("default-src 'none'")
    expect((await get(`as=${as}`)).text).toBe(got.text)
    const chain = await findChain(team.access('owner'), team.chainId)
    const version = await findChainVersion(team.access('owner'), team.chainId, 2)
    if (!chain || !version) throw new Error('lost')
    expect(chainFile({ chain, version }, { as }).text).toBe(got.text)
  })

  it('states the version that it is of', async () => {
    const file = chainFileSchema.parse(JSON.parse((await get('as=json', { number: '1' })).text))
    expect(file.version).toMatchObject({ number: 1, savedBy: 'designer', note: 'why it changed' })
    expect(file.spec).toEqual(startingChain)
  })

  it('refuses what it does not know, naming the parameter', async () => {
    const refused = await get('as=xml')
    expect(refused.status).toBe(422)
    expect(JSON.parse(refused.text)).toMatchObject({ field: 'as', nearest: 'json' })
    expect(refused.headers.get('content-disposition')).toBeNull()
  })

  it.each([
    ['owner', 200],
    ['designer', 200],
    ['reviewer', 200],
    ['integrator', 200],
    ['observer', 403],
  ] as const)('answers a member who is %s with %d', async (role: Role, status) => {
    const got = await get('as=c', { token: team.members[role].token })
    expect(got.status).toBe(status)
    if (status !== 200) expect(got.text).not.toContain('taps')
  })

  it('knows nothing of another team’s versions, nor of ones that aren’t there', async () => {
    for (const asked of [
      { token: foreign.members.owner.token },
      { number: '99' },
      { number: '01' },
      { number: '1e0' },
      { chainId: 'x' },
      { chainId: foreign.chainId },
      { chainId: team.designId },
    ])
      expect((await get('as=json', asked)).status).toBe(404)
    expect((await get('as=json', { token: null })).status).toBe(401)
  })
})

describe('the schema', () => {
  it('is served', async () => {
    const response = getSchema()
    expect(response.headers.get('content-type')).toBe('application/schema+json; charset=utf-8')
    expect(await response.json()).toMatchObject({ title: 'Polewright chain' })
    expect(renderToStaticMarkup(FormatsPage())).toContain('numbers.stages[].parts')
  })
})

describe('the pages', () => {
  const shown = async (page: Promise<unknown>) => renderToStaticMarkup((await page) as never)

  it('show a version with its figures, sheet, links and files; an observer has no files', async () => {
    const params = Promise.resolve({ chainId: team.chainId, number: '2' })
    beginRequest({ token: team.members.reviewer.token })
    const markup = await shown(ChainVersionPage({ params }))
    expect(markup).toContain('TST-LP-001 v1')
    expect(markup).toContain(`/designs/${team.designId}/versions/1`)
    expect(markup).toContain('export?as=c')
    const version = await findChainVersion(team.access('owner'), team.chainId, 2)
    expect(markup).toContain(version?.checksum)
    expect(markup).toContain('the sensor’s own noise isn’t in them')
    expect(markup).toMatch(/<dt[^>]*>Full scale<\/dt><dd>/)
    expect(markup).not.toContain('saved before stages')
    // Landmarks of one name can't be told apart: a section is named by its heading, a table by its own label.
    const named = [...markup.matchAll(/<h2[^>]*>([^<]*)<|role="region"[^>]*aria-label="([^"]*)"/g)].map(
      ([, heading, label]) => heading ?? label,
    )
    expect(named.length).toBeGreaterThan(6)
    expect(new Set(named).size).toBe(named.length)
    beginRequest({ token: team.members.observer.token })
    const observed = await shown(ChainVersionPage({ params }))
    expect(observed).not.toContain('export?as')
    expect(observed).toContain(version?.checksum)
  })

  it('say on a design’s version which chains use it', async () => {
    beginRequest({ token: team.members.observer.token })
    const params = Promise.resolve({ designId: team.designId, number: '1' })
    const markup = await shown(DesignVersionPage({ params }))
    expect(markup.replaceAll(/<[^>]*>/g, '')).toContain('Used by chain TST-CH-002, version 2')
    expect(markup).toContain(`/chains/${team.chainId}/versions/2`)
  })

  it('compare two versions: the words that differ, figures, sheets and stages', async () => {
    beginRequest({ token: team.members.observer.token })
    const compare = (query: Record<string, string>) =>
      shown(
        ChainComparePage({
          params: Promise.resolve({ chainId: team.chainId }),
          searchParams: Promise.resolve(query),
        }),
      )
    const markup = await compare({ left: '1', right: '2' })
    expect(markup).toContain('Version 1 beside version 2')
    expect(markup).toMatch(/<mark[^>]*>2\u2009kHz<\/mark>/)
    expect(markup).toMatch(/<mark[^>]*>1.2\u2009kHz<\/mark>/)
    expect(markup).toContain('Alias floor below')
    expect(markup).toMatch(/<li>Converter rate [^<]+ → [^<]+<\/li>/)
    expect(markup).toContain('Kept band, sheet, interferers and tolerance')
    // Unasked, or asked for what isn't there, it is the newest and the one that it came from.
    expect(await compare({})).toBe(markup)
    expect(await compare({ left: '99', right: 'x' })).toBe(markup)
    expect(await compare({ left: '2', right: '2' })).toContain('Version 2 beside version 2')
  })

  it('list chains beside designs, with what came of their sheets; observers can make none', async () => {
    const params = Promise.resolve({ projectId: team.projectId })
    beginRequest({ token: team.members.designer.token })
    const markup = await shown(ProjectPage({ params }))
    expect(markup).toContain('TST-CH-002')
    expect(markup).toContain('Measurement chains')
    expect(markup).toContain('New chain')
    beginRequest({ token: team.members.observer.token })
    expect(await shown(ProjectPage({ params }))).not.toContain('New chain')
  })
})
