import 'server-only'
import { readdir, readFile } from 'node:fs/promises'
import { join } from 'node:path'
import { z } from 'zod'
import { env } from '@/lib/env'

/* The start command's local mailbox, as files. Only there when MAILBOX_DIR is set, which no deployment with a mail server does. */

const messageSchema = z.object({
  to: z.array(z.string()),
  from: z.string().catch(''),
  subject: z.string().catch(''),
  text: z.string().catch(''),
  receivedAt: z.string(),
})

export type MailboxMessage = z.infer<typeof messageSchema> & { readonly name: string }

export const isMailboxOpen = (): boolean => env().MAILBOX_DIR !== undefined

/** The newest messages first. A file that is no message is passed over. */
export async function readMailbox(limit = 50): Promise<readonly MailboxMessage[]> {
  const folder = env().MAILBOX_DIR
  if (folder === undefined) return []
  const names = (await readdir(folder)).filter((name) => name.endsWith('.json') && !name.startsWith('.'))
  const newest = names.sort().reverse().slice(0, limit)
  const messages = await Promise.all(newest.map((name) => readMessage(folder, name)))
  return messages.filter((message) => message !== null)
}

async function readMessage(folder: string, name: string): Promise<MailboxMessage | null> {
  try {
    const parsed = messageSchema.safeParse(JSON.parse(await readFile(join(folder, name), 'utf8')))
    return parsed.success ? { ...parsed.data, name } : null
  } catch (error) {
    // Swept away between listing and reading, or cut short by a full disk.
    if (error instanceof SyntaxError || (error instanceof Error && 'code' in error && error.code === 'ENOENT'))
      return null
    throw error
  }
}
