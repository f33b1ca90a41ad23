import * as z from 'zod'
import { DesignError } from '@/dsp'
import { chainCHeaderFile } from './chain-c-header'
import { chainJsonFile } from './chain-json'
import type { ChainSource } from './chain-source'
import type { ExportFile } from './index'
import { checkIdentifier, defaultIdentifier } from './names'

export const chainFormats = ['json', 'c'] as const
export type ChainFormat = (typeof chainFormats)[number]

export interface ChainFileOptions {
  readonly as: ChainFormat
  readonly name?: string | undefined
}

const writers = {
  json: { extension: 'json', mediaType: 'application/json; charset=utf-8', write: chainJsonFile },
  c: { extension: 'h', mediaType: 'text/x-c; charset=utf-8', write: chainCHeaderFile },
} as const satisfies Record<ChainFormat, object>

const optionsSchema = z.object({ as: z.enum(chainFormats), name: z.string().optional() })

/**
 * The choice of a download, from its address.
 * @throws DesignError naming the parameter: unknown, given twice, out of its list, or not an identifier
 */
export function chainFileOptionsFrom(query: URLSearchParams): ChainFileOptions {
  const given = new Map<string, string>()
  for (const [key, value] of query) {
    if (key !== 'as' && key !== 'name')
      throw new DesignError('option-unknown', key, `There is no choice called “${key}”; there are as, name.`)
    const before = given.get(key)
    if (before !== undefined)
      throw new DesignError('option-twice', key, `“${key}” is given twice; give it once.`, before)
    given.set(key, value)
  }
  const read = optionsSchema.safeParse(Object.fromEntries(given))
  if (!read.success) {
    const found = given.has('as') ? `“as” can't be “${given.get('as')}”` : '“as” is missing'
    throw new DesignError('option-out-of-list', 'as', `${found}; it is one of ${chainFormats.join(', ')}.`, 'json')
  }
  if (read.data.name !== undefined) checkIdentifier(read.data.name)
  return read.data
}

/** A version of a chain as a file: the same source and choice give the same bytes. */
export function chainFile(source: ChainSource, { as, name }: ChainFileOptions): ExportFile {
  const { extension, mediaType, write } = writers[as]
  const own = name ?? defaultIdentifier(source.chain.drawingNumber, source.version.number)
  return { fileName: `${own}.${extension}`, mediaType, text: write(source, own) }
}
