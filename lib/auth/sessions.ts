import 'server-only'
import { DrizzlePostgreSQLAdapter } from '@lucia-auth/adapter-drizzle'
import { and, desc, eq, ne } from 'drizzle-orm'
import { Lucia, TimeSpan, type DatabaseSession } from 'lucia'
import { database, type Executor } from '@/db/client'
import { accounts, sessions } from '@/db/schema'
import { hashToken, newToken } from './tokens'

/*
 * Sessions: create, validate, list, end, rotate. This is the only file that knows lucia, which is no longer developed; whoever replaces it
 * keeps these functions and their tests, and nothing else changes.
 *
 * The cookie holds a random token; lucia is given its SHA-256 as the session's id, so that the table opens no session. Lucia's own expiry
 * serves as the idle one: it moves when more than half of it has passed. The absolute one is ours and never moves.
 */

export const IDLE_DAYS = 7
export const ABSOLUTE_DAYS = 30
const DAY_MS = 86_400_000

export interface SessionAccount {
  readonly id: string
  readonly email: string
  readonly label: string
}

export interface ValidSession {
  /** The stored id, a hash; safe to show to its owner, useless as a cookie. */
  readonly id: string
  readonly absoluteExpiresAt: Date
  readonly account: SessionAccount
}

export interface SessionSummary {
  readonly id: string
  readonly createdAt: Date
  readonly agent: string
}

declare module 'lucia' {
  interface Register {
    Lucia: ReturnType<typeof makeLucia>
    UserId: string
    DatabaseSessionAttributes: { absoluteExpiresAt: Date; createdAt: Date; agent: string }
    DatabaseUserAttributes: { email: string; label: string; createdAt: Date }
  }
}

const earlier = (one: Date, other: Date) => (one < other ? one : other)

/** Never lets the idle end move past the absolute one, whatever lucia asks for; a check in the table says the same. */
class BoundedAdapter extends DrizzlePostgreSQLAdapter {
  readonly #on: Executor

  constructor(on: Executor) {
    super(on, sessions, accounts)
    this.#on = on
  }

  override async setSession(session: DatabaseSession): Promise<void> {
    const { absoluteExpiresAt } = session.attributes
    await super.setSession({ ...session, expiresAt: earlier(session.expiresAt, absoluteExpiresAt) })
  }

  override async updateSessionExpiration(sessionId: string, expiresAt: Date): Promise<void> {
    const [row] = await this.#on
      .select({ absolute: sessions.absoluteExpiresAt })
      .from(sessions)
      .where(eq(sessions.id, sessionId))
    if (!row) return
    await super.updateSessionExpiration(sessionId, earlier(expiresAt, row.absolute))
  }
}

function makeLucia(on: Executor) {
  return new Lucia(new BoundedAdapter(on), {
    sessionExpiresIn: new TimeSpan(IDLE_DAYS, 'd'),
    getSessionAttributes: ({ absoluteExpiresAt, createdAt, agent }) => ({ absoluteExpiresAt, createdAt, agent }),
    getUserAttributes: ({ email, label }) => ({ email, label }),
  })
}

/** Begins a session; returns the token for the cookie, which is kept nowhere else. */
export async function createSession(
  accountId: string,
  agent: string,
  {
    on = database(),
    absoluteExpiresAt = new Date(Date.now() + ABSOLUTE_DAYS * DAY_MS),
  }: { on?: Executor; absoluteExpiresAt?: Date } = {},
): Promise<{ readonly token: string; readonly absoluteExpiresAt: Date }> {
  const token = newToken()
  const attributes = { absoluteExpiresAt, createdAt: new Date(), agent: agent.slice(0, 200) }
  await makeLucia(on).createSession(accountId, attributes, { sessionId: hashToken(token) })
  return { token, absoluteExpiresAt }
}

/** The session that a cookie's token names, while it lasts. Being used puts off its idle end. */
export async function validateSession(token: string): Promise<ValidSession | null> {
  const lucia = makeLucia(database())
  const { session, user } = await lucia.validateSession(hashToken(token))
  if (!session) return null
  if (session.absoluteExpiresAt.getTime() <= Date.now()) {
    await lucia.invalidateSession(session.id)
    return null
  }
  const account = { id: user.id, email: user.email, label: user.label }
  return { id: session.id, absoluteExpiresAt: session.absoluteExpiresAt, account }
}

export async function endSession(token: string): Promise<void> {
  await makeLucia(database()).invalidateSession(hashToken(token))
}

/** Ends every session of an account. */
export async function endAllSessions(accountId: string, on: Executor = database()): Promise<void> {
  await makeLucia(on).invalidateUserSessions(accountId)
}

/** One of the account's own, by its stored id; another account's stays. */
export async function endOwnSession(accountId: string, sessionId: string, on: Executor = database()): Promise<boolean> {
  const ended = await on
    .delete(sessions)
    .where(and(eq(sessions.id, sessionId), eq(sessions.userId, accountId)))
    .returning({ id: sessions.id })
  return ended.length === 1
}

export async function endOtherSessions(accountId: string, keptId: string, on: Executor = database()): Promise<void> {
  await on.delete(sessions).where(and(eq(sessions.userId, accountId), ne(sessions.id, keptId)))
}

/** A new token for the same sitting, after its account's standing changed; the old token is dead. The absolute end stays. */
export async function rotateSession(
  current: ValidSession,
  agent: string,
  on: Executor = database(),
): Promise<{ readonly token: string; readonly absoluteExpiresAt: Date }> {
  await makeLucia(on).invalidateSession(current.id)
  return createSession(current.account.id, agent, { on, absoluteExpiresAt: current.absoluteExpiresAt })
}

/** Newest first; those that have ended are left out. */
export async function listSessions(accountId: string): Promise<readonly SessionSummary[]> {
  const now = new Date()
  const rows = await database()
    .select({
      id: sessions.id,
      createdAt: sessions.createdAt,
      agent: sessions.agent,
      expiresAt: sessions.expiresAt,
      absoluteExpiresAt: sessions.absoluteExpiresAt,
    })
    .from(sessions)
    .where(eq(sessions.userId, accountId))
    .orderBy(desc(sessions.createdAt))
  return rows
    .filter((row) => row.expiresAt > now && row.absoluteExpiresAt > now)
    .map(({ id, createdAt, agent }) => ({ id, createdAt, agent }))
}

/** Clears what has ended; called at sign-in, so that the table stays as long as it is used. */
export async function sweepSessions(): Promise<void> {
  await makeLucia(database()).deleteExpiredSessions()
}
