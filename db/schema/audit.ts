import { bigint, index, jsonb, pgTable, text, timestamp, uuid } from 'drizzle-orm/pg-core'

/**
 * Who did what to what. Append-only by trigger. Actor and team carry no foreign key: a trail must outlive what it speaks of.
 */
export const audit = pgTable(
  'audit',
  {
    id: bigint({ mode: 'number' }).primaryKey().generatedAlwaysAsIdentity(),
    at: timestamp({ withTimezone: true }).notNull().defaultNow(),
    /** Account; null when nobody was signed in (a failed sign-in). */
    actor: uuid(),
    team: uuid(),
    action: text().notNull(),
    /** Kind and id, e.g. "design:…". */
    object: text().notNull(),
    details: jsonb().$type<Readonly<Record<string, string | number | boolean | null>>>().notNull().default({}),
  },
  (table) => [
    // A team's trail, newest first.
    index('audit_team_at_index').on(table.team, table.at),
    index('audit_object_index').on(table.object),
  ],
)
