import { inject } from 'vitest'
import { makeDatabase } from './test-cluster.mjs'

export interface TestDatabase {
  readonly name: string
  readonly url: string
  /** Drops it, ending whatever is still connected. */
  drop(): Promise<void>
}

/**
 * A fresh migrated database of one's own. Each test file under tests/db and tests/app already has one, in process.env.DATABASE_URL
 * (database-setup.ts); this is for tests that need a second, or one to break.
 */
export function createTestDatabase(): Promise<TestDatabase> {
  return makeDatabase(inject('adminUrl'), inject('templateName'))
}

/** A database without any table, for tests of the migrations themselves. */
export function createEmptyDatabase(): Promise<TestDatabase> {
  return makeDatabase(inject('adminUrl'))
}
