import { readFileSync, readdirSync } from 'node:fs'
import { join } from 'node:path'
import type { BrowserContext, Page } from 'playwright-core'
import { inject } from 'vitest'
import { z } from 'zod'
import accounts from '@/db/seed/accounts.json' with { type: 'json' }
import { openPage } from './browser'

/** The demo account of a role. */
export function demoAccount(role: string): { readonly email: string; readonly password: string } {
  const account = accounts.find((each) => each.role === role)
  if (!account) throw new Error(`There is no demo account for "${role}".`)
  return account
}

/** Signs in through the form, as a person would. */
export async function signIn(
  page: Page,
  { email, password }: { readonly email: string; readonly password: string },
): Promise<void> {
  await page.goto('/sign-in')
  await page.getByLabel(/e-?mail/i).fill(email)
  await page.getByLabel(/^password/i).fill(password)
  await page.getByRole('button', { name: /^sign in/i }).click()
  await page.waitForURL((url) => !url.pathname.startsWith('/sign-in'))
}

const states = new Map<string, Awaited<ReturnType<BrowserContext['storageState']>>>()

/** Cookies of a demo account, signed in once for all tests of a file: sign-ins are rate-limited. */
export async function signedIn(role: string): Promise<Awaited<ReturnType<BrowserContext['storageState']>>> {
  const known = states.get(role)
  if (known) return known
  const { page, context, close } = await openPage()
  await signIn(page, demoAccount(role))
  const state = await context.storageState()
  states.set(role, state)
  await close()
  return state
}

const mailSchema = z.object({
  to: z.array(z.string()),
  from: z.string(),
  subject: z.string(),
  text: z.string(),
  html: z.string(),
  receivedAt: z.string(),
})

/** The mails that the local mailbox has for an address, the oldest first. */
export function mailsTo(address: string): z.infer<typeof mailSchema>[] {
  const folder = inject('mailbox')
  return readdirSync(folder)
    .filter((name) => name.endsWith('.json') && !name.startsWith('.'))
    .sort()
    .map((name) => mailSchema.parse(JSON.parse(readFileSync(join(folder, name), 'utf8'))))
    .filter((mail) => mail.to.includes(address))
}
