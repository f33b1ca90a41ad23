import { DrizzleQueryError } from 'drizzle-orm'
import { describe, expect, it } from 'vitest'
import { loggedError } from '@/lib/log'

describe('a failed statement in the log', () => {
  it('is told without the values that were sent with it', () => {
    const cause = new Error('connect ECONNREFUSED 127.0.0.1:5432')
    const error = new DrizzleQueryError(
      'insert into "credentials" values ($1, $2)',
      ['someone@company.example', '$argon2id$secret'],
      cause,
    )
    // Guards the test itself: the values are there before.
    expect(error.message).toContain('$argon2id$secret')
    const told = JSON.stringify(loggedError(error))
    expect(told).not.toMatch(/argon2id|someone@/)
    expect(told).toContain('insert into')
    expect(told).toContain('ECONNREFUSED')
  })

  it('keeps what other errors say, with their cause', () => {
    const told = JSON.stringify(loggedError(new Error('outer', { cause: new Error('inner') })))
    expect(told).toContain('outer')
    expect(told).toContain('inner')
  })
})
