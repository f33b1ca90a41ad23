import 'server-only'
import { createHash } from 'node:crypto'
import { RateLimiterPostgres, RateLimiterRes } from 'rate-limiter-flexible'
import { pool } from '@/db/client'
import { AppError } from '@/lib/errors'

/*
 * Counters in PostgreSQL, so that they hold over all processes and restarts. The table is made by a migration.
 */

const MINUTE = 60

const limits = {
  /** Guessing one account's password, from wherever. */
  'sign-in-account': { points: 10, duration: 15 * MINUTE },
  /** Trying many accounts from one place; an office shares an address. */
  'sign-in-address': { points: 60, duration: 15 * MINUTE },
  'sign-up-address': { points: 20, duration: 60 * MINUTE },
  /** Mails to one person. */
  'reset-account': { points: 4, duration: 60 * MINUTE },
  'reset-address': { points: 30, duration: 60 * MINUTE },
  'reset-link-address': { points: 30, duration: 15 * MINUTE },
} as const

export type Limit = keyof typeof limits

function limiter(name: Limit): RateLimiterPostgres {
  return new RateLimiterPostgres({
    storeClient: pool(),
    storeType: 'pool',
    tableName: 'rate_limits',
    tableCreated: true,
    // Its sweep is a timer in the process; ours runs at sign-in (see sweepLimits).
    clearExpiredByTimeout: false,
    keyPrefix: name,
    ...limits[name],
  })
}

/** Keys are e-mail and network addresses; the table needs only to tell them apart. */
const keyOf = (text: string) => createHash('sha256').update(text, 'utf8').digest('base64url')

/** Counts one attempt; throws when there were too many, saying when to try again. */
export async function countAttempt(name: Limit, who: string): Promise<void> {
  try {
    await limiter(name).consume(keyOf(who))
  } catch (thrown) {
    // The library rejects with its result when the limit is passed, and with an Error when the store failed.
    if (!(thrown instanceof RateLimiterRes)) throw thrown
    const retryAfterSeconds = Math.max(1, Math.ceil(thrown.msBeforeNext / 1000))
    const minutes = Math.ceil(retryAfterSeconds / 60)
    throw new AppError(
      'too-many',
      `Too many attempts. Try again in ${minutes} ${minutes === 1 ? 'minute' : 'minutes'}.`,
      {
        retryAfterSeconds,
      },
    )
  }
}

/** After a success: earlier failures are forgiven. */
export async function forgiveAttempts(name: Limit, who: string): Promise<void> {
  await limiter(name).delete(keyOf(who))
}

/** Takes one attempt back: only failures shall count against a place that many people share. */
export async function uncountAttempt(name: Limit, who: string): Promise<void> {
  await limiter(name).reward(keyOf(who), 1)
}

export async function sweepLimits(): Promise<void> {
  await pool().query('delete from rate_limits where expire < $1', [Date.now() - 60 * MINUTE * 1000])
}
