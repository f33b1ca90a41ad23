import * as z from 'zod'

/** Of /designs/[designId]/versions/[number] and the routes under it. A number written in another way than usual names nothing. */
export const versionParamsSchema = z.strictObject({
  designId: z.uuid(),
  number: z
    .string()
    .regex(/^[1-9]\d{0,5}$/)
    .transform(Number),
})
