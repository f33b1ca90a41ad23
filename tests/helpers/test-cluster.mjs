import { mkdirSync, readdirSync, rmSync } from 'node:fs'
import { dirname, join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { writeFileSync } from 'node:fs'
import { randomBytes } from 'node:crypto'
import pg from 'pg'
import { startCluster } from '../../db/cluster.mjs'
import { isAlive, me, readHolder, withLock } from '../../lib/launch/processes.mjs'
import { run } from '../../lib/launch/run.mjs'

/*
 * The database server of the tests: DATABASE_URL's when that is set, else a cluster of our own in .test-data, shared by all test runs of this
 * checkout that happen at the same time and stopped by the last of them.
 */

const root = fileURLToPath(new URL('../../', import.meta.url))
const folder = join(root, '.test-data')
const leases = join(folder, 'users')

/** Every database that a test makes begins like this, so that what a killed run left behind can be told from all else. */
const prefix = 'polewright_test_'

/**
 * @returns {Promise<{ adminUrl: string, release: () => Promise<void> }>} `adminUrl` opens a database whose account may make others
 */
export async function openTestCluster() {
  const given = process.env.TEST_DATABASE_URL || process.env.DATABASE_URL
  if (given) return { adminUrl: given, release: async () => {} }

  mkdirSync(leases, { recursive: true })
  const lease = join(leases, `${process.pid}-${randomBytes(4).toString('hex')}.json`)
  const cluster = await withLock(join(folder, 'lock'), async () => {
    const alone = livingLeases().length === 0
    const options = { folder: join(folder, 'postgres'), fragile: true }
    const started = await startCluster(options).catch(async (error) => {
      // Nothing in it is worth keeping, and without fsync a crash of the machine may have broken it.
      if (!alone) throw error
      rmSync(options.folder, { recursive: true, force: true })
      return startCluster(options)
    })
    writeFileSync(lease, JSON.stringify(me()))
    if (alone) await dropLeftovers(started.url('postgres'))
    return started
  })
  return {
    adminUrl: cluster.url('postgres'),
    async release() {
      await withLock(join(folder, 'lock'), async () => {
        rmSync(lease, { force: true })
        if (livingLeases().length === 0) await cluster.stop()
      })
    },
  }
}

function livingLeases() {
  return readdirSync(leases).filter((name) => {
    const path = join(leases, name)
    const holder = readHolder(path)
    const alive = holder !== undefined && isAlive(holder)
    if (!alive) rmSync(path, { force: true })
    return alive
  })
}

/**
 * Runs statements on the server, one after another: databases can't be made or dropped inside a transaction.
 * @param {string} adminUrl
 * @param {...string} statements
 * @returns {Promise<Record<string, unknown>[]>} the last one's rows
 */
async function administer(adminUrl, ...statements) {
  const client = new pg.Client({ connectionString: adminUrl })
  await client.connect()
  try {
    let rows = []
    for (const statement of statements) rows = (await client.query(statement)).rows
    return rows
  } finally {
    await client.end()
  }
}

/** @param {string} adminUrl */
async function dropLeftovers(adminUrl) {
  const left = await administer(
    adminUrl,
    `select datname from pg_database where datname like '${prefix.replaceAll('_', '\\_')}%'`,
  )
  await administer(adminUrl, ...left.map((row) => `drop database if exists ${row.datname} with (force)`))
}

/**
 * @param {string} adminUrl
 * @param {string} name
 */
const urlOf = (adminUrl, name) => {
  const url = new URL(adminUrl)
  url.pathname = `/${name}`
  return url.href
}

/**
 * Makes a database of a name that nobody else has.
 * @param {string} adminUrl
 * @param {string} [template] a database to copy
 * @returns {Promise<{ name: string, url: string, drop: () => Promise<void> }>}
 */
export async function makeDatabase(adminUrl, template) {
  const name = `${prefix}${process.pid}_${randomBytes(6).toString('hex')}`
  await administer(adminUrl, `create database ${name}${template ? ` template ${template}` : ''}`)
  return {
    name,
    url: urlOf(adminUrl, name),
    drop: async () => {
      await administer(adminUrl, `drop database if exists ${name} with (force)`)
    },
  }
}

/**
 * Makes the database that test databases are copied from: migrated, without data.
 * @param {string} adminUrl
 */
export async function makeTemplate(adminUrl) {
  const template = await makeDatabase(adminUrl)
  try {
    await migrate(template.url)
    return template
  } catch (error) {
    await template.drop()
    throw error
  }
}

/**
 * Runs the migrations, as the start command does.
 * @param {string} url
 */
export async function migrate(url) {
  const env = { ...process.env, DATABASE_URL: url }
  const script = join(dirname(folder), 'db/migrate.ts')
  const done = await run(process.execPath, ['--conditions=react-server', '--import', 'tsx', script], { cwd: root, env })
  if (done.code !== 0) throw new Error(`db/migrate.ts failed:\n${done.output}`)
}
