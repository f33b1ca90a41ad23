'use server'

import { findDesign, lockDesign, retitleDesign } from '@/db/queries/designs'
import { designFromSpec } from '@/dsp'
import { shaped, teamAction, type Answer } from '@/lib/actions/action'
import { notFound } from '@/lib/errors'
import { coefficientsOf } from '@/lib/designs/coefficients'
import { saveVersion as save } from '@/lib/designs/save-version'
import { renameDesignSchema, saveVersionSchema } from '@/lib/designs/schemas'
import type { Problem, SaveVersionInput, SaveVersionOutcome } from '@/lib/designs/types'

export const saveVersion = shaped(
  teamAction('version.save', {
    schema: saveVersionSchema,
    what: 'design',
    find: (access, input, tx) => lockDesign(tx, access, input.designId),
    prepare: ({ spec }) => coefficientsOf(designFromSpec(spec)),
    run: ({ input, prepared, found, access, tx }) => save({ tx, access, design: found, input, coefficients: prepared }),
  }),
  (input: SaveVersionInput) => input,
  (answer: Answer<SaveVersionOutcome>): SaveVersionOutcome =>
    answer.ok ? answer.value : { outcome: 'refused', problem: answer.problem },
)

export const renameDesign = shaped(
  teamAction('design.rename', {
    schema: renameDesignSchema,
    what: 'design',
    find: (access, input, tx) => findDesign(access, input.designId, tx),
    run: async ({ input, found, access, tx }) => {
      if (!(await retitleDesign(tx, access, found.id, input.title))) throw notFound('design')
      const details = { from: found.title, to: input.title }
      return { value: null, trail: { team: found.teamId, object: `design:${found.id}`, details } }
    },
  }),
  (designId: string, title: string) => ({ designId, title }),
  (answer: Answer<null>): { readonly problem?: Problem } => (answer.ok ? {} : { problem: answer.problem }),
)
