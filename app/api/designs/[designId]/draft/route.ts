import { findDesign } from '@/db/queries/designs'
import { saveDraft } from '@/db/queries/drafts'
import { teamRoute } from '@/lib/actions/route'
import { AppError, brokeConstraint, notFound } from '@/lib/errors'
import { designParamsSchema, draftSchema } from '@/lib/designs/schemas'

/**
 * Autosave. A route and not an action: actions of one page wait for each other, and a draft must not wait for a version. A draft may hold
 * any spec of the right shape, also one whose numbers make no filter: it is what stands on the screen.
 */
export const PUT = teamRoute('draft.save', {
  params: designParamsSchema,
  body: draftSchema,
  // Room for a measured table at its longest, in full precision.
  maxBytes: 262_144,
  what: 'design',
  find: (access, { designId }, tx) => findDesign(access, designId, tx),
  run: async ({ params, input, access, tx }) => {
    const outcome = await saveDraft(tx, access, { ...params, ...input }).catch((error: unknown) => {
      if (brokeConstraint(error, 'drafts_parent_fk'))
        throw new AppError('not-valid', `There is no version ${input.parentNumber} of this design.`, {
          field: 'parentNumber',
          cause: error,
        })
      throw error
    })
    if (outcome === null) throw notFound('design')
    return Response.json(outcome, { status: outcome.outcome === 'saved' ? 200 : 409 })
  },
})
