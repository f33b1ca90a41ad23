import { mkdirSync, readdirSync, renameSync, rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { SMTPServer } from 'smtp-server'
import { readMail } from './mime.mjs'

/*
 * The local mailbox: an SMTP server on loopback that delivers nothing and keeps each message as a file, for people who try the product
 * without a mail server. It is a process of its own; the start command gives it a folder and learns its port over the channel between them.
 */

/** The oldest messages go first; reset links are short-lived anyway. */
const keptMessages = 500
const largestBytes = 5 * 1024 * 1024

/**
 * @param {string} folder
 * @returns {(message: Record<string, unknown>) => string} keeps a message and answers its file's name
 */
export function createMailStore(folder) {
  mkdirSync(folder, { recursive: true, mode: 0o700 })
  let count = 0
  return (message) => {
    const stamp = new Date().toISOString().replace(/[-:.]/g, '')
    const name = `${stamp}-${String(++count).padStart(4, '0')}.json`
    // Renamed into place, so that a reader never meets half a message.
    const draft = join(folder, `.${name}`)
    writeFileSync(draft, `${JSON.stringify(message, null, 2)}\n`, { mode: 0o600 })
    renameSync(draft, join(folder, name))
    const names = readdirSync(folder).filter((file) => file.endsWith('.json') && !file.startsWith('.'))
    for (const old of names.sort().slice(0, -keptMessages)) rmSync(join(folder, old), { force: true })
    return name
  }
}

/**
 * @param {{ folder: string, port?: number }} options
 * @returns {Promise<{ port: number, close: () => Promise<void> }>}
 */
export function startMailbox({ folder, port = 0 }) {
  const keep = createMailStore(folder)
  const server = new SMTPServer({
    authOptional: true,
    // On loopback there is nothing to keep secret from, and a certificate of our own would only be refused.
    disabledCommands: ['STARTTLS', 'AUTH'],
    size: largestBytes,
    logger: false,
    onData(stream, session, callback) {
      /** @type {Buffer[]} */
      const chunks = []
      let bytes = 0
      stream.on('data', (chunk) => {
        bytes += chunk.length
        if (bytes <= largestBytes) chunks.push(chunk)
      })
      stream.on('end', () => {
        if (stream.sizeExceeded || bytes > largestBytes) {
          callback(Object.assign(new Error(`A message may have ${largestBytes} bytes at most.`), { responseCode: 552 }))
          return
        }
        try {
          const mail = readMail(Buffer.concat(chunks))
          const to = session.envelope.rcptTo.map((recipient) => recipient.address)
          keep({
            to,
            from: mail.from,
            subject: mail.subject,
            text: mail.text,
            html: mail.html,
            receivedAt: new Date().toISOString(),
          })
          callback()
        } catch (error) {
          callback(error instanceof Error ? error : new Error(String(error)))
        }
      })
    },
  })
  return new Promise((resolve, reject) => {
    server.once('error', reject)
    const listener = server.listen(port, '127.0.0.1', () => {
      server.off('error', reject)
      server.on('error', (error) => process.stderr.write(`${error.message}\n`))
      const address = listener.address()
      resolve({
        port: typeof address === 'object' && address ? address.port : port,
        close: () => new Promise((done) => server.close(() => done())),
      })
    })
  })
}
