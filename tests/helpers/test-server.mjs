import { mkdirSync, rmSync } from 'node:fs'
import { join } from 'node:path'
import { build, buildIsCurrent, sourceHash } from '../../lib/launch/build.mjs'
import { startApp, startMailboxProcess } from '../../lib/launch/children.mjs'
import { runDatabaseScript } from '../../lib/launch/database.mjs'
import { root } from '../../lib/launch/places.mjs'
import { freePort } from '../../lib/launch/ports.mjs'
import { makeDatabase } from './test-cluster.mjs'

/*
 * The product as the browser tests meet it: the production build, a database of its own with the demo data, a mailbox of its own.
 */

const folder = join(root, '.test-data')

/** @param {string} dist */
export async function ensureTestBuild(dist) {
  mkdirSync(folder, { recursive: true })
  const hash = sourceHash()
  if (!buildIsCurrent(hash, dist)) await build({ dist, hash, logFile: join(folder, 'build.log') })
}

/**
 * @param {{ adminUrl: string, dist: string }} options
 * @returns {Promise<{ origin: string, mailbox: string, stop: () => Promise<void> }>}
 */
export async function startTestServer({ adminUrl, dist }) {
  /** @type {(() => Promise<void>)[]} */
  const undo = []
  const stop = async () => {
    for (const action of undo.splice(0).reverse()) await action()
  }
  try {
    const database = await makeDatabase(adminUrl)
    undo.push(database.drop)
    await runDatabaseScript('db/migrate.ts', database.url, 'The test database could not be migrated')
    await runDatabaseScript('db/seed/run.ts', database.url, 'The demo data could not be stored')

    const port = await freePort()
    const mailbox = join(folder, `mailbox-${port}`)
    mkdirSync(mailbox, { recursive: true, mode: 0o700 })
    undo.push(async () => rmSync(mailbox, { recursive: true, force: true }))
    const mail = await startMailboxProcess({ folder: mailbox, logFile: join(folder, 'mailbox.log') })
    undo.push(mail.stop)

    const env = {
      DATABASE_URL: database.url,
      SMTP_URL: `smtp://127.0.0.1:${mail.port}`,
      MAILBOX_DIR: mailbox,
      APP_ORIGIN: `http://127.0.0.1:${port}`,
    }
    const app = await startApp({ port, dist, env, logFile: join(folder, 'app.log') })
    undo.push(app.stop)
    return { origin: app.origin, mailbox, stop }
  } catch (error) {
    await stop()
    throw error
  }
}
