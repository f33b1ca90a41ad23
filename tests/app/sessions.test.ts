import { afterAll, describe, expect, it } from 'vitest'
import { closeConnections, pool } from '@/db/client'
import {
  ABSOLUTE_DAYS,
  createSession,
  endSession,
  IDLE_DAYS,
  listSessions,
  rotateSession,
  sweepSessions,
  validateSession,
} from '@/lib/auth/sessions'
import { hashToken } from '@/lib/auth/tokens'
import { makeAccount } from '../helpers/people'

afterAll(closeConnections)

const rowOf = async (token: string) =>
  (
    await pool().query<{ idle: number; absolute: number }>(
      `select extract(epoch from expires_at - now())::float / 86400 as idle,
              extract(epoch from absolute_expires_at - now())::float / 86400 as absolute
       from sessions where id = $1`,
      [hashToken(token)],
    )
  ).rows[0]

/** Lets time pass for a session, by moving its ends towards us. */
const age = (token: string, days: number) =>
  pool().query(
    `update sessions set expires_at = expires_at - $2 * interval '1 day', absolute_expires_at = absolute_expires_at - $2 * interval '1 day' where id = $1`,
    [hashToken(token), days],
  )

describe('a session', () => {
  it('has a token of 256 bits that the database does not know', async () => {
    const { id } = await makeAccount()
    const tokens = await Promise.all(Array.from({ length: 20 }, () => createSession(id, '')))
    const values = new Set(tokens.map(({ token }) => token))
    expect(values.size).toBe(20)
    for (const token of values) expect(Buffer.from(token, 'base64url')).toHaveLength(32)
    const { rows } = await pool().query('select * from sessions where user_id = $1', [id])
    for (const token of values) expect(JSON.stringify(rows)).not.toContain(token)
  })

  it('is not opened by its stored id', async () => {
    const { token } = await makeAccount()
    expect(await validateSession(hashToken(token))).toBeNull()
    expect(await validateSession(`${token}x`)).toBeNull()
    expect(await validateSession('')).toBeNull()
  })

  it('ends after a week without use', async () => {
    const { token } = await makeAccount()
    await age(token, IDLE_DAYS + 0.01)
    expect(await validateSession(token)).toBeNull()
    expect(await rowOf(token)).toBeUndefined()
  })

  it('lives on with use, its idle end moving and its absolute one standing', async () => {
    const { token } = await makeAccount()
    await age(token, 5)
    expect(await validateSession(token)).not.toBeNull()
    const row = await rowOf(token)
    expect(row?.idle).toBeCloseTo(IDLE_DAYS, 1)
    expect(row?.absolute).toBeCloseTo(ABSOLUTE_DAYS - 5, 1)
  })

  it('ends after thirty days, however much it is used', async () => {
    const { token } = await makeAccount()
    for (let day = 0; day < ABSOLUTE_DAYS - 2; day += 4) {
      expect(await validateSession(token)).not.toBeNull()
      await age(token, 4)
    }
    const row = await rowOf(token)
    expect(row?.idle).toBeLessThanOrEqual(row?.absolute ?? 0)
    await age(token, 3)
    expect(await validateSession(token)).toBeNull()
  })

  it('is dead once ended', async () => {
    const { token } = await makeAccount()
    await endSession(token)
    expect(await validateSession(token)).toBeNull()
  })

  it('changes its token by rotation and keeps its absolute end, also late in its life', async () => {
    const { token } = await makeAccount()
    // As if it had been used all along: only its absolute end is near.
    await pool().query(
      `update sessions set expires_at = now() + interval '1 day', absolute_expires_at = now() + interval '2 days' where id = $1`,
      [hashToken(token)],
    )
    const session = await validateSession(token)
    if (!session) throw new Error('ended')
    const next = await rotateSession(session, '')
    expect(await validateSession(token)).toBeNull()
    expect(await validateSession(next.token)).not.toBeNull()
    expect((await rowOf(next.token))?.absolute).toBeCloseTo(2, 1)
    expect((await rowOf(next.token))?.idle).toBeCloseTo(2, 1)
  })

  it('carries no secret of its account', async () => {
    const { token } = await makeAccount()
    const session = await validateSession(token)
    expect(Object.keys(session?.account ?? {}).sort()).toEqual(['email', 'id', 'label'])
  })

  it('is listed for its own account until it ends', async () => {
    const { id, token } = await makeAccount()
    const second = await createSession(id, 'another browser')
    expect((await listSessions(id)).map(({ agent }) => agent)).toEqual(['another browser', 'test browser'])
    await age(second.token, IDLE_DAYS + 1)
    expect(await listSessions(id)).toHaveLength(1)
    await sweepSessions()
    expect(await rowOf(second.token)).toBeUndefined()
    expect(await rowOf(token)).toBeDefined()
  })
})
