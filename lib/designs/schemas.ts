import * as z from 'zod'
import { designSpecSchema } from '@/dsp'
import { singleLine } from '@/lib/auth/schemas'

/*
 * What the screens send about projects and designs; checked by the same schemas on both sides. Unknown keys are refused.
 */

const id = z.uuid()
const versionNumber = z.int().min(1).max(1_000_000)

const projectName = singleLine('a name', 120)
const designTitle = singleLine('a title', 120)

export const createProjectSchema = z.strictObject({
  teamId: id,
  code: z
    .string()
    .trim()
    .toUpperCase()
    .regex(
      /^[A-Z][A-Z0-9]{1,5}$/,
      'Two to six letters and digits, a letter first, such as HMF; every drawing number begins with it.',
    ),
  name: projectName,
})

export const createDesignSchema = z.strictObject({ projectId: id, title: designTitle })
export const duplicateDesignSchema = z.strictObject({ designId: id })
export const renameDesignSchema = z.strictObject({ designId: id, title: designTitle })

export const saveVersionSchema = z.strictObject({
  designId: id,
  spec: designSpecSchema,
  note: singleLine('a note: what changed, and why', 500),
  parentNumber: versionNumber.nullable(),
  onTopOf: versionNumber.optional(),
})

export const draftSchema = z.strictObject({
  spec: designSpecSchema,
  parentNumber: versionNumber.nullable(),
  revision: z.int().min(0).max(1_000_000_000),
})

export const designParamsSchema = z.strictObject({ designId: id })
