import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { beginRequest, setCookie } from '../helpers/next-request'

vi.mock('next/headers', () => import('../helpers/next-request'))

async function write(origin: string) {
  vi.resetModules()
  process.env.APP_ORIGIN = origin
  const { writeSessionCookie } = await import('@/lib/auth/cookies')
  await writeSessionCookie('a-token', new Date('2030-01-01'))
}

describe('the session’s cookie', () => {
  const before = process.env.APP_ORIGIN
  beforeEach(() => beginRequest())
  afterEach(() => {
    process.env.APP_ORIGIN = before
  })

  it('is bound to this host alone over https', async () => {
    await write('https://polewright.example')
    expect(setCookie('__Host-polewright')).toEqual({
      value: 'a-token',
      httpOnly: true,
      secure: true,
      sameSite: 'lax',
      path: '/',
      expires: new Date('2030-01-01'),
    })
    expect(setCookie('polewright')).toBeUndefined()
  })

  it('has a plain name over http on loopback, where browsers refuse the other', async () => {
    await write('http://127.0.0.1:3000')
    expect(setCookie('polewright')).toMatchObject({ httpOnly: true, secure: false, sameSite: 'lax', path: '/' })
    expect(setCookie('__Host-polewright')).toBeUndefined()
  })
})
