import { readFileSync } from 'node:fs'
import { createHash } from 'node:crypto'
import { generateDrizzleJson, generateMigration } from 'drizzle-kit/api'
import pg from 'pg'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { z } from 'zod'
import { migrateDatabase } from '@/db/migrate'
import * as schema from '@/db/schema'
import { createEmptyDatabase, type TestDatabase } from '../helpers/database'

const journal = z
  .object({ entries: z.array(z.object({ idx: z.number(), when: z.number(), tag: z.string() })) })
  .parse(JSON.parse(readFileSync('drizzle/meta/_journal.json', 'utf8'))).entries

describe('the journal of migrations', () => {
  it('rises strictly: drizzle skips a migration that is dated before the newest applied one', () => {
    expect(journal.length).toBeGreaterThan(0)
    journal.forEach((entry, at) => {
      expect(entry.idx).toBe(at)
      expect(entry.when).toBeGreaterThan(journal[at - 1]?.when ?? 0)
    })
  })
})

describe('the newest snapshot', () => {
  it('is the schema as written: no migration was forgotten', async () => {
    const last = String(journal.length - 1).padStart(4, '0')
    const snapshot = JSON.parse(readFileSync(`drizzle/meta/${last}_snapshot.json`, 'utf8')) as ReturnType<
      typeof generateDrizzleJson
    >
    expect(await generateMigration(snapshot, generateDrizzleJson(schema, snapshot.id))).toEqual([])
    // That a difference would be seen.
    const fewer = Object.fromEntries(Object.entries(schema).filter(([name]) => name !== 'rateLimits'))
    expect(await generateMigration(snapshot, generateDrizzleJson(fewer, snapshot.id))).not.toEqual([])
  })
})

describe('migrating an empty database', () => {
  let database: TestDatabase
  let client: pg.Client

  beforeAll(async () => {
    database = await createEmptyDatabase()
    client = new pg.Client({ connectionString: database.url })
    await client.connect()
  })
  afterAll(async () => {
    await client.end()
    await database.drop()
  })

  it('applies every migration once, though three processes start together', async () => {
    await Promise.all([migrateDatabase(database.url), migrateDatabase(database.url), migrateDatabase(database.url)])
    await migrateDatabase(database.url)
    const { rows } = await client.query<{ hash: string }>('select hash from drizzle.__drizzle_migrations order by id')
    const expected = journal.map(({ tag }) =>
      createHash('sha256')
        .update(readFileSync(`drizzle/${tag}.sql`))
        .digest('hex'),
    )
    expect(rows.map((row) => row.hash)).toEqual(expected)
  })

  it('waits for whoever migrates now', async () => {
    await client.query('select pg_advisory_lock(7331905117)')
    let done = false
    const waiting = migrateDatabase(database.url).then(() => (done = true))
    await new Promise((resolve) => setTimeout(resolve, 300))
    expect(done).toBe(false)
    await client.query('select pg_advisory_unlock(7331905117)')
    await waiting
    expect(done).toBe(true)
  })
})
