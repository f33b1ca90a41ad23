import { fileURLToPath } from 'node:url'
import { drizzle } from 'drizzle-orm/node-postgres'
import { migrate } from 'drizzle-orm/node-postgres/migrator'
import pg from 'pg'
import { env } from '@/lib/env'

const migrationsFolder = fileURLToPath(new URL('../drizzle', import.meta.url))

/** Any number, as long as no other program on this database takes the same one. */
const MIGRATION_LOCK = 7_331_905_117

/**
 * Brings a database to the newest schema. Processes that start at the same time wait for each other: drizzle's migrator takes no lock of
 * its own, and two of them would run the same statements twice.
 */
export async function migrateDatabase(connectionString: string): Promise<void> {
  // One connection, since the lock belongs to the connection that took it.
  const client = new pg.Client({ connectionString, connectionTimeoutMillis: 10_000 })
  await client.connect()
  try {
    await client.query('select pg_advisory_lock($1)', [MIGRATION_LOCK])
    await migrate(drizzle(client), { migrationsFolder })
  } finally {
    // Ends the lock as well.
    await client.end()
  }
}

if (process.argv[1] === fileURLToPath(import.meta.url)) await migrateDatabase(env().DATABASE_URL)
