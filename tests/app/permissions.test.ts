import { readdirSync, readFileSync, statSync } from 'node:fs'
import { join } from 'node:path'
import { renderToStaticMarkup } from 'react-dom/server'
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest'
import { closeConnections } from '@/db/client'
import { lockDesign } from '@/db/queries/designs'
import { inTransaction } from '@/db/queries/transaction'
import { lockChain } from '@/db/queries/chains'
import { designFromSpec } from '@/dsp'
import { actionNameOf } from '@/lib/actions/action'
import { routeActionOf } from '@/lib/actions/route'
import { computeChainVersion } from '@/lib/chains/compute-version'
import { saveChainVersion } from '@/lib/chains/save-chain-version'
import { startingChain } from '@/lib/chains/stage-starts'
import { coefficientsOf } from '@/lib/designs/coefficients'
import { defaultSpec } from '@/lib/designs/edits'
import { saveVersion } from '@/lib/designs/save-version'
import { allRoles, pages, permissions, routes, type ActionName } from '@/lib/permissions'
import type { Role } from '@/lib/designs/types'
import { beginRequest, headers as requestHeaders } from '../helpers/next-request'
import { makeAccount, makeTeam, type TestTeam } from '../helpers/people'
import { pageCases, reads, writes, type Verdict } from '../helpers/permission-cases'

vi.mock('next/headers', () => import('../helpers/next-request'))
vi.mock('next/server', () => import('../helpers/next-request'))
// Who is let in is decided before these are drawn; drawing them is for other tests.
vi.mock('@/components/studio/studio', () => ({ Studio: () => null }))
vi.mock('@/components/studio/compare/compare-view', () => ({ CompareView: () => null }))
vi.mock('@/components/handover/version-sheet', () => ({ VersionSheet: () => null }))
vi.mock('@/components/chain/chain-page', () => ({ ChainPage: () => null }))
vi.mock('@/components/chain-versions/chain-compare', () => ({ ChainCompare: () => null }))
vi.mock('@/components/chain-versions/chain-version-sheet', () => ({ ChainVersionSheet: () => null }))

/** Every file below a folder. */
function filesIn(folder: string): string[] {
  return readdirSync(folder).flatMap((name) => {
    const path = join(folder, name)
    return statSync(path).isDirectory() ? filesIn(path) : [path]
  })
}
const appFiles = filesIn('app')

/** app/(account)/sign-in/page.tsx → /sign-in */
const pathOf = (file: string) =>
  `/${file
    .split('/')
    .slice(1, -1)
    .filter((part) => !part.startsWith('('))
    .join('/')}`

const teamActions = Object.entries(permissions).flatMap(([name, audience]) =>
  typeof audience === 'string' ? [] : [{ name, roles: audience as readonly Role[] }],
)

