import 'server-only'
import { env } from '@/lib/env'
import { AppError } from '@/lib/errors'

const loopback = /^(127\.0\.0\.1|localhost|\[::1\])(:\d+)?$/

/**
 * Whether a write comes from our own pages. Next compares Origin with Host for actions, but lets a request without Origin pass and doesn't
 * look at route handlers at all; this check is for both, and a request that says nothing of where it comes from is refused.
 */
export function isFromOurPages(headers: Pick<Headers, 'get'>): boolean {
  const site = headers.get('sec-fetch-site')
  // "same-site" would be a neighbouring host, "none" a typed address: neither sends our forms.
  if (site !== null && site !== 'same-origin') return false
  const origin = headers.get('origin')
  if (origin === null) return site === 'same-origin'
  return origin === env().APP_ORIGIN || isSameLoopback(origin, headers.get('host'))
}

/** On the machine itself the app answers to 127.0.0.1 and to localhost. A foreign name that resolves here matches neither pattern. */
function isSameLoopback(origin: string, host: string | null): boolean {
  if (host === null || !URL.canParse(env().APP_ORIGIN)) return false
  return loopback.test(new URL(env().APP_ORIGIN).host) && loopback.test(host) && origin === `http://${host}`
}

export function demandOurPages(headers: Pick<Headers, 'get'>): void {
  if (!isFromOurPages(headers))
    throw new AppError('cross-site', 'This request did not come from a page of Polewright, so nothing was done.')
}
