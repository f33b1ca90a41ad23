import { NextResponse, type NextRequest } from 'next/server'
import { env } from '@/lib/env'
import { contentSecurityPolicy, pageHeaders } from '@/lib/security-headers'

/**
 * Gives each page its headers and a fresh nonce. It decides nothing about who may see what: pages, actions and routes do that themselves.
 */
export function proxy(request: NextRequest): NextResponse {
  const { APP_ORIGIN, NODE_ENV } = env()
  const isSecure = APP_ORIGIN.startsWith('https:')
  const nonce = Buffer.from(crypto.getRandomValues(new Uint8Array(18))).toString('base64')
  const policy = contentSecurityPolicy(nonce, { isDevelopment: NODE_ENV === 'development', isSecure })

  // Next reads the nonce for its own scripts from the policy on the request.
  const headers = new Headers(request.headers)
  headers.set('content-security-policy', policy)
  headers.set('x-nonce', nonce)
  const response = NextResponse.next({ request: { headers } })
  response.headers.set('content-security-policy', policy)
  for (const [name, value] of Object.entries(pageHeaders({ isSecure }))) response.headers.set(name, value)
  return response
}

export const config = {
  // Not the API: bodies on a matched path are cut at 10 MB without a word, and its wrapper sets headers of its own. Not the built files.
  matcher: ['/((?!api/|_next/static/|_next/image).*)'],
}
