import { createDesign, createProject, duplicateDesign } from '@/app/projects/actions'
import { renameDesign, saveVersion } from '@/app/designs/actions'
import { createChain, duplicateChain, renameChain, saveVersion as saveChainVersion } from '@/app/chains/actions'
import { PUT as putChainDraft } from '@/app/api/chains/[chainId]/draft/route'
import { GET as getChainExport } from '@/app/api/chains/[chainId]/versions/[number]/export/route'
import { PUT as putDraft } from '@/app/api/designs/[designId]/draft/route'
import { GET as getExport } from '@/app/api/designs/[designId]/versions/[number]/export/route'
import AccountPage from '@/app/account/page'
import HomePage from '@/app/page'
import ProjectsPage from '@/app/projects/page'
import ProjectPage from '@/app/projects/[projectId]/page'
import NewProjectPage from '@/app/projects/new/page'
import TeamPage from '@/app/team/page'
import DesignPage from '@/app/designs/[designId]/page'
import ComparePage from '@/app/designs/[designId]/compare/page'
import VersionPage from '@/app/designs/[designId]/versions/[number]/page'
import ChainRoute from '@/app/chains/[chainId]/page'
import ChainComparePage from '@/app/chains/[chainId]/compare/page'
import ChainVersionPage from '@/app/chains/[chainId]/versions/[number]/page'
import FormatsPage from '@/app/formats/page'
import MailboxPage from '@/app/dev/mailbox/page'
import SignInPage from '@/app/(account)/sign-in/page'
import SignUpPage from '@/app/(account)/sign-up/page'
import ForgotPage from '@/app/(account)/forgot/page'
import ResetPage from '@/app/(account)/reset/page'
import { startingChain } from '@/lib/chains/stage-starts'
import { defaultSpec } from '@/lib/designs/edits'
import type { TeamAction } from '@/lib/permissions'
import type { TestTeam } from './people'

/*
 * How each entry of the permission table is asked for, on a team's objects. A table entry without a case here fails the matrix.
 */

/** 'done', or the code of the refusal. */
export type Verdict = string

let codes = 0
const freshCode = () => `T${(codes += 1).toString(36).toUpperCase().padStart(4, '0')}`

const verdictOf = (answer: { ok: boolean; problem?: { code: string } }): Verdict =>
  answer.ok ? 'done' : (answer.problem?.code ?? 'no code')

async function verdictOfResponse(response: Response): Promise<Verdict> {
  if (response.ok || response.status === 409) return 'done'
  const body: unknown = await response.json()
  return typeof body === 'object' && body !== null && 'code' in body ? String(body.code) : 'no code'
}

const put = (designId: string, headers: Headers) =>
  putDraft(
    new Request(`http://127.0.0.1:3000/api/designs/${designId}/draft`, {
      method: 'PUT',
      headers,
      body: JSON.stringify({ spec: defaultSpec, parentNumber: null, revision: 0 }),
    }),
    { params: Promise.resolve({ designId }) },
  )

const putChain = (chainId: string, headers: Headers) =>
  putChainDraft(
    new Request(`http://127.0.0.1:3000/api/chains/${chainId}/draft`, {
      method: 'PUT',
      headers,
      body: JSON.stringify({ spec: startingChain, parentNumber: null, revision: 0 }),
    }),
    { params: Promise.resolve({ chainId }) },
  )

/** Writes: one for each action of the table that acts on a team's object and isn't a page. */
type Case = (team: TestTeam, headers: Headers) => Promise<Verdict>

export const writes: Readonly<Record<string, Case>> = {
  'project.create': async (team) => verdictOf(await createProject({ teamId: team.id, code: freshCode(), name: 'x' })),
  'design.create': async (team) => verdictOf(await createDesign({ projectId: team.projectId, title: 'x' })),
  'design.duplicate': async (team) => verdictOf(await duplicateDesign({ designId: team.designId })),
  'design.rename': async (team) => (await renameDesign(team.designId, 'x')).problem?.code ?? 'done',
  'version.save': async (team) => {
    const answer = await saveVersion({ designId: team.designId, spec: defaultSpec, note: 'x', parentNumber: null })
    return answer.outcome === 'refused' ? answer.problem.code : 'done'
  },
  'draft.save': async (team, headers) => {
    const own = new Headers(headers)
    own.set('content-type', 'application/json')
    return verdictOfResponse(await put(team.designId, own))
  },
  'chain.create': async (team) =>
    verdictOf(await createChain({ projectId: team.projectId, title: 'x', template: 'empty' })),
  'chain.duplicate': async (team) => verdictOf(await duplicateChain({ chainId: team.chainId })),
  'chain.rename': async (team) => (await renameChain(team.chainId, 'x')).problem?.code ?? 'done',
  'chain-version.save': async (team) => {
    const input = { chainId: team.chainId, spec: startingChain, note: 'x', parentNumber: null }
    const answer = await saveChainVersion(input)
    return answer.outcome === 'refused' ? answer.problem.code : 'done'
  },
  'chain-draft.save': async (team, headers) => {
    const own = new Headers(headers)
    own.set('content-type', 'application/json')
    return verdictOfResponse(await putChain(team.chainId, own))
  },
} satisfies Partial<Record<TeamAction, Case>>

/** Reads by a route: the same, but from any page, since nothing is changed. */
export const reads: Readonly<Record<string, Case>> = {
  'version.export': async (team, headers) =>
    verdictOfResponse(
      await getExport(
        new Request(`http://127.0.0.1:3000/api/designs/${team.designId}/versions/1/export?format=json`, { headers }),
        { params: Promise.resolve({ designId: team.designId, number: '1' }) },
      ),
    ),
  'chain-version.export': async (team, headers) =>
    verdictOfResponse(
      await getChainExport(
        new Request(`http://127.0.0.1:3000/api/chains/${team.chainId}/versions/1/export?as=json`, { headers }),
        { params: Promise.resolve({ chainId: team.chainId, number: '1' }) },
      ),
    ),
} satisfies Partial<Record<TeamAction, Case>>

const search = Promise.resolve({})

/** Pages by their path in the table. */
export const pageCases: Readonly<Record<string, (team: TestTeam) => Promise<unknown>>> = {
  '/': () => HomePage(),
  '/sign-in': () => SignInPage({ searchParams: search }),
  '/sign-up': () => SignUpPage(),
  '/forgot': () => ForgotPage(),
  '/reset': () => ResetPage(),
  '/account': () => AccountPage(),
  '/projects': () => ProjectsPage(),
  '/projects/new': () => NewProjectPage(),
  '/projects/[projectId]': ({ projectId }) => ProjectPage({ params: Promise.resolve({ projectId }) }),
  '/team': () => TeamPage(),
  '/designs/[designId]': ({ designId }) => DesignPage({ params: Promise.resolve({ designId }) }),
  '/designs/[designId]/compare': ({ designId }) =>
    ComparePage({ params: Promise.resolve({ designId }), searchParams: search }),
  '/designs/[designId]/versions/[number]': ({ designId }) =>
    VersionPage({ params: Promise.resolve({ designId, number: '1' }) }),
  '/chains/[chainId]': ({ chainId }) => ChainRoute({ params: Promise.resolve({ chainId }) }),
  '/chains/[chainId]/compare': ({ chainId }) =>
    ChainComparePage({ params: Promise.resolve({ chainId }), searchParams: search }),
  '/chains/[chainId]/versions/[number]': ({ chainId }) =>
    ChainVersionPage({ params: Promise.resolve({ chainId, number: '1' }) }),
  '/formats': () => Promise.resolve(FormatsPage()),
  '/dev/mailbox': () => MailboxPage(),
}
