'use server'

import { redirect } from 'next/navigation'
import { after } from 'next/server'
import { z } from 'zod'
import { openAction } from '@/lib/actions/action'
import * as accounts from '@/lib/auth/accounts'
import { callerOf } from '@/lib/auth/caller'
import { clearSessionCookie, readSessionCookie, writeSessionCookie } from '@/lib/auth/cookies'
import { askResetSchema, resetSchema, signInSchema, signUpSchema } from '@/lib/auth/schemas'
import { endSession } from '@/lib/auth/sessions'

/** The session that was there before ends: a token from before signing in must not become one from after. */
async function begin({ token, absoluteExpiresAt }: accounts.NewSession): Promise<void> {
  const previous = await readSessionCookie()
  if (previous !== null) await endSession(previous)
  await writeSessionCookie(token, absoluteExpiresAt)
}

export const signUp = openAction('account.sign-up', {
  schema: signUpSchema,
  run: async ({ input, headers }) => {
    await begin(await accounts.signUp(input, callerOf(headers)))
    redirect('/projects')
  },
})

export const signIn = openAction('account.sign-in', {
  schema: signInSchema,
  run: async ({ input, headers }) => {
    await begin(await accounts.signIn(input, callerOf(headers)))
    redirect(input.next ?? '/projects')
  },
})

export const signOut = openAction('account.sign-out', {
  schema: z.strictObject({}),
  run: async () => {
    const token = await readSessionCookie()
    if (token !== null) await endSession(token)
    await clearSessionCookie()
    redirect('/')
  },
})

export const askReset = openAction('account.ask-reset', {
  schema: askResetSchema,
  run: async ({ input, headers }) => {
    await accounts.admitResetRequest(input.email, callerOf(headers))
    // Once the answer is out: looking the account up and mailing take time, and that time would tell who has an account.
    after(() => accounts.deliverReset(input.email))
    return { minutes: accounts.RESET_MINUTES }
  },
})

export const resetPassword = openAction('account.reset', {
  schema: resetSchema,
  run: async ({ input, headers }) => {
    const { email } = await accounts.resetPassword(input, callerOf(headers))
    await clearSessionCookie()
    after(() => accounts.tellPasswordChanged(email))
    redirect('/sign-in?after=reset')
  },
})
