/*
 * Stands in for next/headers and for `after` of next/server in tests that call actions and routes without a server: one request at a time,
 * its headers and cookies set by the test. Use it as
 *   vi.mock('next/headers', () => import('../helpers/next-request'))
 *   vi.mock('next/server', () => import('../helpers/next-request'))
 */

interface SetCookie {
  readonly value: string
  readonly httpOnly?: boolean
  readonly secure?: boolean
  readonly sameSite?: string
  readonly path?: string
  readonly expires?: Date
}

interface TestRequest {
  headers: Headers
  cookies: Map<string, string>
  set: Map<string, SetCookie>
  later: (() => unknown)[]
}

// On the global object: vi.mock may load this file a second time.
const holder = globalThis as typeof globalThis & { testRequest?: TestRequest }

export const ORIGIN = 'http://127.0.0.1:3000'
const ownPage = {
  origin: ORIGIN,
  'sec-fetch-site': 'same-origin',
  host: '127.0.0.1:3000',
  'user-agent': 'test browser',
}

const request = (): TestRequest =>
  (holder.testRequest ??= { headers: new Headers(ownPage), cookies: new Map(), set: new Map(), later: [] })

/** Begins a request from one of our own pages; `headers` overrule, null takes one away. */
export function beginRequest({
  token,
  headers = {},
}: { token?: string | null | undefined; headers?: Record<string, string | null> } = {}): void {
  const own = new Headers(ownPage)
  for (const [name, value] of Object.entries(headers)) {
    if (value === null) own.delete(name)
    else own.set(name, value)
  }
  const jar = new Map<string, string>()
  if (token !== undefined && token !== null) jar.set('polewright', token)
  holder.testRequest = { headers: own, cookies: jar, set: new Map(), later: [] }
}

/** What the request's answer set. */
export const setCookie = (name = 'polewright'): SetCookie | undefined => request().set.get(name)

/** Does what was put off until the answer was out. */
export async function runLater(): Promise<number> {
  const { later } = request()
  const count = later.length
  for (const task of later.splice(0)) await task()
  return count
}

export const headers = () => Promise.resolve(request().headers)

export const cookies = () =>
  Promise.resolve({
    get: (name: string) => {
      const value = request().cookies.get(name)
      return value === undefined ? undefined : { name, value }
    },
    set: (name: string, value: string, options: Omit<SetCookie, 'value'>) => {
      request().set.set(name, { value, ...options })
      request().cookies.set(name, value)
    },
  })

export const after = (task: () => unknown) => {
  request().later.push(task)
}

export const connection = () => Promise.resolve()
