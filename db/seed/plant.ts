import { z } from 'zod'
import { designFromSpec, ENGINE_VERSION } from '@/dsp'
import { hashPassword } from '@/lib/auth/passwords'
import { checksumOf, coefficientsOf } from '@/lib/designs/coefficients'
import { allRoles, rolesFor } from '@/lib/permissions'
import type { Access } from '../queries/access'
import { insertAccount } from '../queries/accounts'
import { recordTrail } from '../queries/audit'
import { insertDesign } from '../queries/designs'
import { insertProject } from '../queries/projects'
import { insertMember, insertTeam } from '../queries/teams'
import { inTransaction, type Transaction } from '../queries/transaction'
import { insertVersion } from '../queries/versions'
import { installation } from '../schema'
import accountList from './accounts.json' with { type: 'json' }
import { seedChains } from './chains'
import { linkAmong, plantChain, type PlantedDesign } from './plant-chain'
import { seedProjects, type SeedDesign, type SeedVersion } from './projects'

const accountsSchema = z
  .array(z.strictObject({ email: z.email(), password: z.string().min(8), role: z.enum(allRoles), label: z.string() }))
  .length(allRoles.length)

const DAY_MS = 86_400_000
const MARK = 'demo'

/** Plants the demo into a database that never had it; all of it or nothing. Says whether it did. */
export async function plantDemo(): Promise<boolean> {
  // Hashing takes its time; outside the transaction it holds no lock.
  const people = await Promise.all(
    accountsSchema
      .parse(accountList)
      .map(async ({ password, ...person }) => ({ ...person, passwordHash: await hashPassword(password) })),
  )
  return inTransaction(async (tx) => {
    // Of two processes that start together, the second waits here and then finds the mark.
    const [mark] = await tx.insert(installation).values({ mark: MARK }).onConflictDoNothing().returning()
    if (!mark) return false

    const ids: Partial<Record<(typeof allRoles)[number], string>> = {}
    let team: string | undefined
    for (const { role, ...person } of [...people].sort(
      (one, other) => allRoles.indexOf(one.role) - allRoles.indexOf(other.role),
    )) {
      const account = await insertAccount(tx, person)
      if (!account) throw new Error(`The demo can't be planted: ${person.email} has an account already.`)
      ids[role] = account.id
      if (team === undefined) team = await insertTeam(tx, 'Structures and machines', account.id)
      else await insertMember(tx, team, account.id, role)
    }
    const { owner, designer } = ids
    if (team === undefined || owner === undefined || designer === undefined)
      throw new Error('The demo needs an owner and a designer.')

    const access = {
      owner: { accountId: owner, roles: rolesFor('version.save') },
      designer: { accountId: designer, roles: rolesFor('version.save') },
    }
    for (const { code, name, designs } of seedProjects) {
      const project = await insertProject(tx, access.owner, { teamId: team, code, name })
      if (project === null || project === 'taken') throw new Error(`The demo's project ${code} could not be made.`)
      await recordTrail(
        { actor: owner, team, action: 'project.create', object: `project:${project.id}`, details: { code } },
        tx,
      )
      const planted: PlantedDesign[] = []
      for (const design of designs) planted.push(await plantDesign(tx, { team, projectId: project.id, design, access }))
      for (const chain of seedChains[code] ?? [])
        await plantChain(tx, { team, projectId: project.id, chain, access, linkTo: linkAmong(planted) })
    }
    return true
  })
}

interface Plot {
  readonly team: string
  readonly projectId: string
  readonly design: SeedDesign
  readonly access: Record<SeedVersion['by'], Access>
}

async function plantDesign(tx: Transaction, { team, projectId, design, access }: Plot): Promise<PlantedDesign> {
  const [first] = design.versions
  if (!first) throw new Error(`The demo's design "${design.title}" has no version.`)
  const made = await insertDesign(tx, access[first.by], { projectId, title: design.title, spec: first.spec })
  if (!made) throw new Error(`The demo's design "${design.title}" could not be made.`)
  const object = `design:${made.id}`
  await recordTrail(
    {
      actor: access[first.by].accountId,
      team,
      action: 'design.create',
      object,
      details: { drawingNumber: made.drawingNumber },
    },
    tx,
  )
  for (const [index, { spec, note, by, daysAgo }] of design.versions.entries()) {
    const computed = designFromSpec(spec)
    await insertVersion(tx, access[by], {
      designId: made.id,
      number: index + 1,
      parentNumber: index === 0 ? null : index,
      note,
      spec,
      coefficients: coefficientsOf(computed),
      checksum: checksumOf(computed),
      engineVersion: ENGINE_VERSION,
      savedAt: new Date(Date.now() - daysAgo * DAY_MS),
    })
    await recordTrail(
      { actor: access[by].accountId, team, action: 'version.save', object, details: { number: index + 1 } },
      tx,
    )
  }
  return { ...made, design }
}
