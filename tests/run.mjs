import { mkdirSync } from 'node:fs'
import { join } from 'node:path'
import { installPackages, packagesAreCurrent } from '../lib/launch/install.mjs'
import { root } from '../lib/launch/places.mjs'
import { endRunning } from '../lib/launch/run.mjs'
import { runStaticChecks, testDist } from './runner/checks.mjs'
import { createTally, finish } from './runner/tally.mjs'
import { demandChromium, demandCompiler } from './runner/tools.mjs'
import { runVitest } from './runner/vitest.mjs'

/*
 * npm test: all runners, one after another, from nothing. It goes on after failures, and the last line it prints is the count over all of
 * them. Plain Node without packages up to the point where they are installed.
 */

const scratch = join(root, '.test-data')
const tally = createTally()
/** @type {(() => Promise<void>)[]} */
const undo = []
let leaving = false

for (const signal of /** @type {const} */ (['SIGINT', 'SIGTERM', 'SIGHUP'])) {
  process.on(signal, () => {
    if (leaving) return
    leaving = true
    tally.fail(`stopped by ${signal}`)
    endRunning()
  })
}

async function everything() {
  mkdirSync(scratch, { recursive: true })
  if (!packagesAreCurrent(root)) {
    process.stdout.write('Installing the npm packages\n')
    const installed = await tally.check('npm packages are installed from the lock', async () => {
      await installPackages(root, join(scratch, 'install.log'))
      return true
    })
    if (!installed) return
  }
  if (leaving) return
  await runStaticChecks(tally)
  if (leaving) return

  const compiler = await tally.check('a C compiler is there', demandCompiler)
  const { openTestCluster } = await import('./helpers/test-cluster.mjs')
  const cluster = await tally.check('a database server of our own starts', openTestCluster)
  if (cluster) undo.push(cluster.release)
  if (leaving) return

  const database = cluster ? { TEST_DATABASE_URL: cluster.adminUrl } : {}
  const env = { ...database, ...(compiler ? { CC: compiler } : {}) }
  tally.add(
    'unit, component, database and app tests',
    await runVitest({ env, report: join(scratch, 'vitest.json'), timeoutSeconds: 1800 }),
  )
  if (leaving) return

  const { ensureTestBuild, startTestServer } = await import('./helpers/test-server.mjs')
  const built = await tally.check('the production build', async () => {
    await ensureTestBuild(testDist)
    return true
  })
  const chromium = await tally.check('Chromium is there', demandChromium)
  if (leaving) return
  const server =
    cluster && built
      ? await tally.check('the app starts and answers', () =>
          startTestServer({ adminUrl: cluster.adminUrl, dist: testDist }),
        )
      : undefined
  if (server) undo.push(server.stop)
  if (leaving) return
  if (!server || !chromium) {
    tally.fail('browser tests could not be run')
    return
  }
  const browser = await runVitest({
    args: ['--config', 'tests/browser/vitest.config.ts'],
    env: { TEST_BASE_URL: server.origin, MAILBOX_DIR: server.mailbox, CHROMIUM_PATH: chromium },
    report: join(scratch, 'browser.json'),
    timeoutSeconds: 2400,
  })
  tally.add('browser tests', browser)
}

try {
  await everything()
} catch (error) {
  process.stdout.write(`${error instanceof Error ? (error.stack ?? error.message) : String(error)}\n`)
  tally.fail('the test run itself broke down')
}
for (const action of undo.reverse()) {
  try {
    await action()
  } catch (error) {
    process.stdout.write(`${error instanceof Error ? (error.stack ?? error.message) : String(error)}\n`)
    tally.fail('cleaning up after the tests')
  }
}
finish(tally)
