import 'server-only'
import { notFound } from 'next/navigation'
import type { Access } from '@/db/queries/access'
import { log } from '@/lib/log'
import type { TeamAction } from '@/lib/permissions'
import type { ValidSession } from './sessions'
import { accessFor, requireSession } from './viewer'

/** What a page of one object starts with: who looks, and the object as far as it is theirs to see. */
export async function requireFound<Found>(
  action: TeamAction,
  here: string,
  find: (access: Access) => Promise<Found | null>,
): Promise<{ readonly session: ValidSession; readonly access: Access; readonly found: Found }> {
  const session = await requireSession(here)
  const access = accessFor(session, action)
  const found = await find(access)
  // Foreign and missing look the same outside; the log tells who asked.
  if (found === null) {
    log().warn({ action, actor: session.account.id, here, code: 'not-found' }, 'page denied')
    notFound()
  }
  return { session, access, found }
}
