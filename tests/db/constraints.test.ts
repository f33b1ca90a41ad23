import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { closeConnections, pool } from '@/db/client'
import { recordTrail } from '@/db/queries/audit'
import { makeTeam, type TestTeam } from '../helpers/people'

/* What the database itself refuses, whoever asks: these statements go past all of our code. */

let team: TestTeam
const run = (text: string, values: readonly unknown[] = []) => pool().query(text, [...values])

const insert = (number: number, parent: number | null, designId = team.designId, checksum = 'a'.repeat(64)) =>
  run(
    `insert into versions (design_id, number, parent_number, note, spec, coefficients, checksum, engine_version, saved_by)
     values ($1, $2, $3, 'a note', '{}', '{}', $4, '1.0.0', $5)`,
    [designId, number, parent, checksum, team.members.owner.id],
  )

beforeAll(async () => {
  team = await makeTeam()
  await insert(1, null)
})
afterAll(closeConnections)

describe('versions', () => {
  it.each([
    ['update', `update versions set note = 'another'`],
    ['update of a column to itself', 'update versions set note = note'],
    ['delete', 'delete from versions'],
    ['truncate', 'truncate versions cascade'],
    ['upsert', `insert into versions select * from versions on conflict (id) do update set note = 'another'`],
  ])('can not be changed by %s', async (_, statement) => {
    await expect(run(statement)).rejects.toThrow(/append-only|not the next one/)
    const { rows } = await run('select note from versions')
    expect(rows).toEqual([{ note: 'a note' }])
  })

  it('can not be lost with their design, project or team', async () => {
    await expect(run('delete from designs where id = $1', [team.designId])).rejects.toThrow(/foreign key|append-only/)
    await expect(run('delete from projects where id = $1', [team.projectId])).rejects.toThrow(/foreign key/)
    await expect(run('delete from teams where id = $1', [team.id])).rejects.toThrow(/foreign key/)
    await expect(run('delete from accounts where id = $1', [team.members.owner.id])).rejects.toThrow()
  })

  it.each([
    ['a number that is taken', 1, null],
    ['a number that leaves a gap', 3, 1],
    ['number zero', 0, null],
    ['no parent after the first', 2, null],
    ['a parent that is not there', 2, 7],
    ['itself as parent', 2, 2],
  ])('refuse %s', async (_, number, parent) => {
    await expect(insert(number, parent)).rejects.toThrow()
  })

  it('refuse a parent of another design', async () => {
    const other = await makeTeam()
    await expect(insert(1, 1, other.designId)).rejects.toThrow()
  })

  it('refuse a checksum that is none', async () => {
    await expect(insert(2, 1, team.designId, 'A'.repeat(64))).rejects.toThrow(/versions_checksum_form/)
  })
})

describe('the audit trail', () => {
  it.each(['update audit set action = $$x$$', 'delete from audit', 'truncate audit'])(
    'refuses: %s',
    async (statement) => {
      await recordTrail({ actor: null, team: null, action: 'account.sign-in', object: 'account:x' })
      await expect(run(statement)).rejects.toThrow(/append-only/)
    },
  )
})

describe('teams', () => {
  it('know five roles and no other', async () => {
    await expect(
      run(`update memberships set role = 'admin' where account_id = $1`, [team.members.observer.id]),
    ).rejects.toThrow(/memberships_role_known/)
  })

  it('keep an owner', async () => {
    const owner = team.members.owner.id
    await expect(run(`update memberships set role = 'observer' where account_id = $1`, [owner])).rejects.toThrow(
      /keep an owner/,
    )
    await expect(run('delete from memberships where account_id = $1', [owner])).rejects.toThrow(/keep an owner/)
  })
})

describe('designs', () => {
  it('keep their drawing number', async () => {
    await expect(
      run(`update designs set drawing_number = 'TST-LP-999' where id = $1`, [team.designId]),
    ).rejects.toThrow(/given once/)
    await run(`update designs set title = 'Another title' where id = $1`, [team.designId])
  })
})

describe('what opens accounts', () => {
  it('is stored hashed: a raw token does not fit the tables', async () => {
    await expect(
      run(
        `insert into sessions (id, user_id, expires_at, absolute_expires_at, created_at) values ('raw-token', $1, now(), now(), now())`,
        [team.members.owner.id],
      ),
    ).rejects.toThrow(/sessions_id_hashed/)
    await expect(
      run(`insert into password_resets (token_hash, account_id, expires_at) values ('raw-token', $1, now())`, [
        team.members.owner.id,
      ]),
    ).rejects.toThrow(/password_resets_hashed/)
  })

  it('an e-mail address has one account, whatever its letters’ case', async () => {
    const { email } = team.members.owner
    await expect(run(`insert into accounts (email, label) values ($1, 'x')`, [email])).rejects.toThrow(
      /accounts_email_key/,
    )
    await expect(run(`insert into accounts (email, label) values ($1, 'x')`, [email.toUpperCase()])).rejects.toThrow(
      /accounts_email_lowercase/,
    )
  })
})

describe('drafts', () => {
  const draft = (characters: number) =>
    run(
      `insert into drafts (design_id, account_id, spec, revision)
       values ($1, $2, jsonb_build_object('a', repeat('x', $3::int)), 1)
       on conflict (design_id, account_id) do update set spec = excluded.spec`,
      [team.designId, team.members.owner.id, characters],
    )

  it('hold up to 256 kB, whichever way they come', async () => {
    await draft(262_000)
    await expect(draft(262_200)).rejects.toThrow(/drafts_spec_size/)
  })
})
