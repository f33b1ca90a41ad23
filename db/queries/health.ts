import 'server-only'
import { sql } from 'drizzle-orm'
import { database } from '../client'

/** Whether the database answers. Takes no viewer: it reads nothing. */
export async function databaseAnswers(): Promise<boolean> {
  const { rows } = await database().execute(sql`select 1 as one`)
  return rows.length === 1
}
