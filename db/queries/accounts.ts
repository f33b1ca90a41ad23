import 'server-only'
import { and, eq, gt, isNull, ne } from 'drizzle-orm'
import { database, type Executor, type Transaction } from '../client'
import { accounts, credentials, passwordResets } from '../schema'

/*
 * Accounts before anyone is signed in: these queries take no viewer, and only lib/auth calls them.
 */

export interface AccountRow {
  readonly id: string
  readonly email: string
  readonly label: string
}

const accountColumns = { id: accounts.id, email: accounts.email, label: accounts.label }

/** What a sign-in must check; `email` in lower case. */
export async function findCredentials(
  email: string,
  on: Executor = database(),
): Promise<(AccountRow & { readonly passwordHash: string }) | null> {
  const [row] = await on
    .select({ ...accountColumns, passwordHash: credentials.passwordHash })
    .from(accounts)
    .innerJoin(credentials, eq(credentials.accountId, accounts.id))
    .where(eq(accounts.email, email))
  return row ?? null
}

export async function findPasswordHash(accountId: string, on: Executor = database()): Promise<string | null> {
  const [row] = await on
    .select({ passwordHash: credentials.passwordHash })
    .from(credentials)
    .where(eq(credentials.accountId, accountId))
  return row?.passwordHash ?? null
}

export async function findAccountByEmail(email: string, on: Executor = database()): Promise<AccountRow | null> {
  const [row] = await on.select(accountColumns).from(accounts).where(eq(accounts.email, email))
  return row ?? null
}

/** Null when the address has an account already. */
export async function insertAccount(
  tx: Transaction,
  { email, label, passwordHash }: { readonly email: string; readonly label: string; readonly passwordHash: string },
): Promise<AccountRow | null> {
  const [row] = await tx.insert(accounts).values({ email, label }).onConflictDoNothing().returning(accountColumns)
  if (!row) return null
  await tx.insert(credentials).values({ accountId: row.id, passwordHash })
  return row
}

export async function replacePasswordHash(tx: Transaction, accountId: string, passwordHash: string): Promise<void> {
  await tx.update(credentials).set({ passwordHash, changedAt: new Date() }).where(eq(credentials.accountId, accountId))
}

export async function insertReset(
  accountId: string,
  tokenHash: string,
  expiresAt: Date,
  on: Executor = database(),
): Promise<void> {
  await on.insert(passwordResets).values({ accountId, tokenHash, expiresAt })
}

/** The account that a link belongs to while it can still be used; the link stays usable. */
export async function peekReset(tokenHash: string, now: Date, on: Executor = database()): Promise<AccountRow | null> {
  const [row] = await on
    .select(accountColumns)
    .from(passwordResets)
    .innerJoin(accounts, eq(accounts.id, passwordResets.accountId))
    .where(
      and(eq(passwordResets.tokenHash, tokenHash), isNull(passwordResets.usedAt), gt(passwordResets.expiresAt, now)),
    )
  return row ?? null
}

/**
 * Spends a link, and with it every other link of that account. One statement decides, so that of two requests with the same link only one
 * gets the account.
 */
export async function spendReset(tx: Transaction, tokenHash: string, now: Date): Promise<string | null> {
  const [row] = await tx
    .update(passwordResets)
    .set({ usedAt: now })
    .where(
      and(eq(passwordResets.tokenHash, tokenHash), isNull(passwordResets.usedAt), gt(passwordResets.expiresAt, now)),
    )
    .returning({ accountId: passwordResets.accountId })
  if (!row) return null
  await voidResets(tx, row.accountId, now, tokenHash)
  return row.accountId
}

export async function voidResets(tx: Transaction, accountId: string, now: Date, except = ''): Promise<void> {
  await tx
    .update(passwordResets)
    .set({ usedAt: now })
    .where(
      and(eq(passwordResets.accountId, accountId), isNull(passwordResets.usedAt), ne(passwordResets.tokenHash, except)),
    )
}
