import { unstable_doesMiddlewareMatch as matches } from 'next/experimental/testing/server'
import { NextRequest } from 'next/server'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'

const page = 'http://127.0.0.1:3000/projects'

async function answer(origin = 'http://127.0.0.1:3000', mode = 'production') {
  vi.resetModules()
  process.env.APP_ORIGIN = origin
  vi.stubEnv('NODE_ENV', mode)
  const { proxy } = await import('@/proxy')
  return proxy(new NextRequest(page))
}

const directives = (policy: string | null): Record<string, string[]> =>
  Object.fromEntries(
    (policy ?? '').split('; ').map((text) => {
      const [name = '', ...sources] = text.split(' ')
      return [name, sources]
    }),
  )

describe('every page', () => {
  const before = process.env.APP_ORIGIN
  beforeEach(() => vi.resetModules())
  afterEach(() => {
    vi.unstubAllEnvs()
    process.env.APP_ORIGIN = before
  })

  it('lets scripts run by a fresh nonce alone', async () => {
    const nonces = new Set<string>()
    for (let round = 0; round < 20; round += 1) {
      const policy = directives((await answer()).headers.get('content-security-policy'))
      const scripts = policy['script-src'] ?? []
      expect(scripts).not.toContain("'unsafe-inline'")
      expect(scripts).not.toContain("'unsafe-eval'")
      const nonce = scripts.find((source) => source.startsWith("'nonce-")) ?? ''
      expect(Buffer.from(nonce.slice(7, -1), 'base64')).toHaveLength(18)
      nonces.add(nonce)
    }
    expect(nonces.size).toBe(20)
  })

  it('is framed by nobody, sends forms nowhere else, loads no plug-ins and takes no base', async () => {
    const { headers } = await answer()
    const policy = directives(headers.get('content-security-policy'))
    expect(policy).toMatchObject({
      'default-src': ["'none'"],
      'frame-ancestors': ["'none'"],
      'form-action': ["'self'"],
      'object-src': ["'none'"],
      'base-uri': ["'none'"],
      'style-src-attr': ["'unsafe-inline'"],
    })
    expect(policy['style-src']).not.toContain("'unsafe-inline'")
    expect(headers.get('x-frame-options')).toBe('DENY')
  })

  it('is stored by nobody, guessed at by nobody, and tells other sites nothing of its address', async () => {
    const { headers } = await answer()
    expect(headers.get('cache-control')).toBe('private, no-store')
    expect(headers.get('x-content-type-options')).toBe('nosniff')
    expect(headers.get('referrer-policy')).toBe('same-origin')
  })

  it('asks for https alone once it is served by it', async () => {
    const plain = await answer()
    expect(plain.headers.get('strict-transport-security')).toBeNull()
    expect(plain.headers.get('content-security-policy')).not.toContain('upgrade-insecure-requests')
    const secure = await answer('https://polewright.example')
    expect(secure.headers.get('strict-transport-security')).toMatch(/max-age=31536000/)
    expect(secure.headers.get('content-security-policy')).toContain('upgrade-insecure-requests')
  })

  it('has a looser policy in development only', async () => {
    expect((await answer(undefined, 'development')).headers.get('content-security-policy')).toContain("'unsafe-eval'")
  })
})

describe('the matcher', () => {
  it.each([
    ['/', true],
    ['/projects', true],
    ['/designs/1/compare', true],
    ['/apis', true],
    ['/api/designs/1/draft', false],
    ['/api/recordings', false],
    ['/_next/static/chunks/a.js', false],
  ])('%s: %s', async (url, expected) => {
    const { config } = await import('@/proxy')
    expect(matches({ config, nextConfig: {}, url })).toBe(expected)
  })
})
