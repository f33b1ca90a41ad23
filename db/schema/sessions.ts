import { sql } from 'drizzle-orm'
import { check, index, pgTable, text, timestamp, uuid } from 'drizzle-orm/pg-core'
import { accounts } from './accounts'

export const sessions = pgTable(
  'sessions',
  {
    /** SHA-256 of the token in the cookie, hex: who reads this table can't pose as anyone. */
    id: text().primaryKey(),
    userId: uuid('user_id')
      .notNull()
      .references(() => accounts.id, { onDelete: 'cascade' }),
    /** End by idleness; moves with use. */
    expiresAt: timestamp('expires_at', { withTimezone: true, mode: 'date' }).notNull(),
    /** End whatever happens; never moves. */
    absoluteExpiresAt: timestamp('absolute_expires_at', { withTimezone: true, mode: 'date' }).notNull(),
    createdAt: timestamp('created_at', { withTimezone: true, mode: 'date' }).notNull(),
    /** What the browser said of itself, cut to length, so that its owner can tell sessions apart in a list. */
    agent: text().notNull().default(''),
  },
  (table) => [
    // Listing and ending one account's sessions.
    index('sessions_user_id_index').on(table.userId),
    check('sessions_id_hashed', sql`${table.id} ~ '^[0-9a-f]{64}$'`),
    check('sessions_idle_within_absolute', sql`${table.expiresAt} <= ${table.absoluteExpiresAt}`),
    check('sessions_agent_length', sql`length(${table.agent}) <= 200`),
  ],
)
