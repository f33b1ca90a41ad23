import { mkdirSync, mkdtempSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs'
import { createServer } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import pg from 'pg'
import { afterAll, afterEach, describe, expect, it } from 'vitest'
import { startCluster } from '../../db/cluster.mjs'
import { databaseHome, serverUser } from '../../lib/launch/database-home.mjs'
import { Trouble } from '../../lib/launch/trouble.mjs'

// Below the checkout, and not in the system's folder for temporary files, which would be private to this user: the server runs as another.
const base = join(import.meta.dirname, '../../.test-data')
mkdirSync(base, { recursive: true })
const scratch = mkdtempSync(join(base, 'cluster-'))
const folder = join(scratch, 'postgres')
const start = () => startCluster({ folder, fragile: true })
const isRoot = process.getuid?.() === 0

let running: Awaited<ReturnType<typeof start>> | undefined
afterEach(async () => {
  await running?.stop()
  running = undefined
})
afterAll(() => rmSync(scratch, { recursive: true, force: true }))

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

const serverPid = (home: string): number =>
  Number(readFileSync(join(home, 'data/postmaster.pid'), 'utf8').split('\n')[0])

describe('a cluster of our own', () => {
  it('starts from nothing, listens on loopback alone, keeps its folder to itself and wants a password', async () => {
    running = await start()
    await running.ensureDatabase('polewright')
    await running.ensureDatabase('polewright')
    const url = running.url('polewright')
    expect(await query(url, 'show listen_addresses')).toEqual([{ listen_addresses: '127.0.0.1' }])
    expect(await query(url, 'show unix_socket_directories')).toEqual([{ unix_socket_directories: '' }])
    expect(await query(url, 'show server_encoding')).toEqual([{ server_encoding: 'UTF8' }])
    expect(statSync(running.home).mode & 0o777).toBe(0o700)
    expect(statSync(join(running.home, 'password')).mode & 0o777).toBe(0o600)
    const wrong = new URL(url)
    wrong.password = 'wrong'
    await expect(query(wrong.href, 'select 1')).rejects.toThrow(/password authentication failed/)
    await expect(running.ensureDatabase('x"; drop database polewright')).rejects.toThrow(/is no name for a database/)
  })

  it('keeps its data and its port from one start to the next', async () => {
    running = await start()
    const { port } = running
    await running.ensureDatabase('kept')
    await query(running.url('kept'), 'create table notes as select 42 as answer')
    await running.stop()
    running = await start()
    expect(running.port).toBe(port)
    expect(running.adopted).toBe(false)
    expect(await query(running.url('kept'), 'select answer from notes')).toEqual([{ answer: 42 }])
  })

  it('takes over a server that runs already', async () => {
    running = await start()
    const again = await start()
    expect(again).toMatchObject({ adopted: true, port: running.port })
  })

  it('recovers after the server was killed, with all that was stored', async () => {
    const safe = () => startCluster({ folder })
    running = await safe()
    await running.ensureDatabase('kept')
    await query(running.url('kept'), 'create table if not exists survivors as select 7 as n')
    process.kill(serverPid(running.home), 'SIGKILL')
    running = await safe()
    expect(await query(running.url('kept'), 'select n from survivors')).toEqual([{ n: 7 }])
  })

  it('is not fooled by a process that has the number of a server long gone', async () => {
    running = await start()
    await running.stop()
    writeFileSync(join(running.home, 'data/postmaster.pid'), `${process.pid}\n${running.home}\n1\n${running.port}\n`)
    running = await start()
    expect(running.adopted).toBe(false)
    expect(await query(running.url('postgres'), 'select 1 as one')).toEqual([{ one: 1 }])
  })

  it('takes another port when its own is taken meanwhile', async () => {
    running = await start()
    const { port } = running
    await running.stop()
    const other = createServer()
    await new Promise<void>((resolve) => other.listen(port, '127.0.0.1', resolve))
    try {
      running = await start()
      expect(running.port).not.toBe(port)
    } finally {
      other.close()
    }
  })

  it('begins again where making the data folder was broken off', async () => {
    const own = join(scratch, 'broken/postgres')
    const user = await serverUser()
    const { home } = await databaseHome(own, user)
    mkdirSync(join(home, 'data.new'))
    writeFileSync(join(home, 'data.new/PG_VERSION'), '15\n')
    running = await startCluster({ folder: own, fragile: true })
    expect(await query(running.url('postgres'), 'select 1 as one')).toEqual([{ one: 1 }])
  })

  it('says which version is missing for data of another one', async () => {
    const own = join(scratch, 'old/postgres')
    const { home } = await databaseHome(own, await serverUser())
    mkdirSync(join(home, 'data'))
    writeFileSync(join(home, 'data/PG_VERSION'), '7\n')
    const refusal: unknown = await startCluster({ folder: own, fragile: true }).catch((error: unknown) => error)
    expect(refusal).toBeInstanceOf(Trouble)
    expect(refusal instanceof Error ? refusal.message : '').toContain(
      'was made by PostgreSQL 7, which is not installed',
    )
  })
})

describe('where the cluster lives', () => {
  it('is another stable folder when the server’s user can not reach the checkout, and only then', async () => {
    const user = await serverUser()
    const closed = mkdtempSync(join(tmpdir(), 'polewright-closed-')) // private to this user
    const fallback = join(scratch, 'var')
    try {
      const inClosed = join(closed, 'checkout/.data/postgres')
      const first = await databaseHome(inClosed, user, fallback)
      const second = await databaseHome(inClosed, user, fallback)
      expect(second).toEqual(first)
      expect(first.moved).toBe(isRoot)
      expect(first.home.startsWith(isRoot ? fallback : inClosed)).toBe(true)
      expect(statSync(join(closed, 'checkout/.data')).mode & 0o777).toBe(isRoot ? 0o710 : 0o700)
      expect((await databaseHome(join(scratch, 'open/postgres'), user, fallback)).moved).toBe(false)
    } finally {
      rmSync(closed, { recursive: true, force: true })
    }
  })
})
