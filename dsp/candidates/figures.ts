import { multipliesPerSample } from '../forms/cost'
import type { AnyDigital } from '../forms/filter'
import { groupDelay } from '../response/delay'
import { magnitudeDb } from '../response/frequency'
import { departureExtreme, type Judged } from '../requirements/departure-line'
import type { RequirementResult } from '../requirements/evaluate'
import { bandGrid, largest, least } from '../requirements/extremes'
import type { RequirementSheet } from '../requirements/requirement'
import { stepShape } from '../requirements/step-shape'
import type { Outline } from './outline'
import type { CandidateFigures } from './request'

const POINTS = 64
const FLOOR_DB = -200
/** A drawing starts this far below the lowest edge, and not more than MOST_DECADES below half the rate. */
const BELOW = 5
const MOST_DECADES = 4

/** The log axis of the drawings: from well below the lowest edge of the sheet to half the rate. */
export function sketchFrequencies(sheet: RequirementSheet, sampleRateHz: number): Float64Array {
  const fold = sampleRateHz / 2
  const edges = sheet
    .flatMap((line) => ('fromHz' in line ? [line.fromHz, line.toHz ?? 0] : 'hz' in line ? [line.hz] : []))
    .filter((hz) => hz > 0 && hz < fold)
  const low = Math.max(Math.min(fold / 10, ...edges) / BELOW, fold / 10 ** MOST_DECADES)
  return Float64Array.from({ length: POINTS }, (_, n) =>
    n === POINTS - 1 ? fold : low * (fold / low) ** (n / (POINTS - 1)),
  )
}

export function sketchOf(digital: AnyDigital, sheet: RequirementSheet): Float32Array {
  const levels = magnitudeDb(digital, sketchFrequencies(sheet, digital.sampleRateHz))
  return Float32Array.from(levels, (db) => Math.max(db, FLOOR_DB))
}

/** Largest and least group delay over what is kept. */
export function keptDelay(
  digital: AnyDigital,
  { stretches }: Outline,
): { readonly most: number; readonly least: number } {
  const curve = (at: Float64Array) => groupDelay(digital, at)
  let [most, fewest] = [-Infinity, Infinity]
  for (const { isKept, fromHz, toHz } of stretches) {
    if (!isKept) continue
    const grid = fromHz === toHz ? Float64Array.of(fromHz) : bandGrid(digital, fromHz, toHz)
    most = Math.max(most, largest(curve, grid).value)
    fewest = Math.min(fewest, least(curve, grid).value)
  }
  return { most, least: fewest }
}

/** The figures that rows are ranked by. */
export function figuresOf(
  design: Judged,
  outline: Outline,
  results: readonly RequirementResult[],
  removeDelay: boolean,
): CandidateFigures {
  const { digital } = design
  const delay = keptDelay(digital, outline)
  const upToHz = outline.stretches.reduce((top, { isKept, toHz }) => (isKept ? Math.max(top, toHz) : top), 0)
  const worst = departureExtreme(design, { kind: 'phase-departure', upToHz, withinDegrees: 1, removeDelay })
  const shape = stepShape(digital, 0.02)
  return {
    marginParts: results.reduce(
      (room, { margin, limit }) => Math.min(room, limit > 0 ? margin / limit : margin),
      Infinity,
    ),
    delaySeconds: delay.most,
    delaySpreadSeconds: delay.most - delay.least,
    phaseDepartureDegrees: typeof worst === 'string' ? null : worst.value,
    multiplies: multipliesPerSample(digital),
    overshootPercent: shape === null ? null : shape.overshoot * 100,
  }
}
