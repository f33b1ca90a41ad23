import 'server-only'
import { unstable_rethrow } from 'next/navigation'
import type { z } from 'zod'
import { AppError, asAppError } from '@/lib/errors'
import { log } from '@/lib/log'
import type { ActionName } from '@/lib/permissions'

/** Checks an input; the first complaint speaks, with the path of its field. */
export function demandValid<Output>(schema: z.ZodType<Output>, input: unknown): Output {
  const parsed = schema.safeParse(input)
  if (parsed.success) return parsed.data
  const [issue] = parsed.error.issues
  throw new AppError('not-valid', issue?.message ?? 'The input is not valid.', {
    ...(issue && issue.path.length > 0 && { field: issue.path.join('.') }),
    cause: parsed.error,
  })
}

/**
 * Turns what was thrown into what may be said outside, and writes the rest to the log: denials as warnings, our own failures as errors
 * with their cause. Redirects and the like, which Next throws, pass through.
 */
export function refusal(action: ActionName, thrown: unknown, actor: string | null): AppError {
  unstable_rethrow(thrown)
  const error = asAppError(thrown)
  const record = { action, actor, code: error.code, status: error.status }
  if (error.status >= 500) log().error({ ...record, err: thrown }, 'action failed')
  else if (error.status === 401 || error.status === 403 || error.status === 404 || error.status === 429)
    log().warn(record, 'action denied')
  return error
}
