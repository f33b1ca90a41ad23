import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest'
import * as z from 'zod'
import { GET } from '@/app/api/designs/[designId]/versions/[number]/export/route'
import { closeConnections } from '@/db/client'
import { lockDesign } from '@/db/queries/designs'
import { inTransaction } from '@/db/queries/transaction'
import { findVersion, insertVersion } from '@/db/queries/versions'
import { designFromSpec, type DesignSpec } from '@/dsp'
import { checksumOfStored, coefficientsOf, isStoredTaps } from '@/lib/designs/coefficients'
import { defaultSpec } from '@/lib/designs/edits'
import { saveVersion } from '@/lib/designs/save-version'
import type { Role } from '@/lib/designs/types'
import { exportFile } from '@/lib/exports'
import { coefficientSetSchema } from '@/lib/exports/json'
import { firDesign } from '../helpers/export-sources'
import { beginRequest, headers } from '../helpers/next-request'
import { makeTeam, type TestTeam } from '../helpers/people'

vi.mock('next/headers', () => import('../helpers/next-request'))

let team: TestTeam
let foreign: TestTeam

/** Steep and low: no b/a holds it. */
const steep: DesignSpec = { ...defaultSpec, analog: { ...defaultSpec.analog, order: 12, edgesHz: [12] } }

const save = (spec: DesignSpec, parentNumber: number | null) =>
  inTransaction(async (tx) => {
    const access = team.access('designer')
    const design = await lockDesign(tx, access, team.designId)
    if (!design) throw new Error('no design')
    const input = { designId: team.designId, spec, note: 'a note', parentNumber }
    return saveVersion({ tx, access, design, input, coefficients: coefficientsOf(designFromSpec(spec)) })
  })

beforeAll(async () => {
  team = await makeTeam()
  foreign = await makeTeam()
  await save(defaultSpec, null)
  await save(steep, 1)
})
afterAll(closeConnections)

async function get(
  query: string,
  {
    number = '1',
    designId = team.designId,
    token = team.members.integrator.token,
  }: { number?: string; designId?: string; token?: string | null } = {},
) {
  beginRequest({ token })
  const request = new Request(`http://127.0.0.1:3000/api/designs/${designId}/versions/${number}/export?${query}`, {
    headers: new Headers(await headers()),
  })
  const response = await GET(request, { params: Promise.resolve({ designId, number }) })
  return { status: response.status, headers: response.headers, text: await response.text() }
}

const problem = (text: string): unknown => JSON.parse(text)

