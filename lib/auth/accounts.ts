import 'server-only'
import {
  findAccountByEmail,
  findCredentials,
  findPasswordHash,
  insertAccount,
  insertReset,
  peekReset,
  replacePasswordHash,
  spendReset,
  voidResets,
} from '@/db/queries/accounts'
import { recordTrail } from '@/db/queries/audit'
import { insertTeam } from '@/db/queries/teams'
import { inTransaction } from '@/db/queries/transaction'
import { env } from '@/lib/env'
import { AppError } from '@/lib/errors'
import { log } from '@/lib/log'
import { passwordChangedMail, resetMail } from '@/lib/mail/templates'
import { sendMail, type Mail } from '@/lib/mail/transport'
import { countAttempt, forgiveAttempts, sweepLimits, uncountAttempt } from './limiter'
import { hashPassword, refuseCommonPassword, verifyPassword } from './passwords'
import {
  createSession,
  endAllSessions,
  endOtherSessions,
  rotateSession,
  sweepSessions,
  type ValidSession,
} from './sessions'
import { hashToken, newToken } from './tokens'

/*
 * What can be done with an account. Actions call these and set cookies.
 */

export const RESET_MINUTES = 30

export interface Caller {
  /** Network address, for counting. */
  readonly address: string
  /** What the browser says of itself. */
  readonly agent: string
}

export interface NewSession {
  readonly token: string
  readonly absoluteExpiresAt: Date
}

/** An account with a team of its own, and a first session. */
export async function signUp(
  { email, label, password }: { readonly email: string; readonly label: string; readonly password: string },
  caller: Caller,
): Promise<NewSession> {
  // Unlike sign-in, this can't hide whether an address has an account; counting makes asking for many of them slow.
  await countAttempt('sign-up-address', caller.address)
  refuseCommonPassword(password, email)
  const passwordHash = await hashPassword(password)
  return inTransaction(async (tx) => {
    const account = await insertAccount(tx, { email, label, passwordHash })
    if (!account)
      throw new AppError(
        'name-taken',
        'This e-mail address has an account already. Sign in, or ask for a new password.',
        {
          field: 'email',
        },
      )
    const team = await insertTeam(tx, `Team of ${label}`.slice(0, 80), account.id)
    await recordTrail({ actor: account.id, team, action: 'account.sign-up', object: `account:${account.id}` }, tx)
    return createSession(account.id, caller.agent, { on: tx })
  })
}

/** The same refusal, after the same work, whether the address or the password was wrong. */
export async function signIn(
  { email, password }: { readonly email: string; readonly password: string },
  caller: Caller,
): Promise<NewSession> {
  await countAttempt('sign-in-address', caller.address)
  await countAttempt('sign-in-account', email)
  const account = await findCredentials(email)
  const matches = await verifyPassword(account?.passwordHash ?? null, password)
  if (!account || !matches) throw new AppError('wrong-credentials', 'The e-mail address or the password is not right.')
  await forgiveAttempts('sign-in-account', email)
  await uncountAttempt('sign-in-address', caller.address)
  await Promise.all([sweepSessions(), sweepLimits()])
  return inTransaction(async (tx) => {
    await recordTrail({ actor: account.id, team: null, action: 'account.sign-in', object: `account:${account.id}` }, tx)
    return createSession(account.id, caller.agent, { on: tx })
  })
}

/** Counts the wish; the answer to it is the same for every address, and the work is done afterwards by deliverReset. */
export async function admitResetRequest(email: string, caller: Caller): Promise<void> {
  await countAttempt('reset-address', caller.address)
  await countAttempt('reset-account', email)
}

/** Mails a link to the account, if there is one. Never throws: nobody waits for it. */
export async function deliverReset(email: string, send: (mail: Mail) => Promise<void> = sendMail): Promise<void> {
  try {
    const account = await findAccountByEmail(email)
    if (!account) {
      log().info('a new password was asked for an address without account')
      return
    }
    const token = newToken()
    await inTransaction(async (tx) => {
      await insertReset(account.id, hashToken(token), new Date(Date.now() + RESET_MINUTES * 60_000), tx)
      await recordTrail({ actor: null, team: null, action: 'account.ask-reset', object: `account:${account.id}` }, tx)
    })
    await send(resetMail(account.email, env().APP_ORIGIN, token, RESET_MINUTES))
  } catch (error) {
    log().error({ err: error }, 'the mail with a link to a new password was not sent')
  }
}

/** Spends the link, sets the password and ends every session of the account. */
export async function resetPassword(
  { token, password }: { readonly token: string; readonly password: string },
  caller: Caller,
): Promise<{ readonly email: string }> {
  await countAttempt('reset-link-address', caller.address)
  const tokenHash = hashToken(token)
  const spent = () =>
    new AppError('link-spent', 'This link was used already or is older than 30 minutes. Ask for a new one.', {
      field: 'token',
    })
  const account = await peekReset(tokenHash, new Date())
  if (!account) throw spent()
  // Before the link is spent: who chooses a poor password may choose again.
  refuseCommonPassword(password, account.email)
  const passwordHash = await hashPassword(password)
  await inTransaction(async (tx) => {
    const accountId = await spendReset(tx, tokenHash, new Date())
    if (accountId === null) throw spent()
    await replacePasswordHash(tx, accountId, passwordHash)
    await endAllSessions(accountId, tx)
    await recordTrail({ actor: accountId, team: null, action: 'account.reset', object: `account:${accountId}` }, tx)
  })
  await forgiveAttempts('sign-in-account', account.email)
  return { email: account.email }
}

/** Needs the present password; ends the other sessions and gives this one a new token. */
export async function changePassword(
  { current, password }: { readonly current: string; readonly password: string },
  session: ValidSession,
  caller: Caller,
): Promise<NewSession> {
  const { id, email } = session.account
  await countAttempt('sign-in-account', email)
  if (!(await verifyPassword(await findPasswordHash(id), current)))
    throw new AppError('wrong-credentials', 'That is not your present password.', { field: 'current' })
  await forgiveAttempts('sign-in-account', email)
  refuseCommonPassword(password, email)
  const passwordHash = await hashPassword(password)
  return inTransaction(async (tx) => {
    await replacePasswordHash(tx, id, passwordHash)
    await voidResets(tx, id, new Date())
    await endOtherSessions(id, session.id, tx)
    await recordTrail({ actor: id, team: null, action: 'account.change-password', object: `account:${id}` }, tx)
    return rotateSession(session, caller.agent, tx)
  })
}

/** Tells the owner; a mail that can't be sent must not undo the change. */
export async function tellPasswordChanged(
  email: string,
  send: (mail: Mail) => Promise<void> = sendMail,
): Promise<void> {
  try {
    await send(passwordChangedMail(email, env().APP_ORIGIN))
  } catch (error) {
    log().error({ err: error }, 'the mail about a changed password was not sent')
  }
}
