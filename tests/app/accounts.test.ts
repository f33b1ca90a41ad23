import { afterAll, beforeEach, describe, expect, it, vi } from 'vitest'
import { askReset, resetPassword, signIn, signOut, signUp } from '@/app/(account)/actions'
import { changePassword, endOtherSessions, endSession } from '@/app/account/actions'
import { closeConnections, pool } from '@/db/client'
import { validateSession } from '@/lib/auth/sessions'
import type { Mail } from '@/lib/mail/transport'
import { beginRequest, runLater, setCookie } from '../helpers/next-request'

vi.mock('next/headers', () => import('../helpers/next-request'))
vi.mock('next/server', () => import('../helpers/next-request'))

const sent: Mail[] = []
const mail = vi.hoisted(() => ({ broken: false }))
vi.mock('@/lib/mail/transport', () => ({
  sendMail: (one: Mail) => {
    if (mail.broken) return Promise.reject(new Error('The mail server is away.'))
    sent.push(one)
    return Promise.resolve()
  },
}))

afterAll(closeConnections)
beforeEach(async () => {
  sent.length = 0
  mail.broken = false
  await pool().query('delete from rate_limits')
  beginRequest()
})

const good = 'pebble-orchard-nine'
let count = 0
const freshEmail = () => `person-${++count}@company.example`

/** Where an action went on to, from the error that Next's redirect throws. */
async function goesTo(action: Promise<unknown>): Promise<string> {
  const thrown: unknown = await action.then(
    (answer) => {
      throw new Error(`did not redirect but answered ${JSON.stringify(answer)}`)
    },
    (error: unknown) => error,
  )
  const digest = typeof thrown === 'object' && thrown !== null && 'digest' in thrown ? String(thrown.digest) : ''
  if (!digest.startsWith('NEXT_REDIRECT')) throw thrown
  return digest.split(';')[2] ?? ''
}

async function newAccount() {
  const email = freshEmail()
  beginRequest()
  expect(await goesTo(signUp({ email, label: 'designer, test bench', password: good }))).toBe('/projects')
  return { email, token: setCookie()?.value ?? '' }
}

const tokenIn = (text: string) => /\/reset#([A-Za-z0-9_-]+)/.exec(text)?.[1] ?? ''

async function mailedToken(email: string): Promise<string> {
  beginRequest()
  expect(await askReset({ email })).toEqual({ ok: true, value: { minutes: 30 } })
  await runLater()
  return tokenIn(sent.at(-1)?.text ?? '')
}

describe('signing up', () => {
  it('makes an account with a team of its own, which it owns, and signs in', async () => {
    const { email, token } = await newAccount()
    const session = await validateSession(token)
    expect(session?.account).toMatchObject({ email, label: 'designer, test bench' })
    const { rows } = await pool().query(
      'select m.role, t.name from memberships m join teams t on t.id = m.team_id where m.account_id = $1',
      [session?.account.id],
    )
    expect(rows).toEqual([{ role: 'owner', name: 'Team of designer, test bench' }])
  })

  it('stores argon2id with the stated cost, never the password', async () => {
    const { email } = await newAccount()
    const { rows } = await pool().query<{ password_hash: string }>(
      'select password_hash from credentials c join accounts a on a.id = c.account_id where a.email = $1',
      [email],
    )
    expect(rows[0]?.password_hash).toMatch(/^\$argon2id\$v=19\$m=19456,t=2,p=1\$/)
  })

  it('is all or nothing: a refused address leaves no team behind', async () => {
    const { email } = await newAccount()
    const teams = async () => (await pool().query('select count(*)::int as n from teams')).rows[0]
    const before = await teams()
    beginRequest()
    expect(await signUp({ email: email.toUpperCase(), label: 'x', password: good })).toMatchObject({
      ok: false,
      problem: { code: 'name-taken', field: 'email' },
    })
    expect(await teams()).toEqual(before)
  })

  it.each([
    'password1',
    '12345678',
    'qwertyuiop',
    'P@ssw0rd!',
    'Summer2026!',
    'aaaaaaaaaa',
    'abcdefghijkl',
    'company2026',
    'polewright1',
  ])('refuses the common password %s beside its field', async (password) => {
    expect(await signUp({ email: freshEmail(), label: 'x', password })).toMatchObject({
      ok: false,
      problem: { code: 'weak-password', field: 'password' },
    })
  })

  it('refuses the e-mail address as the password', async () => {
    const email = freshEmail()
    expect(await signUp({ email, label: 'x', password: email })).toMatchObject({
      ok: false,
      problem: { code: 'weak-password' },
    })
  })

  it.each([
    ['seven characters', 'xk3&vbq', false],
    ['eight characters', 'xk3&vbqz', true],
    ['no digits or capitals', 'velvetharbour', true],
    ['64 characters', 'xk3vbqzmp8'.repeat(6) + 'abcd', true],
    ['256 bytes', 'xk3vbqzmp8'.repeat(25) + 'abcdef', true],
    ['257 bytes', 'xk3vbqzmp8'.repeat(25) + 'abcdefg', false],
    ['letters of any script', 'мостик-ветер-9', true],
  ])('takes passwords by length alone: %s', async (_, password, taken) => {
    const answer = await signUp({ email: freshEmail(), label: 'x', password }).catch(() => 'signed up')
    expect(answer === 'signed up').toBe(taken)
    if (!taken) expect(answer).toMatchObject({ ok: false, problem: { field: 'password' } })
  })

  it('refuses unknown keys', async () => {
    expect(await signUp({ email: freshEmail(), label: 'x', password: good, role: 'owner' })).toMatchObject({
      ok: false,
      problem: { code: 'not-valid' },
    })
  })
})

