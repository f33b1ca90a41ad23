import 'server-only'
import { cookies } from 'next/headers'
import { env } from '@/lib/env'

/*
 * The session's cookie. Over https its name begins with __Host-, which browsers accept only with Secure, without Domain and for the path /,
 * so that no neighbouring host can plant one. Plain http is for loopback, where browsers refuse that name.
 */

const isSecure = () => env().APP_ORIGIN.startsWith('https:')
const sessionCookieName = () => (isSecure() ? '__Host-polewright' : 'polewright')

export async function readSessionCookie(): Promise<string | null> {
  const value = (await cookies()).get(sessionCookieName())?.value
  return value === undefined || value === '' ? null : value
}

/** Only in actions and route handlers: while a page renders, cookies can't be set. */
export async function writeSessionCookie(token: string, expires: Date): Promise<void> {
  const jar = await cookies()
  jar.set(sessionCookieName(), token, { httpOnly: true, secure: isSecure(), sameSite: 'lax', path: '/', expires })
}

export async function clearSessionCookie(): Promise<void> {
  await writeSessionCookie('', new Date(0))
}