describe('the table lists', () => {
  it('every page, and no page that is not there', () => {
    const found = appFiles.filter((file) => file.endsWith('/page.tsx')).map(pathOf)
    expect(found.sort()).toEqual(Object.keys(pages).sort())
  })

  it('every route with its methods, and none that is not there', async () => {
    const found: Record<string, readonly string[]> = {}
    for (const file of appFiles.filter((name) => name.endsWith('/route.ts'))) {
      const handlers = (await import(/* @vite-ignore */ join(process.cwd(), file))) as Record<string, object>
      const path = pathOf(file)
      found[path] = Object.keys(handlers)
        .filter((name) => /^[A-Z]+$/.test(name))
        .sort()
      for (const [method, handler] of Object.entries(handlers)) {
        const listed = routes[path]?.[method]
        // Only what is open to everybody may do without the wrapper.
        if (listed !== undefined && permissions[listed] !== 'anyone')
          expect([path, method, routeActionOf(handler)]).toEqual([path, method, listed])
      }
    }
    const listed = Object.fromEntries(
      Object.entries(routes).map(([path, methods]) => [path, Object.keys(methods).sort()]),
    )
    expect(found).toEqual(listed)
  })

  it('every server action, each made by the wrapper', async () => {
    const actionFiles = appFiles.filter((file) => /^'use server'/.test(readFileSync(file, 'utf8')))
    expect(actionFiles.length).toBeGreaterThanOrEqual(4)
    const names: (ActionName | undefined)[] = []
    for (const file of actionFiles) {
      const exported = (await import(/* @vite-ignore */ join(process.cwd(), file))) as Record<string, object>
      for (const [name, action] of Object.entries(exported)) {
        expect([file, name, actionNameOf(action)]).toEqual([file, name, expect.any(String)])
        names.push(actionNameOf(action))
      }
    }
    expect(new Set(names).size).toBe(names.length)
    const used = new Set([
      ...names,
      ...Object.values(pages),
      ...Object.values(routes).flatMap((methods) => Object.values(methods)),
    ])
    // What no page, route or action uses is a permission nobody needs; team.read stands for the members on the team page.
    expect([...used, 'team.read'].sort()).toEqual(Object.keys(permissions).sort())
  })

  it('no inline action beside the wrapper', () => {
    for (const file of [...appFiles, ...filesIn('components')].filter((name) => /\.tsx?$/.test(name))) {
      expect([file, /^\s+['"]use server['"]/m.test(readFileSync(file, 'utf8'))]).toEqual([file, false])
    }
  })
})

describe('the table says', () => {
  it('what the product says of the five roles', () => {
    const may = (role: Role) => teamActions.filter(({ roles }) => roles.includes(role)).map(({ name }) => name)
    const reading = ['project.read', 'team.read', 'design.read', 'chain.read']
    const editing = [
      'project.create',
      'design.create',
      'design.rename',
      'design.duplicate',
      'draft.save',
      'version.save',
      'chain.create',
      'chain.rename',
      'chain.duplicate',
      'chain-draft.save',
      'chain-version.save',
    ]
    const exporting = ['version.export', 'chain-version.export']
    expect(may('observer').sort()).toEqual([...reading].sort())
    expect(may('reviewer').sort()).toEqual([...reading, ...exporting].sort())
    expect(may('integrator').sort()).toEqual([...reading, ...exporting].sort())
    expect(may('designer').sort()).toEqual([...reading, ...editing, ...exporting].sort())
    expect(may('owner').sort()).toEqual(teamActions.map(({ name }) => name).sort())
  })
})

let team: TestTeam
let foreign: TestTeam
beforeAll(async () => {
  team = await makeTeam()
  foreign = await makeTeam()
  for (const one of [team, foreign]) {
    await inTransaction(async (tx) => {
      const access = one.access('owner')
      const design = await lockDesign(tx, access, one.designId)
      if (!design) throw new Error('no design')
      const input = { designId: one.designId, spec: defaultSpec, note: 'first', parentNumber: null }
      await saveVersion({ tx, access, design, input, coefficients: coefficientsOf(designFromSpec(input.spec)) })
      const chain = await lockChain(tx, access, one.chainId)
      if (!chain) throw new Error('no chain')
      const chainInput = { chainId: one.chainId, spec: startingChain, note: 'first', parentNumber: null }
      await saveChainVersion({
        tx,
        access,
        chain,
        input: chainInput,
        computed: await computeChainVersion(startingChain),
      })
    })
  }
})
afterAll(closeConnections)

interface Asker {
  readonly token: string | null
  readonly headers?: Record<string, string | null>
}

async function ask(which: string, asker: Asker, of = team): Promise<Verdict> {
  beginRequest(asker)
  const run = writes[which] ?? reads[which]
  if (!run) throw new Error(`no case for ${which}`)
  return run(of, await requestHeaders())
}

describe('the matrix has a case', () => {
  it('for every action on a team’s object', () => {
    const onPages = new Set<string>(Object.values(pages))
    const needed = teamActions.map(({ name }) => name).filter((name) => !onPages.has(name) && name !== 'team.read')
    expect([...Object.keys(writes), ...Object.keys(reads)].sort()).toEqual(needed.sort())
  })

  it('for every page', () => {
    expect(Object.keys(pageCases).sort()).toEqual(Object.keys(pages).sort())
  })
})

describe.each(teamActions.filter(({ name }) => name in writes || name in reads))('$name', ({ name, roles }) => {
  it.each(allRoles)('%s of the team', async (role) => {
    expect(await ask(name, { token: team.members[role].token })).toBe(roles.includes(role) ? 'done' : 'forbidden')
  })

  it.each(allRoles)('%s of another team finds nothing', async (role) => {
    expect(await ask(name, { token: foreign.members[role].token })).toBe('not-found')
  })

  it('somebody without a team finds nothing', async () => {
    expect(await ask(name, { token: (await makeAccount()).token })).toBe('not-found')
  })

  it('whoever is signed out is told so', async () => {
    expect(await ask(name, { token: null })).toBe('not-signed-in')
    expect(await ask(name, { token: 'a-token-that-never-was' })).toBe('not-signed-in')
  })

  // Reads change nothing, and a link from elsewhere may lead to one.
  if (name in writes)
    it.each([
      ['another site', { origin: 'https://evil.example', 'sec-fetch-site': 'cross-site' }],
      ['a neighbouring host', { origin: 'http://other.127.0.0.1:3000', 'sec-fetch-site': 'same-site' }],
      ['another port', { origin: 'http://127.0.0.1:4000', 'sec-fetch-site': 'same-site' }],
      ['nowhere', { origin: null, 'sec-fetch-site': null }],
      ['a sandboxed page', { origin: 'null', 'sec-fetch-site': null }],
      ['a page that lies about its origin', { 'sec-fetch-site': 'cross-site' }],
    ])('a request from %s changes nothing', async (_, headers) => {
      expect(await ask(name, { token: team.members.owner.token, headers })).toBe('cross-site')
    })
})

/** What came of a page: its markup, or where Next sends instead. */
async function see(path: string, token: string | null, of = team): Promise<string> {
  beginRequest({ token })
  try {
    const page = await pageCases[path]?.(of)
    return page === undefined ? 'nothing' : 'shown'
  } catch (thrown) {
    const digest = typeof thrown === 'object' && thrown !== null && 'digest' in thrown ? String(thrown.digest) : ''
    if (digest.startsWith('NEXT_REDIRECT')) return `to ${digest.split(';')[2]}`
    if (digest === 'NEXT_HTTP_ERROR_FALLBACK;404') return 'not found'
    throw thrown
  }
}

describe.each(Object.entries(pages).map(([path, name]) => ({ path, name })))('page $path', ({ path, name }) => {
  const audience = permissions[name]
  const isOfTeam = path.includes('[')

  it.each(allRoles)('%s of the team', async (role) => {
    const seen = await see(path, team.members[role].token)
    if (path === '/dev/mailbox') expect(seen).toBe('not found')
    else if (['/', '/sign-in', '/sign-up'].includes(path)) expect(seen).toBe('to /projects')
    else expect(seen).toBe(typeof audience === 'string' || audience.some((one) => one === role) ? 'shown' : 'not found')
  })

  if (isOfTeam)
    it.each(allRoles)('%s of another team finds nothing', async (role) => {
      expect(await see(path, foreign.members[role].token)).toBe('not found')
    })

  it('whoever is signed out is sent to sign in, and back afterwards', async () => {
    const seen = await see(path, null)
    const filled = path
      .replace('[designId]', team.designId)
      .replace('[chainId]', team.chainId)
      .replace('[projectId]', team.projectId)
      .replace('[number]', '1')
    if (path === '/dev/mailbox') expect(seen).toBe('not found')
    else if (audience === 'anyone') expect(seen).toBe('shown')
    else expect(seen).toBe(`to /sign-in?next=${encodeURIComponent(filled)}`)
  })
})

describe('lists', () => {
  it('show a stranger none of our rows', async () => {
    beginRequest({ token: foreign.members.owner.token })
    const markup = renderToStaticMarkup((await pageCases['/team']?.(team)) as never)
    expect(markup).toContain(foreign.id)
    expect(markup).not.toContain(team.id)
  })
})
