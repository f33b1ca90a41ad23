import * as z from 'zod'
import { DesignError } from '@/dsp'
import { checkIdentifier } from './names'

/* What can be chosen about a file. The same schema reads the address of a download and the choices of the hand-over panel. */

const exportFormats = ['json', 'csv', 'c', 'numpy', 'octave'] as const
const structures = ['sections', 'ratio', 'taps'] as const
export const numberTypes = ['double', 'float'] as const
export const feedbackSigns = ['subtract', 'add'] as const
const literalStyles = ['decimal', 'hexadecimal'] as const

export const exportOptionsSchema = z.strictObject({
  format: z.enum(exportFormats),
  /**
   * `sections`: a cascade of second-order sections. `ratio`: one numerator b and one denominator a. `taps`: an FIR filter's, which has no
   * other structure.
   */
  structure: z.enum(structures),
  number: z.enum(numberTypes).default('double'),
  /** `subtract`: y = b·x − a·y. `add`: y = b·x + a·y, the coefficients a negated. Taps have no feedback and leave it unread. */
  feedback: z.enum(feedbackSigns).default('subtract'),
  /** How C writes its numbers; the other formats are decimal. */
  literals: z.enum(literalStyles).default('decimal'),
  /** What the names in the file begin with; made from the drawing number when left out. */
  name: z.string().optional(),
})

export type ExportOptions = z.infer<typeof exportOptionsSchema>
export type ExportFormat = ExportOptions['format']
export type Structure = ExportOptions['structure']
export type FeedbackSign = ExportOptions['feedback']

const choices: Readonly<Record<string, readonly string[]>> = {
  format: exportFormats,
  structure: structures,
  number: numberTypes,
  feedback: feedbackSigns,
  literals: literalStyles,
}

/**
 * Reads the query of a download.
 * @param usual the structure of a query that names none
 * @throws DesignError naming the parameter that is unknown, given twice or out of its list, with the nearest value that works
 */
export function exportOptionsFrom(query: URLSearchParams, usual: Structure = 'sections'): ExportOptions {
  const given = new Map<string, string>()
  for (const [key, value] of query) {
    if (!Object.hasOwn(choices, key) && key !== 'name')
      throw new DesignError('option-unknown', key, `There is no choice called “${key}”; there are ${known()}.`)
    const before = given.get(key)
    if (before !== undefined)
      throw new DesignError('option-twice', key, `“${key}” is given twice; give it once.`, before)
    given.set(key, value)
  }
  const read = exportOptionsSchema.safeParse({ structure: usual, ...Object.fromEntries(given) })
  if (!read.success) throw outOfList(String(read.error.issues[0]?.path[0] ?? 'format'), given)
  if (read.data.structure === 'taps' && given.has('feedback'))
    throw new DesignError(
      'no-feedback',
      'feedback',
      'Taps have no feedback, so there is no sign to choose; leave “feedback” out.',
    )
  if (read.data.name !== undefined) checkIdentifier(read.data.name)
  return read.data
}

function outOfList(key: string, given: ReadonlyMap<string, string>): DesignError {
  const list = choices[key] ?? []
  const value = given.get(key)
  const found = value === undefined ? `“${key}” is missing` : `“${key}” can't be “${value}”`
  return new DesignError('option-out-of-list', key, `${found}; it is one of ${list.join(', ')}.`, list[0])
}

const known = () => [...Object.keys(choices), 'name'].join(', ')

/** The query that asks for these options; defaults are written too, so that an address keeps its meaning. */
export function exportQuery(options: ExportOptions): string {
  const query = new URLSearchParams({
    format: options.format,
    structure: options.structure,
    number: options.number,
  })
  if (options.structure !== 'taps') query.set('feedback', options.feedback)
  if (options.format === 'c') query.set('literals', options.literals)
  if (options.name !== undefined) query.set('name', options.name)
  return query.toString()
}
