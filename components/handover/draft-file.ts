import * as z from 'zod'
import { DesignError, isFir } from '@/dsp'
import { filtersOf, isStoredTaps, type StoredCoefficients } from '@/lib/designs/stored-coefficients'
import type { DesignRecord, Problem, VersionSummary } from '@/lib/designs/types'
import { coefficientSet, ratioRefusal, writtenFile, type ExportFile, type ExportOptions } from '@/lib/exports'
import { roundingWords } from '@/lib/exports/about'
import { differenceEquation, typesetEquation } from '@/lib/exports/equation'
import { checkIdentifier } from '@/lib/exports/names'

// The content policy allows no code made from strings; zod would otherwise try.
z.config({ jitless: true })

/* What the hand-over panel shows before anything is downloaded: the very code that the server writes the file with. */

export type Preview =
  | { readonly file: ExportFile; readonly firstLines: string; readonly restLines: number; readonly rounding: string }
  | { readonly problem: Problem }

const shownLines = 46

export function previewOf(
  design: DesignRecord,
  version: VersionSummary,
  numbers: StoredCoefficients,
  options: ExportOptions,
): Preview {
  return attempt(() => {
    if (options.name !== undefined) checkIdentifier(options.name)
    const set = coefficientSet({ design, version, kept: numbers }, options)
    const file = writtenFile(set)
    const lines = file.text.split(/\r?\n/)
    return {
      file,
      firstLines: lines.slice(0, shownLines).join('\n'),
      restLines: Math.max(0, lines.length - shownLines),
      rounding: roundingWords(set),
    }
  })
}

/** Why b/a can't be had in that number type; null where it can, or where there is no such choice. */
export function ratioProblem(numbers: StoredCoefficients, type: ExportOptions['number']): Problem | null {
  const { digital } = filtersOf(numbers)
  if (isFir(digital)) return null
  const error = ratioRefusal(digital, type)
  return error === null ? null : problemFrom(error)
}

/** The difference equation of the choice: as a screen sets it, and as the file prints it. */
export function equationOf(numbers: StoredCoefficients, { structure, feedback }: ExportOptions) {
  const order = isStoredTaps(numbers) ? numbers.taps.length - 1 : numbers.poles.length
  return {
    typeset: typesetEquation(structure, feedback, order),
    plain: differenceEquation(structure, feedback, order),
  }
}

function attempt<Value>(make: () => Value): Value | { readonly problem: Problem } {
  try {
    return make()
  } catch (error) {
    if (error instanceof DesignError) return { problem: problemFrom(error) }
    throw error
  }
}

function problemFrom({ code, message, field, nearest }: DesignError): Problem {
  return { code, message, field, ...(nearest !== undefined && { nearest }) }
}
