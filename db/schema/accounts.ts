import { sql } from 'drizzle-orm'
import { check, index, pgTable, text, timestamp, uniqueIndex, uuid } from 'drizzle-orm/pg-core'

/** People who sign in. The password hash stands apart, so that reading an account can't carry it along. */
export const accounts = pgTable(
  'accounts',
  {
    id: uuid().primaryKey().defaultRandom(),
    email: text().notNull(),
    /** How the person is shown to others, e.g. "designer, footbridge team"; the e-mail address is never shown. */
    label: text().notNull(),
    createdAt: timestamp('created_at', { withTimezone: true }).notNull().defaultNow(),
  },
  (table) => [
    // Two accounts that differ in letter case only would let one person pose as another.
    uniqueIndex('accounts_email_key').on(table.email),
    check('accounts_email_lowercase', sql`${table.email} = lower(${table.email})`),
    check('accounts_email_length', sql`length(${table.email}) between 3 and 254`),
    check('accounts_label_length', sql`length(${table.label}) between 1 and 80`),
  ],
)

export const credentials = pgTable('credentials', {
  accountId: uuid('account_id')
    .primaryKey()
    .references(() => accounts.id, { onDelete: 'cascade' }),
  /** argon2id, in its own encoded form with salt and parameters. */
  passwordHash: text('password_hash').notNull(),
  changedAt: timestamp('changed_at', { withTimezone: true }).notNull().defaultNow(),
})

/** Mailed links. Only the SHA-256 of the token is kept, so that a copy of this table opens no account. */
export const passwordResets = pgTable(
  'password_resets',
  {
    tokenHash: text('token_hash').primaryKey(),
    accountId: uuid('account_id')
      .notNull()
      .references(() => accounts.id, { onDelete: 'cascade' }),
    createdAt: timestamp('created_at', { withTimezone: true }).notNull().defaultNow(),
    expiresAt: timestamp('expires_at', { withTimezone: true }).notNull(),
    usedAt: timestamp('used_at', { withTimezone: true }),
  },
  (table) => [
    // A reset voids the account's other links.
    index('password_resets_account_id_index').on(table.accountId),
    check('password_resets_hashed', sql`${table.tokenHash} ~ '^[0-9a-f]{64}$'`),
  ],
)
