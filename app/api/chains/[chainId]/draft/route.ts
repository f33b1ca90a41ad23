import { saveChainDraft } from '@/db/queries/chain-drafts'
import { findChain } from '@/db/queries/chains'
import { teamRoute } from '@/lib/actions/route'
import { chainDraftSchema, chainParamsSchema } from '@/lib/chains/schemas'
import { AppError, brokeConstraint, notFound } from '@/lib/errors'

/** Autosave, as that of a design. A draft may hold any spec of the right shape, also one whose stages make no chain. */
export const PUT = teamRoute('chain-draft.save', {
  params: chainParamsSchema,
  body: chainDraftSchema,
  // Room for two linked designs with a measured table at its longest each.
  maxBytes: 524_288,
  what: 'chain',
  find: (access, { chainId }, tx) => findChain(access, chainId, tx),
  run: async ({ params, input, access, tx }) => {
    const outcome = await saveChainDraft(tx, access, { ...params, ...input }).catch((error: unknown) => {
      if (brokeConstraint(error, 'chain_drafts_parent_fk'))
        throw new AppError('not-valid', `There is no version ${input.parentNumber} of this chain.`, {
          field: 'parentNumber',
          cause: error,
        })
      throw error
    })
    if (outcome === null) throw notFound('chain')
    return Response.json(outcome, { status: outcome.outcome === 'saved' ? 200 : 409 })
  },
})
