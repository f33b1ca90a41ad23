import * as z from 'zod'
import { chainSpecSchema } from '@/dsp'
import { singleLine } from '@/lib/auth/schemas'

/* What the screens send about chains; checked by the same schemas on both sides. Unknown keys are refused. */

const id = z.uuid()
const versionNumber = z.int().min(1).max(1_000_000)
const chainTitle = singleLine('a title', 120)

export const chainTemplateSchema = z.enum(['plain', 'averaging', 'empty'])
export type ChainTemplate = z.infer<typeof chainTemplateSchema>

export const createChainSchema = z.strictObject({ projectId: id, title: chainTitle, template: chainTemplateSchema })
export const duplicateChainSchema = z.strictObject({ chainId: id })
export const renameChainSchema = z.strictObject({ chainId: id, title: chainTitle })

export const saveChainVersionSchema = z.strictObject({
  chainId: id,
  spec: chainSpecSchema,
  note: singleLine('a note: what changed, and why', 500),
  parentNumber: versionNumber.nullable(),
  onTopOf: versionNumber.optional(),
})

export const chainDraftSchema = z.strictObject({
  spec: chainSpecSchema,
  parentNumber: versionNumber.nullable(),
  revision: z.int().min(0).max(1_000_000_000),
})

export const chainParamsSchema = z.strictObject({ chainId: id })

/** Of /chains/[chainId]/versions/[number] and the route under it. A number written in another way than usual names nothing. */
export const chainVersionParamsSchema = z.strictObject({
  chainId: id,
  number: z
    .string()
    .regex(/^[1-9]\d{0,5}$/)
    .transform(Number),
})
