import type { Metadata } from 'next'
import { notFound } from 'next/navigation'
import { connection } from 'next/server'
import { Header } from '@/components/frame/header'
import { env } from '@/lib/env'
import { formatInstant } from '@/lib/format/quantity'
import { isMailboxOpen, readMailbox } from '@/lib/mail/mailbox'

export const metadata: Metadata = { title: 'Local mailbox' }

/** Mails that the app sent on this machine; there only when the start command runs its own mailbox. */
export default async function MailboxPage() {
  await connection()
  if (!isMailboxOpen()) notFound()
  const messages = await readMailbox()
  return (
    <>
      <Header crumbs={[{ label: 'Local mailbox' }]} />
      <main className="mx-auto w-full max-w-3xl px-4 py-8 sm:px-6">
        <h1 className="text-[26px]">Local mailbox</h1>
        <p className="mt-2 text-[14px] text-pencil">
          Without a mail server, mails stay on this machine and are read here. Newest first.
        </p>
        {messages.length === 0 ? <p className="mt-8 border-t border-graph-strong pt-4">No mail yet.</p> : null}
        {messages.map((message) => (
          <article key={message.name} className="mt-8 border-t border-graph-strong pt-4">
            <h2 className="text-[17px]">{message.subject}</h2>
            <p className="numeric text-[13px] text-pencil">
              to {message.to.join(', ')} · {formatInstant(message.receivedAt)}
            </p>
            <p className="mt-3 text-[14px] break-words whitespace-pre-line">
              <WithLinks text={message.text} />
            </p>
          </article>
        ))}
      </main>
    </>
  )
}

/** Addresses of this app become links; any other stays text. */
function WithLinks({ text }: { text: string }) {
  const { APP_ORIGIN } = env()
  return text.split(/(https?:\/\/\S+)/).map((part, index) =>
    part.startsWith(`${APP_ORIGIN}/`) ? (
      <a key={index} href={part} className="text-spruce underline underline-offset-2">
        {part}
      </a>
    ) : (
      part
    ),
  )
}
