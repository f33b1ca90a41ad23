import { afterEach, describe, expect, it, vi } from 'vitest'

async function isFromOurPages(appOrigin: string, headers: Record<string, string>): Promise<boolean> {
  vi.resetModules()
  process.env.APP_ORIGIN = appOrigin
  const { isFromOurPages: check } = await import('@/lib/actions/origin')
  return check(new Headers(headers))
}

describe('a write', () => {
  const before = process.env.APP_ORIGIN
  afterEach(() => {
    process.env.APP_ORIGIN = before
  })
  const site = 'https://polewright.example'
  const local = 'http://127.0.0.1:3000'

  it.each([
    ['from our origin', site, { origin: site, 'sec-fetch-site': 'same-origin' }, true],
    ['from our origin, by an old browser', site, { origin: site }, true],
    ['without Origin, but same-origin by the browser’s word', site, { 'sec-fetch-site': 'same-origin' }, true],
    ['that says nothing', site, {}, false],
    ['from another site', site, { origin: 'https://evil.example', 'sec-fetch-site': 'cross-site' }, false],
    ['from another site, by an old browser', site, { origin: 'https://evil.example' }, false],
    ['from a name that begins like ours', site, { origin: `${site}.evil.example` }, false],
    ['over plain http', site, { origin: 'http://polewright.example' }, false],
    ['whose Host was forged to fit', site, { origin: 'https://evil.example', host: 'evil.example' }, false],
    ['from localhost to localhost', local, { origin: 'http://localhost:3000', host: 'localhost:3000' }, true],
    ['from localhost to 127.0.0.1', local, { origin: 'http://localhost:3000', host: '127.0.0.1:3000' }, false],
    ['from another port of this machine', local, { origin: 'http://127.0.0.1:9999', host: '127.0.0.1:3000' }, false],
    [
      'from a foreign name that resolves here',
      local,
      { origin: 'http://evil.example:3000', host: 'evil.example:3000' },
      false,
    ],
    [
      'to a deployed app from its own machine',
      site,
      { origin: 'http://localhost:3000', host: 'localhost:3000' },
      false,
    ],
  ])('%s', async (_, appOrigin, headers, expected) => {
    expect(await isFromOurPages(appOrigin, headers)).toBe(expected)
  })
})
