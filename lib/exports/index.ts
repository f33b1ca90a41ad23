import { coefficientSet, type CoefficientSet, type ExportSource } from './coefficient-set'
import { cHeaderFile } from './c-header'
import { csvFile } from './csv'
import { jsonFile } from './json'
import type { ExportFormat, ExportOptions } from './options'
import { numpyFile, octaveFile } from './scripts'

export { coefficientSet, ratioRefusal, type CoefficientSet, type ExportSource } from './coefficient-set'
export { structuresOf, usualStructure } from './structures'
export { exportOptionsFrom, exportQuery, type ExportOptions } from './options'

const writers = {
  json: { extension: 'json', mediaType: 'application/json; charset=utf-8', write: jsonFile },
  csv: { extension: 'csv', mediaType: 'text/csv; charset=utf-8; header=present', write: csvFile },
  c: { extension: 'h', mediaType: 'text/x-c; charset=utf-8', write: cHeaderFile },
  numpy: { extension: 'py', mediaType: 'text/x-python; charset=utf-8', write: numpyFile },
  octave: { extension: 'm', mediaType: 'text/x-octave; charset=utf-8', write: octaveFile },
} as const satisfies Record<ExportFormat, object>

export interface ExportFile {
  readonly fileName: string
  readonly mediaType: string
  readonly text: string
}

/**
 * A version's coefficients as a file: the same source and options give the same bytes, on the server and in the browser.
 * @throws DesignError as coefficientSet: what was asked for can't hold the filter
 */
export const exportFile = (source: ExportSource, options: ExportOptions): ExportFile =>
  writtenFile(coefficientSet(source, options))

/** The file of a set that is already there. */
export function writtenFile(set: CoefficientSet): ExportFile {
  const { extension, mediaType, write } = writers[set.options.format]
  return { fileName: `${set.name}${variantOf(set.options)}.${extension}`, mediaType, text: write(set) }
}

/** What tells a file from its neighbours in a folder; the usual choices go without saying. */
function variantOf({ structure, number, feedback }: ExportOptions): string {
  const isAdded = feedback === 'add' && structure !== 'taps'
  return [structure === 'ratio' && '_ba', number === 'float' && '_float', isAdded && '_added'].filter(Boolean).join('')
}