describe('signing in', () => {
  it('gives a new token each time, in a cookie that scripts can not read', async () => {
    const { email, token } = await newAccount()
    beginRequest()
    expect(await goesTo(signIn({ email: ` ${email.toUpperCase()} `, password: good }))).toBe('/projects')
    const cookie = setCookie()
    expect(cookie).toMatchObject({ httpOnly: true, sameSite: 'lax', path: '/', secure: false })
    expect(cookie?.value).toMatch(/^[A-Za-z0-9_-]{43}$/)
    expect(cookie?.value).not.toBe(token)
  })

  it('ends the session that the browser had before', async () => {
    const { email, token } = await newAccount()
    beginRequest({ token })
    await goesTo(signIn({ email, password: good }))
    expect(await validateSession(token)).toBeNull()
    expect(await validateSession(setCookie()?.value ?? '')).not.toBeNull()
  })

  it('answers the same for an unknown address and for a wrong password', async () => {
    const { email } = await newAccount()
    const wrong = await signIn({ email, password: 'not this one' })
    const unknown = await signIn({ email: 'nobody@company.example', password: 'not this one' })
    expect(wrong).toEqual(unknown)
    expect(wrong).toMatchObject({ ok: false, problem: { code: 'wrong-credentials' } })
  })

  it('takes the same work for an unknown address as for a wrong password', async () => {
    const { email } = await newAccount()
    const once = async (address: string): Promise<number> => {
      await pool().query('delete from rate_limits')
      const start = performance.now()
      await signIn({ email: address, password: 'not this one' })
      return performance.now() - start
    }
    const known: number[] = []
    const unknown: number[] = []
    // Taken in turn, so that whatever else this machine does slows both alike.
    for (let round = 0; round < 11; round += 1) {
      known.push(await once(email))
      unknown.push(await once(freshEmail()))
    }
    const median = (times: number[]) => times.sort((one, other) => one - other)[5] ?? 0
    // Hashing is by far the most of it: without it the answer would come ten times as fast.
    expect(median(unknown)).toBeGreaterThan(median(known) / 2)
    expect(median(unknown)).toBeLessThan(median(known) * 2)
  })

  it.each([
    ['/designs/1?view=log', '/designs/1?view=log'],
    ['//evil.example', '/projects'],
    ['/\\evil.example', '/projects'],
    ['https://evil.example/', '/projects'],
    ['/a\\b', '/projects'],
    ['javascript:alert(1)', '/projects'],
  ])('goes on to a path of ours alone: %s', async (next, expected) => {
    const { email } = await newAccount()
    beginRequest()
    expect(await goesTo(signIn({ email, password: good, next }))).toBe(expected)
  })

  it('is limited for an account, from wherever it is tried, and known again after the wait', async () => {
    const { email } = await newAccount()
    for (let attempt = 1; attempt <= 10; attempt += 1) {
      beginRequest({ headers: { 'x-forwarded-for': `198.51.100.${attempt}` } })
      expect(await signIn({ email, password: 'not this one' })).toMatchObject({
        problem: { code: 'wrong-credentials' },
      })
    }
    beginRequest({ headers: { 'x-forwarded-for': '198.51.100.99' } })
    expect(await signIn({ email, password: good })).toMatchObject({ ok: false, problem: { code: 'too-many' } })
    await pool().query('update rate_limits set expire = 1')
    expect(await goesTo(signIn({ email, password: good }))).toBe('/projects')
  })

  it('is limited for an address on the network, whatever accounts are tried', async () => {
    const from = { 'x-forwarded-for': '203.0.113.7' }
    // The 60 allowed failures, counted without the hashing that each takes.
    beginRequest({ headers: from })
    await signIn({ email: freshEmail(), password: 'not this one' })
    await pool().query(`update rate_limits set points = 60 where key like 'sign-in-address:%'`)
    expect(await signIn({ email: freshEmail(), password: 'not this one' })).toMatchObject({
      problem: { code: 'too-many' },
    })
    beginRequest({ headers: { 'x-forwarded-for': '203.0.113.8' } })
    expect(await signIn({ email: freshEmail(), password: 'not this one' })).toMatchObject({
      problem: { code: 'wrong-credentials' },
    })
  })

  it('that succeeds counts for nothing: an office behind one address goes on', async () => {
    const { email } = await newAccount()
    for (let round = 0; round < 12; round += 1) {
      beginRequest()
      await goesTo(signIn({ email, password: good }))
    }
    const { rows } = await pool().query(`select points from rate_limits where key like 'sign-in%'`)
    expect(rows.every((row: { points: number }) => row.points === 0)).toBe(true)
  })

  it('keeps no address in the limiter’s table', async () => {
    beginRequest({ headers: { 'x-forwarded-for': '203.0.113.9' } })
    await signIn({ email: 'readable@company.example', password: 'not this one' })
    const { rows } = await pool().query('select key from rate_limits')
    expect(JSON.stringify(rows)).not.toMatch(/readable|203\.0/)
  })
})

