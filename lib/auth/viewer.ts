import 'server-only'
import { redirect } from 'next/navigation'
import { cache } from 'react'
import type { Access } from '@/db/queries/access'
import { allRoles, rolesFor, type TeamAction } from '@/lib/permissions'
import { readSessionCookie } from './cookies'
import { validateSession, type ValidSession } from './sessions'

/** The session of the request's cookie; asked of the database once a request. */
export const currentSession = cache(async (): Promise<ValidSession | null> => {
  const token = await readSessionCookie()
  return token === null ? null : validateSession(token)
})

/** For pages: whoever isn't signed in goes to the sign-in page and comes back to `here`. */
export async function requireSession(here: string): Promise<ValidSession> {
  const session = await currentSession()
  if (!session) redirect(`/sign-in?next=${encodeURIComponent(here)}`)
  return session
}

export const accessFor = (session: ValidSession, action: TeamAction): Access => ({
  accountId: session.account.id,
  roles: rolesFor(action),
})

/** To tell "not yours" from "not in your role". */
export const anyAccess = (session: ValidSession): Access => ({ accountId: session.account.id, roles: allRoles })
