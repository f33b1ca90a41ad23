'use server'

import { findChain, insertChain, lockChain, retitleChain } from '@/db/queries/chains'
import { findChainVersion } from '@/db/queries/chain-versions'
import { findProject } from '@/db/queries/projects'
import { shaped, teamAction, type Answer } from '@/lib/actions/action'
import { computeChainVersion } from '@/lib/chains/compute-version'
import { saveChainVersion } from '@/lib/chains/save-chain-version'
import {
  createChainSchema,
  duplicateChainSchema,
  renameChainSchema,
  saveChainVersionSchema,
} from '@/lib/chains/schemas'
import { startingChains } from '@/lib/chains/templates'
import type { SaveChainVersionInput, SaveChainVersionOutcome } from '@/lib/chains/types'
import type { Problem } from '@/lib/designs/types'
import { notFound } from '@/lib/errors'

export const createChain = teamAction('chain.create', {
  schema: createChainSchema,
  what: 'project',
  find: (access, input, tx) => findProject(access, input.projectId, tx),
  run: async ({ input: { projectId, title, template }, found, access, tx }) => {
    const chain = await insertChain(tx, access, { projectId, title, spec: startingChains[template] })
    if (!chain) throw notFound('project')
    const details = { drawingNumber: chain.drawingNumber }
    return { value: { chainId: chain.id }, trail: { team: found.teamId, object: `chain:${chain.id}`, details } }
  },
})

/** A new chain of the same project that starts where this one's latest version stands. */
export const duplicateChain = teamAction('chain.duplicate', {
  schema: duplicateChainSchema,
  what: 'chain',
  find: (access, input, tx) => findChain(access, input.chainId, tx),
  run: async ({ found, access, tx }) => {
    const latest = await findChainVersion(access, found.id, 'latest', tx)
    const title = `Copy of ${found.title}`.slice(0, 120)
    const spec = latest?.spec ?? found.startingSpec
    const copy = await insertChain(tx, access, { projectId: found.projectId, title, spec })
    if (!copy) throw notFound('chain')
    const details = { drawingNumber: copy.drawingNumber, from: found.drawingNumber }
    return { value: { chainId: copy.id }, trail: { team: found.teamId, object: `chain:${copy.id}`, details } }
  },
})

export const saveVersion = shaped(
  teamAction('chain-version.save', {
    schema: saveChainVersionSchema,
    what: 'chain',
    find: (access, input, tx) => lockChain(tx, access, input.chainId),
    prepare: ({ spec }) => computeChainVersion(spec),
    run: ({ input, prepared, found, access, tx }) =>
      saveChainVersion({ tx, access, chain: found, input, computed: prepared }),
  }),
  (input: SaveChainVersionInput) => input,
  (answer: Answer<SaveChainVersionOutcome>): SaveChainVersionOutcome =>
    answer.ok ? answer.value : { outcome: 'refused', problem: answer.problem },
)

export const renameChain = shaped(
  teamAction('chain.rename', {
    schema: renameChainSchema,
    what: 'chain',
    find: (access, input, tx) => findChain(access, input.chainId, tx),
    run: async ({ input, found, access, tx }) => {
      if (!(await retitleChain(tx, access, found.id, input.title))) throw notFound('chain')
      const details = { from: found.title, to: input.title }
      return { value: null, trail: { team: found.teamId, object: `chain:${found.id}`, details } }
    },
  }),
  (chainId: string, title: string) => ({ chainId, title }),
  (answer: Answer<null>): { readonly problem?: Problem } => (answer.ok ? {} : { problem: answer.problem }),
)