describe('signing out', () => {
  it('ends the session on the server and empties the cookie', async () => {
    const { token } = await newAccount()
    beginRequest({ token })
    expect(await goesTo(signOut({}))).toBe('/')
    expect(setCookie()).toMatchObject({ value: '', expires: new Date(0) })
    expect(await validateSession(token)).toBeNull()
  })
})

describe('a new password by mail', () => {
  it('works by a link whose token stands behind #, hashed in the database', async () => {
    const { email } = await newAccount()
    const token = await mailedToken(email)
    expect(token).toMatch(/^[A-Za-z0-9_-]{43}$/)
    const [letter] = sent
    expect(letter?.to).toBe(email)
    expect(letter?.html).toContain(`/reset#${token}`)
    expect(letter?.text).not.toMatch(/\?[^\s]*token/)
    const { rows } = await pool().query('select * from password_resets')
    expect(JSON.stringify(rows)).not.toContain(token)
  })

  it('sets it, ends every session, and lets in with the new one alone', async () => {
    const { email, token: session } = await newAccount()
    const token = await mailedToken(email)
    beginRequest({ token: session })
    expect(await goesTo(resetPassword({ token, password: 'walnut-ferry-eleven' }))).toBe('/sign-in?after=reset')
    expect(await validateSession(session)).toBeNull()
    expect(await signIn({ email, password: good })).toMatchObject({ ok: false })
    expect(await goesTo(signIn({ email, password: 'walnut-ferry-eleven' }))).toBe('/projects')
    await runLater()
    expect(sent.at(-1)?.subject).toMatch(/was changed/)
  })

  it('works once, also when the link is used twice at the same moment', async () => {
    const { email } = await newAccount()
    const token = await mailedToken(email)
    const both = await Promise.all(
      ['walnut-ferry-eleven', 'walnut-ferry-twelve'].map((password) =>
        resetPassword({ token, password }).catch(() => 'done'),
      ),
    )
    expect(both.filter((one) => one === 'done')).toHaveLength(1)
    expect(await resetPassword({ token, password: 'walnut-ferry-thirteen' })).toMatchObject({
      ok: false,
      problem: { code: 'link-spent', field: 'token' },
    })
  })

  it('is void after 30 minutes', async () => {
    const { email } = await newAccount()
    const token = await mailedToken(email)
    const { rows } = await pool().query<{ minutes: number }>(
      'select extract(epoch from max(expires_at) - now())::float / 60 as minutes from password_resets',
    )
    expect(rows[0]?.minutes).toBeGreaterThan(29)
    expect(rows[0]?.minutes).toBeLessThanOrEqual(30)
    await pool().query(`update password_resets set expires_at = now() - interval '1 second'`)
    expect(await resetPassword({ token, password: 'walnut-ferry-eleven' })).toMatchObject({
      problem: { code: 'link-spent' },
    })
  })

  it('voids the earlier links of the account once one was used', async () => {
    const { email } = await newAccount()
    const first = await mailedToken(email)
    const second = await mailedToken(email)
    await goesTo(resetPassword({ token: second, password: 'walnut-ferry-eleven' }))
    expect(await resetPassword({ token: first, password: 'walnut-ferry-twelve' })).toMatchObject({
      problem: { code: 'link-spent' },
    })
  })

  it('keeps the link when the password was too common', async () => {
    const { email } = await newAccount()
    const token = await mailedToken(email)
    expect(await resetPassword({ token, password: 'password1' })).toMatchObject({ problem: { code: 'weak-password' } })
    expect(await goesTo(resetPassword({ token, password: 'walnut-ferry-eleven' }))).toBe('/sign-in?after=reset')
  })

  it('answers an unknown address the same, and does the telling work only afterwards', async () => {
    const { email } = await newAccount()
    beginRequest()
    const known = await askReset({ email })
    expect(sent).toEqual([])
    expect(await runLater()).toBe(1)
    beginRequest()
    const unknown = await askReset({ email: 'nobody@company.example' })
    expect(await runLater()).toBe(1)
    expect(unknown).toEqual(known)
    expect(sent.map(({ to }) => to)).toEqual([email])
  })

  it('a mail server that is away changes nothing of the answer', async () => {
    const { email } = await newAccount()
    mail.broken = true
    beginRequest()
    expect(await askReset({ email })).toEqual({ ok: true, value: { minutes: 30 } })
    await expect(runLater()).resolves.toBe(1)
  })

  it('can be asked for four times an hour', async () => {
    const email = freshEmail()
    for (let round = 0; round < 4; round += 1) expect(await askReset({ email })).toMatchObject({ ok: true })
    expect(await askReset({ email })).toMatchObject({ ok: false, problem: { code: 'too-many' } })
  })
})

