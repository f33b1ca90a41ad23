import 'server-only'
import { headers } from 'next/headers'
import type { z } from 'zod'
import type { Access } from '@/db/queries/access'
import { recordTrail, type Trail } from '@/db/queries/audit'
import { inTransaction, type Transaction } from '@/db/queries/transaction'
import { accessFor, anyAccess, currentSession } from '@/lib/auth/viewer'
import type { ValidSession } from '@/lib/auth/sessions'
import { AppError, notFound, problemOf } from '@/lib/errors'
import type { Problem } from '@/lib/designs/types'
import { permissions, type ActionName, type TeamAction } from '@/lib/permissions'
import { demandOurPages } from './origin'
import { demandValid, refusal } from './refusals'

/*
 * The one way of a server action: it must come from our pages, from somebody who is signed in, with an input of the right shape, for an
 * object that is theirs to see, in a role that may; then it runs in a transaction together with its audit row. An action answers with data
 * and never throws at the browser.
 */

export type Answer<Value> =
  { readonly ok: true; readonly value: Value } | { readonly ok: false; readonly problem: Problem }

export interface Done<Value> {
  /** Goes to the browser: only what the screen needs. */
  readonly value: Value
  /** Null when nothing was changed. */
  readonly trail: Pick<Trail, 'team' | 'object' | 'details'> | null
}

/** Marks each function made here with the name of its action, so that a test can tell that every exported action went through. */
const names = new WeakMap<object, ActionName>()
export const actionNameOf = (action: object): ActionName | undefined => names.get(action)

function named<Action extends object>(name: ActionName, action: Action): Action {
  names.set(action, name)
  return action
}

/** The same action in the shape that a screen expects: its arguments packed into one input, its answer in other words. */
export function shaped<Args extends readonly unknown[], Value, Out>(
  action: (input: unknown) => Promise<Answer<Value>>,
  pack: (...args: Args) => unknown,
  shape: (answer: Answer<Value>) => Out,
): (...args: Args) => Promise<Out> {
  const name = names.get(action)
  if (name === undefined) throw new Error('Only an action that was made here can be given another shape.')
  return named(name, async (...args: Args) => shape(await action(pack(...args))))
}

interface TeamActionParts<Input, Found, Value, Prepared> {
  readonly schema: z.ZodType<Input>
  /** What the input speaks of, in the words of a refusal. */
  readonly what: string
  /** The object, as far as `access` reaches; null when it doesn't. */
  readonly find: (access: Access, input: Input, tx: Transaction) => Promise<Found | null>
  /** What takes long and needs no database: done before the transaction opens, so that it holds no lock, and a throw opens none. */
  readonly prepare?: (input: Input) => Prepared | Promise<Prepared>
  readonly run: (context: {
    readonly input: Input
    readonly prepared: Prepared
    readonly found: Found
    readonly access: Access
    readonly session: ValidSession
    readonly tx: Transaction
  }) => Promise<Done<Value>>
}

/** An action on an object of a team. */
export function teamAction<Input, Found, Value, Prepared = undefined>(
  name: TeamAction,
  { schema, what, find, prepare, run }: TeamActionParts<Input, Found, Value, Prepared>,
): (input: unknown) => Promise<Answer<Value>> {
  return named(name, async (raw: unknown) => {
    let actor: string | null = null
    try {
      demandOurPages(await headers())
      const session = await demandSession()
      actor = session.account.id
      const input = demandValid(schema, raw)
      const access = accessFor(session, name)
      const authorised = async (tx: Transaction): Promise<Found> => {
        const found = await find(access, input, tx)
        if (found === null) throw await denial(what, () => find(anyAccess(session), input, tx))
        return found
      }
      // Whoever may not do this has nothing computed for them.
      if (prepare) await inTransaction(authorised)
      const prepared = (await prepare?.(input)) as Prepared
      const value = await inTransaction(async (tx) => {
        const found = await authorised(tx)
        const done = await run({ input, prepared, found, access, session, tx })
        if (done.trail) await recordTrail({ ...done.trail, actor: session.account.id, action: name }, tx)
        return done.value
      })
      return { ok: true, value }
    } catch (thrown) {
      return { ok: false, problem: problemOf(refusal(name, thrown, actor)) }
    }
  })
}

interface AccountActionParts<Input, Value> {
  readonly schema: z.ZodType<Input>
  readonly run: (context: {
    readonly input: Input
    readonly session: ValidSession
    readonly headers: Pick<Headers, 'get'>
  }) => Promise<Value>
}

/** An action of somebody signed in on their own account. */
export function accountAction<Input, Value>(
  name: ActionName,
  { schema, run }: AccountActionParts<Input, Value>,
): (input: unknown) => Promise<Answer<Value>> {
  return named(name, async (raw: unknown) => {
    let actor: string | null = null
    try {
      const from = await headers()
      demandOurPages(from)
      const session = await demandSession()
      actor = session.account.id
      return { ok: true, value: await run({ input: demandValid(schema, raw), session, headers: from }) }
    } catch (thrown) {
      return { ok: false, problem: problemOf(refusal(name, thrown, actor)) }
    }
  })
}

interface OpenActionParts<Input, Value> {
  readonly schema: z.ZodType<Input>
  readonly run: (context: { readonly input: Input; readonly headers: Pick<Headers, 'get'> }) => Promise<Value>
}

/** An action for whoever comes: signing up, signing in, asking for a link. */
export function openAction<Input, Value>(
  name: ActionName,
  { schema, run }: OpenActionParts<Input, Value>,
): (input: unknown) => Promise<Answer<Value>> {
  if (permissions[name] !== 'anyone') throw new Error(`The permission table does not open ${name} to everybody.`)
  return named(name, async (raw: unknown) => {
    try {
      const from = await headers()
      demandOurPages(from)
      return { ok: true, value: await run({ input: demandValid(schema, raw), headers: from }) }
    } catch (thrown) {
      return { ok: false, problem: problemOf(refusal(name, thrown, null)) }
    }
  })
}

async function demandSession(): Promise<ValidSession> {
  const session = await currentSession()
  if (!session) throw new AppError('not-signed-in', 'You are signed out. Sign in again; what you typed is still here.')
  return session
}

/** A member in another role hears that the role may not; anybody else, that there is no such thing. */
export async function denial(what: string, findAsMember: () => Promise<unknown>): Promise<AppError> {
  const isMember = (await findAsMember()) !== null
  return isMember
    ? new AppError('forbidden', `Your role in this team may not do this with the ${what}.`)
    : notFound(what)
}
