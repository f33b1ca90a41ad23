import 'server-only'
import { z } from 'zod'
import type { Access } from '@/db/queries/access'
import { recordTrail, type Trail } from '@/db/queries/audit'
import { inTransaction, type Transaction } from '@/db/queries/transaction'
import type { ValidSession } from '@/lib/auth/sessions'
import { accessFor, anyAccess, currentSession } from '@/lib/auth/viewer'
import { AppError, problemResponse } from '@/lib/errors'
import type { TeamAction } from '@/lib/permissions'
import { denial } from './action'
import { demandOurPages } from './origin'
import { demandValid, refusal } from './refusals'

/*
 * The same way for route handlers, which serve what actions can't: autosave (actions of one page wait for each other) and downloads.
 */

export const noBody = z.undefined()

interface RouteParts<Params, Input, Found> {
  readonly params: z.ZodType<Params>
  /** The body's; `noBody` for GET. */
  readonly body: z.ZodType<Input>
  readonly maxBytes?: number
  readonly what: string
  readonly find: (access: Access, params: Params, tx: Transaction) => Promise<Found | null>
  readonly run: (context: {
    readonly request: Request
    readonly params: Params
    readonly input: Input
    readonly found: Found
    readonly access: Access
    readonly session: ValidSession
    readonly tx: Transaction
    /** Writes an audit row in the same transaction. */
    readonly trail: (row: Pick<Trail, 'team' | 'object' | 'details'>) => Promise<void>
  }) => Promise<Response>
}

type Handler = (request: Request, context: { params: Promise<unknown> }) => Promise<Response>

const names = new WeakMap<object, TeamAction>()
export const routeActionOf = (handler: object): TeamAction | undefined => names.get(handler)

export function teamRoute<Params, Input, Found>(name: TeamAction, parts: RouteParts<Params, Input, Found>): Handler {
  const handler: Handler = async (request, context) => {
    let actor: string | null = null
    try {
      const isRead = request.method === 'GET' || request.method === 'HEAD'
      if (!isRead) demandOurPages(request.headers)
      const session = await currentSession()
      if (!session) throw new AppError('not-signed-in', 'You are signed out. Sign in again, then repeat this.')
      actor = session.account.id
      const params = parts.params.safeParse(await context.params)
      // An id that can't be one is the id of nothing.
      if (!params.success) throw new AppError('not-found', `There is no such ${parts.what}.`)
      const input = demandValid(parts.body, isRead ? undefined : await readJson(request, parts.maxBytes ?? 65_536))
      const access = accessFor(session, name)
      const response = await inTransaction(async (tx) => {
        const found = await parts.find(access, params.data, tx)
        if (found === null) throw await denial(parts.what, () => parts.find(anyAccess(session), params.data, tx))
        return parts.run({
          request,
          params: params.data,
          input,
          found,
          access,
          session,
          tx,
          trail: (row) => recordTrail({ ...row, actor: session.account.id, action: name }, tx),
        })
      })
      return guarded(response)
    } catch (thrown) {
      return guarded(problemResponse(refusal(name, thrown, actor)))
    }
  }
  names.set(handler, name)
  return handler
}

/** Answers of routes are data: never stored by caches, never guessed to be another type, never framed. */
function guarded(response: Response): Response {
  const { headers } = response
  if (!headers.has('cache-control')) headers.set('cache-control', 'private, no-store')
  headers.set('x-content-type-options', 'nosniff')
  headers.set('content-security-policy', "default-src 'none'; frame-ancestors 'none'; sandbox")
  headers.set('cross-origin-resource-policy', 'same-origin')
  headers.set('referrer-policy', 'same-origin')
  return response
}

/** Reads a JSON body without ever holding more than `maxBytes` of it, whatever its header says. */
async function readJson(request: Request, maxBytes: number): Promise<unknown> {
  const type = request.headers.get('content-type')?.split(';')[0]?.trim().toLowerCase()
  if (type !== 'application/json')
    throw new AppError('wrong-type', 'Send JSON, with the content type application/json.')
  const tooLarge = () => new AppError('too-large', `At most ${Math.floor(maxBytes / 1024)} kB fit here.`)
  if (Number(request.headers.get('content-length') ?? 0) > maxBytes) throw tooLarge()
  const chunks: Uint8Array[] = []
  let size = 0
  const reader = request.body?.getReader()
  while (reader) {
    const { done, value } = await reader.read()
    if (done) break
    size += value.byteLength
    if (size > maxBytes) {
      await reader.cancel()
      throw tooLarge()
    }
    chunks.push(value)
  }
  const text = Buffer.concat(chunks).toString('utf8')
  try {
    return JSON.parse(text)
  } catch (cause) {
    throw new AppError('not-valid', 'The body is not JSON.', { cause })
  }
}
