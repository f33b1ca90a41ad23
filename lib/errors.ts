import { DesignError } from '@/dsp'
import type { Problem } from '@/lib/designs/types'

/*
 * Every refusal outside dsp is one of these: a typed code, a sentence for the person, and where known the field it belongs to. Actions
 * answer with a Problem, route handlers with application/problem+json (RFC 9457); both are made here.
 */

const statuses = {
  'not-signed-in': 401,
  'wrong-credentials': 401,
  forbidden: 403,
  'cross-site': 403,
  'not-found': 404,
  'name-taken': 409,
  'out-of-date': 409,
  'too-large': 413,
  'wrong-type': 415,
  'not-valid': 422,
  'link-spent': 422,
  'weak-password': 422,
  'too-many': 429,
  unexpected: 500,
  'database-away': 503,
} as const

export type ErrorCode = keyof typeof statuses

interface Particulars {
  readonly field?: string | undefined
  readonly nearest?: number | string | undefined
  /** For 429 and 503. */
  readonly retryAfterSeconds?: number | undefined
  readonly cause?: unknown
}

export class AppError extends Error {
  override readonly name = 'AppError'
  readonly code: ErrorCode
  readonly status: number
  readonly field: string | undefined
  readonly nearest: number | string | undefined
  readonly retryAfterSeconds: number | undefined

  constructor(code: ErrorCode, message: string, { field, nearest, retryAfterSeconds, cause }: Particulars = {}) {
    super(message, cause === undefined ? undefined : { cause })
    this.code = code
    this.status = statuses[code]
    this.field = field
    this.nearest = nearest
    this.retryAfterSeconds = retryAfterSeconds
  }
}

export const notFound = (what: string) =>
  new AppError('not-found', `There is no such ${what}, or it isn't yours to see.`)

/** Whatever was thrown, as something that may be told outside: refusals as they are, all else without its inside. */
export function asAppError(thrown: unknown): AppError {
  if (thrown instanceof AppError) return thrown
  if (thrown instanceof DesignError)
    return new AppError('not-valid', thrown.message, { field: thrown.field, nearest: thrown.nearest, cause: thrown })
  if (isDatabaseAway(thrown))
    return new AppError(
      'database-away',
      'The database can’t be reached just now. Nothing was changed; try again in a moment.',
      {
        retryAfterSeconds: 10,
        cause: thrown,
      },
    )
  return new AppError('unexpected', 'Something went wrong on our side. Nothing was changed.', { cause: thrown })
}

export function problemOf(error: AppError): Problem {
  // A DesignError's own code says more than "not-valid": screens place words by it.
  const code = error.cause instanceof DesignError ? error.cause.code : error.code
  return {
    code,
    message: error.message,
    ...(error.field !== undefined && { field: error.field }),
    ...(error.nearest !== undefined && { nearest: error.nearest }),
  }
}

/** RFC 9457: type, title, status and detail, and our own members beside them. */
export function problemResponse(error: AppError): Response {
  const { code, message, ...rest } = problemOf(error)
  const body = { type: 'about:blank', title: code, status: error.status, detail: message, code, message, ...rest }
  const headers = new Headers({ 'content-type': 'application/problem+json', 'cache-control': 'no-store' })
  if (error.retryAfterSeconds !== undefined) headers.set('retry-after', String(error.retryAfterSeconds))
  return new Response(JSON.stringify(body), { status: error.status, headers })
}

/** Follows causes: drizzle wraps what the driver threw. */
function* causes(thrown: unknown): Generator<unknown> {
  for (let at = thrown, depth = 0; at !== undefined && at !== null && depth < 8; depth += 1) {
    yield at
    at = at instanceof Error ? at.cause : undefined
  }
}

const codeOf = (value: unknown): string =>
  typeof value === 'object' && value !== null && 'code' in value && typeof value.code === 'string' ? value.code : ''

/** SQLSTATE class 08 and 57P0x, the sockets' own codes, and the pool's words for a wait in vain. */
function isDatabaseAway(thrown: unknown): boolean {
  for (const one of causes(thrown)) {
    const code = codeOf(one)
    if (/^(08...|57P0.|53300|ECONNREFUSED|ECONNRESET|ENOTFOUND|EPIPE|ETIMEDOUT)$/.test(code)) return true
    if (one instanceof Error && /timeout exceeded when trying to connect|Connection terminated/.test(one.message))
      return true
  }
  return false
}

/** Whether a constraint of that name stopped a write. */
export function brokeConstraint(thrown: unknown, name: string): boolean {
  for (const one of causes(thrown)) {
    if (typeof one === 'object' && one !== null && 'constraint' in one && one.constraint === name) return true
  }
  return false
}
