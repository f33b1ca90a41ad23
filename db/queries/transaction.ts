import 'server-only'
import { database, type Transaction } from '../client'

export type { Transaction } from '../client'

/** All or nothing. */
export function inTransaction<T>(run: (tx: Transaction) => Promise<T>): Promise<T> {
  return database().transaction(run)
}