describe('GET /api/designs/[designId]/versions/[number]/export', () => {
  it.each([
    ['json', 'application/json; charset=utf-8', 'json'],
    ['csv', 'text/csv; charset=utf-8; header=present', 'csv'],
    ['c', 'text/x-c; charset=utf-8', 'h'],
    ['numpy', 'text/x-python; charset=utf-8', 'py'],
    ['octave', 'text/x-octave; charset=utf-8', 'm'],
  ] as const)('hands over %s as a download that nobody stores or guesses at', async (format, type, extension) => {
    const got = await get(`format=${format}`)
    expect(got.status).toBe(200)
    expect(got.headers.get('content-type')).toBe(type)
    expect(got.headers.get('content-disposition')).toMatch(
      new RegExp(`^attachment; filename="tst_lp_\\d{3}_v1\\.${extension}"$`),
    )
    expect(got.headers.get('x-content-type-options')).toBe('nosniff')
    expect(got.headers.get('cache-control')).toBe('private, no-store')
    expect(got.headers.get('content-security-policy')).toContain("default-src 'none'")
  })

  it('gives the same bytes each time, and those of the panel’s preview', async () => {
    const query = 'format=c&structure=ratio&number=float&feedback=add&literals=hexadecimal&name=deck_z'
    const [first, second] = [await get(query), await get(query)]
    expect(second.text).toBe(first.text)
    const version = await findVersion(team.access('owner'), team.designId, 1)
    if (!version) throw new Error('no version')
    const design = { drawingNumber: 'TST-LP-001', title: 'A design', projectName: 'A project' }
    const previewed = exportFile(
      { design, version, kept: coefficientsOf(designFromSpec(version.spec)) },
      { format: 'c', structure: 'ratio', number: 'float', feedback: 'add', literals: 'hexadecimal', name: 'deck_z' },
    )
    expect(first.text).toBe(previewed.text)
  })

  it('carries the numbers that were kept, not what this engine would compute today', async () => {
    const fresh = coefficientsOf(designFromSpec(defaultSpec))
    const kept = {
      ...fresh,
      sections: fresh.sections.map((section) => ({ ...section, a1: section.a1 * (1 + 2 ** -40) })),
    }
    const checksum = checksumOfStored(kept)
    await inTransaction(async (tx) => {
      await lockDesign(tx, team.access('designer'), team.designId)
      await insertVersion(tx, team.access('designer'), {
        designId: team.designId,
        number: 3,
        parentNumber: 2,
        note: 'of an earlier engine',
        spec: defaultSpec,
        coefficients: kept,
        checksum,
        engineVersion: '0.9.0',
      })
    })
    const file = coefficientSetSchema.parse(JSON.parse((await get('format=json', { number: '3' })).text))
    if (file.coefficients.structure !== 'sections') throw new Error('Sections were asked for.')
    expect(file.coefficients.sections).toEqual(kept.sections)
    expect(file.coefficients.sections).not.toEqual(fresh.sections)
    expect(checksumOfStored(file.kept)).toBe(checksum)
    expect(file.version).toMatchObject({ number: 3, engine: '0.9.0', savedBy: 'designer' })
  })

  it('refuses b/a that doesn’t hold the filter, with the reason and what works', async () => {
    const refused = await get('format=json&structure=ratio', { number: '2' })
    expect(refused.status).toBe(422)
    expect(refused.headers.get('content-type')).toBe('application/problem+json')
    expect(problem(refused.text)).toMatchObject({
      code: 'ratio-badly-conditioned',
      field: 'structure',
      nearest: 'sections',
    })
    expect((await get('format=json&structure=sections', { number: '2' })).status).toBe(200)
  })

  it('hands the taps of an FIR filter over unasked, and nothing that they are not', async () => {
    await save(firDesign(), 3)
    const got = await get('format=json', { number: '4' })
    expect(got.status).toBe(200)
    const file = coefficientSetSchema.parse(JSON.parse(got.text))
    const kept = coefficientsOf(designFromSpec(firDesign()))
    if (!isStoredTaps(kept)) throw new Error('Taps were stated.')
    expect(file.coefficients).toMatchObject({ structure: 'taps', taps: kept.taps })
    expect(checksumOfStored(file.kept)).toBe(file.checksum.hex)
    for (const [query, field, nearest] of [
      ['structure=sections', 'structure', 'taps'],
      ['structure=ratio', 'structure', 'taps'],
      ['feedback=add', 'feedback', undefined],
    ] as const) {
      const refused = await get(`format=json&${query}`, { number: '4' })
      expect(refused.status).toBe(422)
      const said = z.object({ field: z.string(), nearest: z.string().optional() }).parse(problem(refused.text))
      expect([said.field, said.nearest]).toEqual([field, nearest])
    }
    const taps = await get('format=json&structure=taps')
    expect([taps.status, problem(taps.text)]).toEqual([422, expect.objectContaining({ nearest: 'sections' })])
  })

  it.each([
    ['', 'format'],
    ['format=xml', 'format'],
    ['format=json&structure=parallel', 'structure'],
    ['format=json&number=q15', 'number'],
    ['format=json&feedback=minus', 'feedback'],
    ['format=json&format=csv', 'format'],
    ['format=json&team=1', 'team'],
    ['format=c&name=a%22%0d%0aset-cookie', 'name'],
    ['format=c&name=..%2F..%2Fetc', 'name'],
  ])('refuses ?%s, naming the parameter', async (query, field) => {
    const refused = await get(query)
    expect(refused.status).toBe(422)
    expect(problem(refused.text)).toMatchObject({ field })
    expect(refused.headers.get('content-disposition')).toBeNull()
  })

  it.each([
    ['owner', 200],
    ['designer', 200],
    ['reviewer', 200],
    ['integrator', 200],
    ['observer', 403],
  ] as const)('answers a member who is %s with %d', async (role: Role, status) => {
    const got = await get('format=json', { token: team.members[role].token })
    expect(got.status).toBe(status)
    if (status !== 200) expect(got.text).not.toContain('b0')
  })

  it('knows nothing of another team’s versions, nor of ones that aren’t there', async () => {
    for (const asked of [
      { token: foreign.members.owner.token },
      { number: '99' },
      { number: '0' },
      { number: '1e0' },
      { number: '01' },
      { number: '-1' },
      { number: '1.0' },
      { number: '99999999999999999999' },
      { designId: 'x' },
      { designId: foreign.designId },
    ]) {
      const got = await get('format=json', asked)
      expect(got.status).toBe(404)
      expect(got.text).not.toContain('b0')
    }
    expect((await get('format=json', { token: null })).status).toBe(401)
  })
})
