import { existsSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { build, buildIsCurrent, sourceHash } from './build.mjs'
import { startApp, startMailboxProcess } from './children.mjs'
import { openDatabase, runDatabaseScript } from './database.mjs'
import { makePrivateFolder, serverUser } from './database-home.mjs'
import { installPackages, packagesAreCurrent } from './install.mjs'
import { dataPlaces, distFolder, root } from './places.mjs'
import { demandPort, readPort } from './ports.mjs'
import { findPostgres } from './postgres-binaries.mjs'
import { takeLock } from './processes.mjs'
import { endRunning } from './run.mjs'
import { createSpeaker } from './say.mjs'
import { Trouble, asTrouble } from './trouble.mjs'

/** The person asked to stop before everything was up; not an error. */
class Leaving extends Error {}

/** The start command: everything that is missing is made, everything that runs is started, and all of it is stopped again at the end. */
export async function launch() {
  const { line, step } = createSpeaker()
  /** @type {(() => Promise<void> | void)[]} what must be undone, the last first */
  const undo = []
  let leaving = false
  /** @type {() => void} */
  let askedToLeave = () => {}
  const leave = new Promise((resolve) => (askedToLeave = () => resolve(undefined)))
  const onSignal = () => {
    if (leaving) return
    leaving = true
    line('')
    line('Stopping …')
    endRunning()
    askedToLeave()
  }
  for (const signal of /** @type {const} */ (['SIGINT', 'SIGTERM', 'SIGHUP'])) process.on(signal, onSignal)
  // A terminal that was closed can't be written to; that is no reason to leave a server behind.
  for (const stream of [process.stdout, process.stderr]) stream.on('error', () => {})
  /** @type {typeof step} */
  const stepUnlessLeaving = async (what, action, note) => {
    if (leaving) throw new Leaving()
    try {
      return await step(what, action, note)
    } catch (error) {
      throw leaving ? new Leaving() : error
    }
  }

  let code = 0
  try {
    const running = await bringUp({ line, step: stepUnlessLeaving }, undo)
    if (leaving) throw new Leaving()
    announce(line, running)
    const fallen = await Promise.race([leave.then(() => undefined), ...running.watched])
    if (fallen && !leaving)
      throw new Trouble(`${fallen.what} ended by itself (${await fallen.how}); what it said is in ${fallen.logFile}.`)
  } catch (error) {
    if (!(error instanceof Leaving)) {
      code = 1
      complain(error)
    }
  }
  for (const action of undo.reverse()) {
    try {
      await action()
    } catch (error) {
      code = 1
      complain(error)
    }
  }
  if (leaving && code === 0) line('Stopped.')
  process.exit(code)
}

/**
 * @param {{ line: (text?: string) => void, step: import('./say.mjs').Speaker['step'] }} say
 * @param {(() => Promise<void> | void)[]} undo
 */
async function bringUp({ line, step }, undo) {
  line('Polewright')
  const places = dataPlaces()
  const dist = distFolder()
  const port = readPort(process.env.PORT, 3000)
  const given = { database: process.env.DATABASE_URL || undefined, smtp: process.env.SMTP_URL || undefined }

  // The database's own user must be able to pass through the folder; where PostgreSQL is yet to be installed, it gets that right later.
  makePrivateFolder(places.data, given.database || !findPostgres() ? undefined : await serverUser())
  const lock = takeLock(places.lock, { port })
  if (!lock.taken)
    throw new Trouble(
      `Polewright is already running from this folder, at http://127.0.0.1:${lock.holder.port} (process ${lock.holder.pid}).`,
    )
  undo.push(lock.release)
  await demandPort(port)

  if (!packagesAreCurrent(root))
    await step('Installing the npm packages', () => installPackages(root, places.installLog))

  const database = await step(
    given.database ? 'Using the database' : 'Starting the database',
    () => openDatabase({ folder: places.postgres, given: given.database, say: (text) => line(`  ${text}`) }),
    (opened) => opened.note,
  )
  undo.push(() => database.stop())
  await step('Migrating it', () =>
    runDatabaseScript('db/migrate.ts', database.url, 'The database could not be migrated'),
  )
  const demo = process.env.POLEWRIGHT_DEMO !== 'no'
  if (demo)
    await step('Looking after the demo data', () =>
      runDatabaseScript('db/seed/run.ts', database.url, 'The demo data could not be stored'),
    )

  const hash = sourceHash()
  if (!buildIsCurrent(hash, dist))
    await step('Building the app (a minute or two)', () => build({ dist, hash, logFile: places.buildLog }))

  /** @type {{ what: string, how: Promise<string>, logFile: string, child: Promise<unknown> }[]} */
  const parts = []
  /** @type {NodeJS.ProcessEnv} */
  const env = {
    DATABASE_URL: database.url,
    APP_ORIGIN: process.env.APP_ORIGIN || `http://127.0.0.1:${port}`,
    MAILBOX_DIR: '',
  }
  if (!given.smtp) {
    const mailbox = await step('Starting the local mailbox', () =>
      startMailboxProcess({ folder: places.mailbox, logFile: places.mailLog }),
    )
    undo.push(() => mailbox.stop())
    parts.push({ what: 'The local mailbox', how: mailbox.ended, logFile: places.mailLog, child: mailbox.ended })
    env.SMTP_URL = `smtp://127.0.0.1:${mailbox.port}`
    env.MAILBOX_DIR = places.mailbox
  }
  const app = await step('Starting the app', () => startApp({ port, dist, env, logFile: places.appLog }))
  undo.push(() => app.stop())
  parts.push({ what: 'The app', how: app.ended, logFile: places.appLog, child: app.ended })

  return {
    origin: app.origin,
    demo,
    mailbox: !given.smtp,
    appLog: places.appLog,
    watched: parts.map((part) => part.child.then(() => part)),
  }
}

/**
 * @param {(text?: string) => void} line
 * @param {{ origin: string, demo: boolean, mailbox: boolean, appLog: string }} running
 */
function announce(line, { origin, demo, mailbox, appLog }) {
  line()
  line(`Polewright is ready at ${origin}`)
  const accountsFile = join(root, 'db/seed/accounts.json')
  if (demo && existsSync(accountsFile)) {
    /** @type {{ email: string, password: string, role: string }[]} */
    const accounts = JSON.parse(readFileSync(accountsFile, 'utf8'))
    const width = Math.max(...accounts.map(({ email }) => email.length))
    line()
    line('Demo accounts:')
    for (const { email, password, role } of accounts) line(`  ${role.padEnd(11)} ${email.padEnd(width)}  ${password}`)
  }
  line()
  if (mailbox) line(`Mail stays on this machine: read it at ${origin}/dev/mailbox`)
  line(`Log: ${appLog}`)
  line('Ctrl-C stops everything.')
}

/** @param {unknown} error */
function complain(error) {
  const known = asTrouble(error)
  const debug = Boolean(process.env.POLEWRIGHT_DEBUG)
  if (known instanceof Trouble) process.stderr.write(`${known.message}\n`)
  else process.stderr.write(`Polewright could not start: ${error instanceof Error ? error.message : String(error)}\n`)
  if (!debug) return
  /** @type {unknown} */
  let cause = error
  while (cause instanceof Error) {
    process.stderr.write(`${cause.stack ?? cause.message}\n`)
    cause = cause.cause
  }
}
