import { parallelAt } from '../forms/parallel'
import { magnitudeAt, valueAt } from '../forms/zeros-poles-gain'
import { modulus, subtract } from '../numeric/complex'
import { sectionMagnitude } from '../forms/section-scaling'
import type { Diagnostic, Filter, ParallelForm, Section } from '../forms/filter'

/*
 * What rounding coefficients to doubles does to the forms that are derived from the roots, measured where the filter passes.
 */

/** A sum of sections that differs from the roots by more than this part of the peak isn't handed out. */
const PARALLEL_LIMIT = 1e-9
const SECTIONS_CAUTION_DB = 0.001

const point = (radians: number) => ({ re: Math.cos(radians), im: Math.sin(radians) })

/** 25 angles across the pass band, edges included. */
export function bandAngles([low, high]: readonly [number, number]): number[] {
  return Array.from({ length: 25 }, (_, k) => low + ((high - low) * k) / 24)
}

/** Largest difference of a sum of sections from the roots, relative to the peak. */
function parallelDeviation(parallel: ParallelForm, filter: Filter<'z'>, angles: readonly number[]): number {
  let worst = 0
  let peak = 0
  for (const angle of angles) {
    const wanted = valueAt(filter, point(angle))
    peak = Math.max(peak, modulus(wanted))
    worst = Math.max(worst, modulus(subtract(parallelAt(parallel, angle), wanted)))
  }
  return worst / peak
}

/** The sum of sections where it is good, and else the reason why it was left out. */
export function keepIfGood(
  parallel: ParallelForm | undefined,
  filter: Filter<'z'>,
  angles: readonly number[],
): { kept?: ParallelForm; diagnostics: Diagnostic[] } {
  if (parallel === undefined) return { diagnostics: [] }
  const deviation = parallelDeviation(parallel, filter, angles)
  if (deviation <= PARALLEL_LIMIT) return { kept: parallel, diagnostics: [] }
  return {
    diagnostics: [
      {
        code: 'parallel-ill-conditioned',
        severity: 'note',
        message:
          'As a sum of sections this version would lose more than nine digits to cancellation; it is kept as a cascade.',
        field: 'how.method',
        value: deviation,
      },
    ],
  }
}

/** A caution when rounding the section coefficients moves the response in the pass band visibly. */
export function sectionDiagnostics(
  sections: readonly Section[],
  filter: Filter<'z'>,
  angles: readonly number[],
): Diagnostic[] {
  let worst = 0
  for (const angle of angles) {
    const wanted = magnitudeAt(filter, point(angle))
    const got = sections.reduce((product, section) => product * sectionMagnitude(section, angle), 1)
    if (wanted > 0 && got > 0) worst = Math.max(worst, Math.abs(20 * Math.log10(got / wanted)))
  }
  if (worst <= SECTIONS_CAUTION_DB) return []
  return [
    {
      code: 'sections-rounded',
      severity: 'caution',
      message: `At so high a rate, rounding the section coefficients to doubles moves the pass band by up to ${Number(worst.toPrecision(2))} dB; a lower rate avoids it.`,
      field: 'sampleRateHz',
      value: worst,
    },
  ]
}
