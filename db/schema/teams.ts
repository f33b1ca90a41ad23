import { sql } from 'drizzle-orm'
import { check, index, pgTable, primaryKey, text, timestamp, uuid } from 'drizzle-orm/pg-core'
import type { Role } from '@/lib/designs/types'
import { accounts } from './accounts'

export const teams = pgTable(
  'teams',
  {
    id: uuid().primaryKey().defaultRandom(),
    name: text().notNull(),
    createdAt: timestamp('created_at', { withTimezone: true }).notNull().defaultNow(),
  },
  (table) => [check('teams_name_length', sql`length(${table.name}) between 1 and 80`)],
)

export const memberships = pgTable(
  'memberships',
  {
    teamId: uuid('team_id')
      .notNull()
      .references(() => teams.id, { onDelete: 'cascade' }),
    accountId: uuid('account_id')
      .notNull()
      .references(() => accounts.id, { onDelete: 'cascade' }),
    role: text().$type<Role>().notNull(),
    createdAt: timestamp('created_at', { withTimezone: true }).notNull().defaultNow(),
  },
  (table) => [
    primaryKey({ columns: [table.teamId, table.accountId] }),
    // Every access check starts from the account.
    index('memberships_account_id_index').on(table.accountId),
    // A role that the permission table doesn't know would be a hole in it.
    check('memberships_role_known', sql`${table.role} in ('owner', 'designer', 'reviewer', 'integrator', 'observer')`),
  ],
)
