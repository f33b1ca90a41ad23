import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest'
import { PUT } from '@/app/api/designs/[designId]/draft/route'
import { closeConnections } from '@/db/client'
import { findDraft } from '@/db/queries/drafts'
import { MOST_MEASURED_ROWS } from '@/dsp'
import { defaultSpec } from '@/lib/designs/edits'
import { beginRequest, headers } from '../helpers/next-request'
import { makeTeam, type TestTeam } from '../helpers/people'

vi.mock('next/headers', () => import('../helpers/next-request'))

let team: TestTeam
beforeAll(async () => {
  team = await makeTeam()
})
afterAll(closeConnections)

const draft = { spec: defaultSpec, parentNumber: null, revision: 0 }

async function put(body: BodyInit | null, { designId = team.designId, type = 'application/json' } = {}) {
  beginRequest({ token: team.members.designer.token })
  const own = new Headers(await headers())
  own.set('content-type', type)
  const request = new Request(`http://127.0.0.1:3000/api/designs/${designId}/draft`, {
    method: 'PUT',
    headers: own,
    body,
    // Node asks for it when the body is a stream.
    ...(body instanceof ReadableStream && { duplex: 'half' }),
  })
  const response = await PUT(request, { params: Promise.resolve({ designId }) })
  return {
    status: response.status,
    headers: response.headers,
    body: (await response.json()) as Record<string, unknown>,
  }
}

const save = (change: object) => put(JSON.stringify({ ...draft, ...change }))

describe('PUT /api/designs/[designId]/draft', () => {
  it('saves, and says which revision it now is', async () => {
    const saved = await save({})
    expect(saved).toMatchObject({ status: 200, body: { outcome: 'saved', revision: 1 } })
    expect(await save({})).toMatchObject({ status: 409, body: { outcome: 'stale', current: { revision: 1 } } })
    expect(await save({ revision: 1 })).toMatchObject({ status: 200, body: { revision: 2 } })
  })

  it('is stored by nobody on the way, framed by nobody, and read as what it says it is', async () => {
    const { headers: got } = await save({ revision: 2 })
    expect(got.get('cache-control')).toBe('private, no-store')
    expect(got.get('x-content-type-options')).toBe('nosniff')
    expect(got.get('content-security-policy')).toContain("frame-ancestors 'none'")
  })

  it.each([
    ['an unknown key', { extra: 1 }, ''],
    ['an unknown key in the spec', { spec: { ...defaultSpec, extra: 1 } }, 'spec'],
    ['another’s account', { accountId: 'x' }, ''],
    ['an order of 25', { spec: { ...defaultSpec, analog: { ...defaultSpec.analog, order: 25 } } }, 'spec.analog.order'],
    ['a rate of zero', { spec: { ...defaultSpec, sampleRateHz: 0 } }, 'spec.sampleRateHz'],
    ['a negative revision', { revision: -1 }, 'revision'],
    ['a version that is not there', { revision: 3, parentNumber: 7 }, 'parentNumber'],
  ])('refuses %s, naming the field', async (_, change, field) => {
    const refused = await save(change)
    expect(refused).toMatchObject({ status: 422, body: { code: 'not-valid', ...(field && { field }) } })
    expect(refused.headers.get('content-type')).toBe('application/problem+json')
    expect(await findDraft(team.access('designer'), team.designId)).toMatchObject({ revision: 3 })
  })

  it('takes a spec whose numbers make no filter: it stands on the screen', async () => {
    const spec = { ...defaultSpec, analog: { ...defaultSpec.analog, edgesHz: [5000] } }
    expect(await save({ spec, revision: 3 })).toMatchObject({ status: 200 })
  })

  it('keeps a measured table of the most rows in full precision', async () => {
    const rows = Array.from({ length: MOST_MEASURED_ROWS }, (_, k) => [
      (k + 1) / 7,
      -Math.abs(123.4 * Math.sin(k + 0.1)),
      -179.9 * Math.sin(2 * k + 0.3),
    ])
    const { format, sampleRateHz, budget } = defaultSpec
    const how = { method: 'fitted', upToHz: 100, order: 2 }
    const spec = { format, sampleRateHz, budget, own: { given: 'measured', name: 'long table', rows }, how }
    expect(JSON.stringify(spec).length).toBeGreaterThan(65_536)
    expect(await save({ spec, revision: 4 })).toMatchObject({ status: 200 })
    expect(await findDraft(team.access('designer'), team.designId)).toMatchObject({ spec })
  })

  it.each(['{', 'null', '[]', '""', ''])('refuses the body %j', async (body) => {
    expect(await put(body)).toMatchObject({ status: 422, body: { code: 'not-valid' } })
  })

  it('refuses another content type, such as a form of another site can send', async () => {
    for (const type of ['text/plain', 'application/x-www-form-urlencoded', 'multipart/form-data'])
      expect(await put(JSON.stringify(draft), { type })).toMatchObject({ status: 415 })
  })

  it('refuses more than 256 kB, also when the length is not announced', async () => {
    const long = JSON.stringify({ ...draft, padding: 'x'.repeat(262_144) })
    expect(await put(long)).toMatchObject({ status: 413, body: { code: 'too-large' } })
    let pulled = 0
    const endless = new ReadableStream<Uint8Array>({
      pull(controller) {
        pulled += 1
        controller.enqueue(new Uint8Array(16_384).fill(32))
        if (pulled > 1000) controller.error(new Error('nobody stopped reading'))
      },
    })
    expect(await put(endless)).toMatchObject({ status: 413 })
    expect(pulled).toBeLessThan(25)
  })

  it('answers 404 for what can’t be an id', async () => {
    for (const designId of ['1', 'x', '../..', "' or 1=1"])
      expect(await put(JSON.stringify(draft), { designId })).toMatchObject({ status: 404 })
  })
})
