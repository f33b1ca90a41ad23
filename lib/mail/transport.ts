import 'server-only'
import { createTransport } from 'nodemailer'
import { env } from '@/lib/env'

export interface Mail {
  readonly to: string
  readonly subject: string
  readonly text: string
  readonly html: string
}

/** Sends one mail through SMTP_URL; throws when the server can't be reached or refuses it. */
export async function sendMail(mail: Mail): Promise<void> {
  const { SMTP_URL, MAIL_FROM } = env()
  if (SMTP_URL === undefined) throw new Error('SMTP_URL is not set, so that no mail can be sent.')
  const transport = createTransport({
    url: SMTP_URL,
    connectionTimeout: 10_000,
    greetingTimeout: 10_000,
    socketTimeout: 20_000,
    // A mail is made of what is in it, never of files or addresses named in it.
    disableFileAccess: true,
    disableUrlAccess: true,
  })
  try {
    await transport.sendMail({ from: MAIL_FROM, ...mail })
  } finally {
    transport.close()
  }
}
