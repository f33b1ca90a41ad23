import pg from 'pg'
import { describe, expect, it } from 'vitest'
import { createEmptyDatabase, createTestDatabase } from '../helpers/database'

async function query(url: string, sql: string): Promise<Record<string, unknown>[]> {
  const client = new pg.Client({ connectionString: url })
  await client.connect()
  try {
    const result: pg.QueryResult<Record<string, unknown>> = await client.query(sql)
    return result.rows
  } finally {
    await client.end()
  }
}

const tables = "select table_name from information_schema.tables where table_schema = 'public'"

describe('the database of a test file', () => {
  it('is there before the imports, migrated, and its own', async () => {
    const url = process.env.DATABASE_URL ?? ''
    expect(url).toMatch(/\/polewright_test_\d+_[0-9a-f]+$/)
    expect((await query(url, tables)).length).toBeGreaterThan(0)
  })

  it('can be had a second time, apart from the first, and is gone when dropped', async () => {
    const other = await createTestDatabase()
    await query(other.url, 'create table only_here (x int)')
    expect(await query(process.env.DATABASE_URL ?? '', `${tables} and table_name = 'only_here'`)).toHaveLength(0)
    await other.drop()
    await expect(query(other.url, 'select 1')).rejects.toThrow(/does not exist/)
  })

  it('can be had empty', async () => {
    const empty = await createEmptyDatabase()
    expect(await query(empty.url, tables)).toHaveLength(0)
    await empty.drop()
  })
})
