import { bigint, index, integer, pgTable, varchar } from 'drizzle-orm/pg-core'

/** Counters of rate-limiter-flexible; the shape is the one its PostgreSQL store expects. Keys are hashed by us. */
export const rateLimits = pgTable(
  'rate_limits',
  {
    key: varchar({ length: 255 }).primaryKey(),
    points: integer().notNull().default(0),
    /** Milliseconds since 1970. */
    expire: bigint({ mode: 'number' }),
  },
  // The store sweeps by this column.
  (table) => [index('rate_limits_expire_index').on(table.expire)],
)
