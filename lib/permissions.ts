import type { Role } from './designs/types'

/*
 * The one permission table: every action, page and route of the product, and who may use it. The wrappers in lib/actions read it, screens
 * read it to leave out what would be refused, and tests walk it: every entry × every role × own and foreign team × signed out. A route, page
 * or action that isn't listed here fails the tests.
 */

/** Everybody; whoever is signed in; or team members in one of these roles, for an object of their team. */
export type Audience = 'anyone' | 'signed-in' | readonly Role[]

export const allRoles = ['owner', 'designer', 'reviewer', 'integrator', 'observer'] as const satisfies readonly Role[]
const editors = ['owner', 'designer'] as const satisfies readonly Role[]

export const permissions = {
  'home.read': 'anyone',
  'health.read': 'anyone',
  /** What the coefficient files hold; who ports a filter need not have an account. */
  'formats.read': 'anyone',
  /** Answers 404 unless the start command set up its mailbox. */
  'mailbox.read': 'anyone',
  'account.sign-up': 'anyone',
  'account.sign-in': 'anyone',
  /** Ends whatever session the cookie names; without one there is nothing to refuse. */
  'account.sign-out': 'anyone',
  'account.ask-reset': 'anyone',
  'account.reset': 'anyone',
  'account.read': 'signed-in',
  'account.change-password': 'signed-in',
  'account.end-session': 'signed-in',
  'account.end-other-sessions': 'signed-in',
  /** One's own teams' projects; whoever has none sees an empty page. */
  'project.list': 'signed-in',
  'project.read': allRoles,
  'project.create': editors,
  'team.read': allRoles,
  'design.read': allRoles,
  'design.create': editors,
  'design.rename': editors,
  'design.duplicate': editors,
  'draft.save': editors,
  'version.save': editors,
  /** Observers read; coefficients that leave the product come from the other roles. */
  'version.export': ['owner', 'designer', 'reviewer', 'integrator'],
  'chain.read': allRoles,
  'chain.create': editors,
  'chain.rename': editors,
  'chain.duplicate': editors,
  'chain-draft.save': editors,
  'chain-version.save': editors,
  'chain-version.export': ['owner', 'designer', 'reviewer', 'integrator'],
} as const satisfies Record<string, Audience>

export type ActionName = keyof typeof permissions

/** The actions that act on an object of a team, so that a role decides. */
export type TeamAction = {
  [Name in ActionName]: (typeof permissions)[Name] extends readonly Role[] ? Name : never
}[ActionName]

export const rolesFor = (action: TeamAction): readonly Role[] => permissions[action]

export function mayDo(role: Role, action: TeamAction): boolean {
  return rolesFor(action).includes(role)
}

/** Pages by their folder in app/, groups left out. */
export const pages: Readonly<Record<string, ActionName>> = {
  '/': 'home.read',
  '/sign-up': 'account.sign-up',
  '/sign-in': 'account.sign-in',
  '/forgot': 'account.ask-reset',
  '/reset': 'account.reset',
  '/account': 'account.read',
  '/projects': 'project.list',
  '/projects/[projectId]': 'project.read',
  '/projects/new': 'project.list',
  '/team': 'project.list',
  '/designs/[designId]': 'design.read',
  '/designs/[designId]/compare': 'design.read',
  '/designs/[designId]/versions/[number]': 'design.read',
  '/chains/[chainId]': 'chain.read',
  '/chains/[chainId]/compare': 'chain.read',
  '/chains/[chainId]/versions/[number]': 'chain.read',
  '/formats': 'formats.read',
  '/dev/mailbox': 'mailbox.read',
}

/** Route handlers by folder and method. */
export const routes: Readonly<Record<string, Readonly<Record<string, ActionName>>>> = {
  '/api/health': { GET: 'health.read' },
  '/api/formats/coefficient-set': { GET: 'formats.read' },
  '/api/formats/chain': { GET: 'formats.read' },
  '/api/designs/[designId]/draft': { PUT: 'draft.save' },
  '/api/designs/[designId]/versions/[number]/export': { GET: 'version.export' },
  '/api/chains/[chainId]/draft': { PUT: 'chain-draft.save' },
  '/api/chains/[chainId]/versions/[number]/export': { GET: 'chain-version.export' },
}
