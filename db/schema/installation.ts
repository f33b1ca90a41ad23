import { pgTable, text, timestamp } from 'drizzle-orm/pg-core'

/** Things done once to this database, such as planting the demo; a second start finds the mark and leaves the data alone. */
export const installation = pgTable('installation', {
  mark: text().primaryKey(),
  at: timestamp({ withTimezone: true }).notNull().defaultNow(),
})
