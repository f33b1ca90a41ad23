import 'server-only'
import { drizzle, type NodePgDatabase } from 'drizzle-orm/node-postgres'
import pg from 'pg'
import { env } from '@/lib/env'
import * as schema from './schema'

export type Database = NodePgDatabase<typeof schema>
export type Transaction = Parameters<Parameters<Database['transaction']>[0]>[0]
/** Where a query runs: on its own, or inside a transaction that somebody else opened. */
export type Executor = Database | Transaction

interface Connections {
  readonly pool: pg.Pool
  readonly database: Database
}

// Kept on the global object: the development server loads this module anew on every edit, and each pool would hold its connections.
const holder = globalThis as typeof globalThis & { polewrightConnections?: Connections | undefined }

function connections(): Connections {
  holder.polewrightConnections ??= connect(env().DATABASE_URL)
  return holder.polewrightConnections
}

function connect(connectionString: string): Connections {
  const pool = new pg.Pool({
    connectionString,
    max: 10,
    // A page that says "the database is away" soon is better than one that never comes.
    connectionTimeoutMillis: 5_000,
    idleTimeoutMillis: 30_000,
    statement_timeout: 15_000,
    idle_in_transaction_session_timeout: 30_000,
  })
  // An idle connection that breaks (a database restart) is dropped by the pool; without a listener its error would end the process.
  pool.on('error', () => undefined)
  return { pool, database: drizzle(pool, { schema }) }
}

export const database = (): Database => connections().database
export const pool = (): pg.Pool => connections().pool

/** For scripts and tests, which must end. */
export async function closeConnections(): Promise<void> {
  const open = holder.polewrightConnections
  holder.polewrightConnections = undefined
  await open?.pool.end()
}
