'use server'

import { after } from 'next/server'
import { z } from 'zod'
import { accountAction } from '@/lib/actions/action'
import * as accounts from '@/lib/auth/accounts'
import { callerOf } from '@/lib/auth/caller'
import { writeSessionCookie } from '@/lib/auth/cookies'
import { changePasswordSchema, endSessionSchema } from '@/lib/auth/schemas'
import { endOtherSessions as endOthers, endOwnSession } from '@/lib/auth/sessions'
import { notFound } from '@/lib/errors'

export const changePassword = accountAction('account.change-password', {
  schema: changePasswordSchema,
  run: async ({ input, session, headers }) => {
    const { token, absoluteExpiresAt } = await accounts.changePassword(input, session, callerOf(headers))
    await writeSessionCookie(token, absoluteExpiresAt)
    after(() => accounts.tellPasswordChanged(session.account.email))
    return null
  },
})

export const endSession = accountAction('account.end-session', {
  schema: endSessionSchema,
  run: async ({ input, session }) => {
    if (!(await endOwnSession(session.account.id, input.session))) throw notFound('session')
    return null
  },
})

export const endOtherSessions = accountAction('account.end-other-sessions', {
  schema: z.strictObject({}),
  run: async ({ session }) => {
    await endOthers(session.account.id, session.id)
    return null
  },
})
