import { sql } from 'drizzle-orm'
import { check, integer, pgTable, text, timestamp, unique, uuid } from 'drizzle-orm/pg-core'
import { accounts } from './accounts'
import { teams } from './teams'

export const projects = pgTable(
  'projects',
  {
    id: uuid().primaryKey().defaultRandom(),
    teamId: uuid('team_id')
      .notNull()
      .references(() => teams.id, { onDelete: 'restrict' }),
    /** Opens every drawing number of the project, e.g. HMF in HMF-LP-012. */
    code: text().notNull(),
    name: text().notNull(),
    /** Serial of the newest design; counted here, under the row's lock, so that no number is given twice. */
    lastSerial: integer('last_serial').notNull().default(0),
    createdBy: uuid('created_by')
      .notNull()
      .references(() => accounts.id, { onDelete: 'restrict' }),
    createdAt: timestamp('created_at', { withTimezone: true }).notNull().defaultNow(),
  },
  (table) => [
    unique('projects_team_code_key').on(table.teamId, table.code),
    check('projects_code_form', sql`${table.code} ~ '^[A-Z][A-Z0-9]{1,5}$'`),
    check('projects_name_length', sql`length(${table.name}) between 1 and 120`),
    check('projects_serial_counts', sql`${table.lastSerial} >= 0`),
  ],
)