describe('one’s own account', () => {
  it('changes its password only with the present one; this session gets a new token, the others end', async () => {
    const { email, token } = await newAccount()
    beginRequest()
    await goesTo(signIn({ email, password: good }))
    const other = setCookie()?.value ?? ''
    beginRequest({ token })
    expect(await changePassword({ current: 'not this one', password: 'walnut-ferry-eleven' })).toMatchObject({
      problem: { code: 'wrong-credentials', field: 'current' },
    })
    expect(await validateSession(token)).not.toBeNull()
    expect(await changePassword({ current: good, password: 'walnut-ferry-eleven' })).toEqual({ ok: true, value: null })
    expect(await validateSession(token)).toBeNull()
    expect(await validateSession(other)).toBeNull()
    expect(await validateSession(setCookie()?.value ?? '')).not.toBeNull()
  })

  it('ends another of its sessions, or all others, but nobody else’s', async () => {
    const mine = await newAccount()
    const foreign = await newAccount()
    beginRequest()
    await goesTo(signIn({ email: mine.email, password: good }))
    const second = setCookie()?.value ?? ''
    const idOf = async (token: string) => (await validateSession(token))?.id ?? ''
    beginRequest({ token: mine.token })
    expect(await endSession({ session: await idOf(foreign.token) })).toMatchObject({ problem: { code: 'not-found' } })
    expect(await validateSession(foreign.token)).not.toBeNull()
    expect(await endSession({ session: await idOf(second) })).toMatchObject({ ok: true })
    expect(await validateSession(second)).toBeNull()
    beginRequest({ token: mine.token })
    expect(await endOtherSessions({})).toMatchObject({ ok: true })
    expect(await validateSession(mine.token)).not.toBeNull()
    expect(await validateSession(foreign.token)).not.toBeNull()
  })
})

describe('the trail', () => {
  it('has a row for each sign-up, sign-in and reset', async () => {
    const { email } = await newAccount()
    await goesTo(signIn({ email, password: good }))
    const token = await mailedToken(email)
    await goesTo(resetPassword({ token, password: 'walnut-ferry-eleven' }))
    const { rows } = await pool().query<{ action: string }>(
      `select action from audit where object = (select 'account:' || id from accounts where email = $1) order by id`,
      [email],
    )
    expect(rows.map(({ action }) => action)).toEqual([
      'account.sign-up',
      'account.sign-in',
      'account.ask-reset',
      'account.reset',
    ])
  })
})
