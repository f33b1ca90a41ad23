import { checkFit, checkHold, checkRate, show } from '../check'
import { digitalOf, discretizeOriginal } from '../discretise/discretize'
import { fittedDiagnostics } from '../discretise/diagnostics'
import { fitValues } from '../discretise/fitted'
import { originalOfRoots } from '../discretise/original'
import { bandAngles } from '../discretise/rounding'
import { DesignError } from '../errors'
import { useBandOf } from '../response/use-band'
import { filterOfPolynomials } from './polynomials'
import { filterOfRoots } from './roots'
import { measuredTable, type MeasuredTable } from './measured'
import type { Diagnostic, DigitalFilter, Filter } from '../forms/filter'
import type { Reference } from '../response/reference'
import type { Method, OwnTarget } from '../spec'

export interface OwnDesignResult {
  readonly reference: Reference
  /** The analog original, where it is known by its roots. */
  readonly analog: Filter<'s'> | null
  readonly digital: DigitalFilter
}

type Fitted = Extract<Method, { method: 'fitted' }>

/** The analog original of a target, without a digital version. */
export function referenceOfTarget(own: OwnTarget): { reference: Reference; diagnostics: readonly Diagnostic[] } {
  switch (own.given) {
    case 'roots':
      return { reference: { kind: 'analog', filter: filterOfRoots(own) }, diagnostics: [] }
    case 'polynomials': {
      const { filter, diagnostics } = filterOfPolynomials(own)
      return { reference: { kind: 'analog', filter }, diagnostics }
    }
    case 'measured':
      return { reference: { kind: 'measured', table: measuredTable(own) }, diagnostics: [] }
  }
}

function checkMethod(analog: Filter<'s'>, sampleRateHz: number, how: Method): void {
  checkRate(sampleRateHz)
  const { fromHz } = useBandOf(analog)
  if (fromHz >= sampleRateHz / 2) {
    throw new DesignError(
      'passes-above-half-rate',
      'sampleRateHz',
      `This response comes into use at ${show(fromHz)} Hz, which is not below half the rate, ${show(sampleRateHz / 2)} Hz.`,
      2.5 * fromHz,
    )
  }
  switch (how.method) {
    case 'bilinear':
      if (how.hold === 'edges') {
        throw new DesignError(
          'no-edges',
          'how.hold',
          'An original given by its roots has no edges that could be held; a frequency can be, or none.',
          'none',
        )
      }
      return checkHold(how.hold, sampleRateHz, Math.min(fromHz || 0.1 * sampleRateHz, 0.45 * sampleRateHz))
    case 'impulse-invariant':
      if (analog.zeros.length < analog.poles.length) return
      throw new DesignError(
        'not-strictly-proper',
        'how.method',
        'With as many zeros as poles this response never falls to zero at high frequencies: its impulse response holds a Dirac pulse that can’t be sampled. The bilinear transform works.',
        'bilinear',
      )
    case 'matched-z':
    case 'step-invariant':
      return
    case 'fitted':
      return checkFit(how, sampleRateHz, fromHz)
  }
}

/** Rows of a table inside the fit. */
function rowsUpTo(table: MeasuredTable, upToHz: number): number {
  const beyond = table.frequenciesHz.findIndex((hertz) => hertz > upToHz)
  return beyond < 0 ? table.frequenciesHz.length : beyond
}

function fitTable(table: MeasuredTable, sampleRateHz: number, how: Fitted): DigitalFilter {
  const { order, upToHz } = how
  if (order === undefined) {
    throw new DesignError(
      'order-missing',
      'how.order',
      'A measured response doesn’t say how many poles it has; the order of its digital version must be stated.',
      4,
    )
  }
  const count = rowsUpTo(table, upToHz)
  if (count <= order) {
    const enough = table.frequenciesHz[order]
    const nearest = enough !== undefined && enough < sampleRateHz / 2 ? enough : undefined
    throw new DesignError(
      'too-few-rows',
      nearest === undefined ? 'how.order' : 'how.upToHz',
      `A fit of order ${order} takes at least ${order + 1} rows up to its end; there are ${count} up to ${show(upToHz)} Hz.`,
      nearest ?? Math.max(1, count - 1),
    )
  }
  const unit = (2 * Math.PI) / sampleRateHz
  const omega = table.frequenciesHz.slice(0, count).map((hertz) => hertz * unit)
  const level = table.magnitudeDb.slice(0, count).map((db) => 10 ** (db / 20))
  const phase = table.phaseRadians.slice(0, count)
  const fit = fitValues(
    {
      omega,
      re: level.map((value, k) => value * Math.cos(phase[k]!)),
      im: level.map((value, k) => value * Math.sin(phase[k]!)),
      upTo: omega[count - 1]!,
      freeDelay: how.freeDelay === true,
    },
    order,
  )
  const angles = bandAngles([omega[0]!, omega[count - 1]!])
  const digital = digitalOf(fit.form, sampleRateHz, angles, table.frequenciesHz[0]!)
  return {
    ...digital,
    diagnostics: [...fittedDiagnostics(fit, sampleRateHz, how.freeDelay === true), ...digital.diagnostics],
  }
}

/**
 * An original of the user's own brought to a sampling rate. Roots and polynomials go by every method that families go by, save that there are no
 * edges to hold; a measured response is fitted, over its rows from 0 Hz up to the end of the fit, with an order that must be stated.
 *
 * @returns what the digital version is held against, the analog filter where its roots are known, and the digital filter
 * @throws DesignError for a target that makes no filter (fields under `own`), or a method that doesn't suit it (`how.…`, `sampleRateHz`)
 */
export function designOwn(own: OwnTarget, sampleRateHz: number, how: Method): OwnDesignResult {
  const { reference, diagnostics } = referenceOfTarget(own)
  if (reference.kind === 'analog') {
    const analog = reference.filter
    checkMethod(analog, sampleRateHz, how)
    const digital = discretizeOriginal(originalOfRoots(analog), sampleRateHz, how)
    return { reference, analog, digital: { ...digital, diagnostics: [...diagnostics, ...digital.diagnostics] } }
  }
  if (reference.kind !== 'measured') throw new TypeError('A target is analog or measured.')
  checkRate(sampleRateHz)
  if (how.method !== 'fitted') {
    throw new DesignError(
      'measured-is-fitted',
      'how.method',
      'A measured response is known by its values alone; this method needs poles and zeros. It can be fitted.',
      'fitted',
    )
  }
  checkFit(how, sampleRateHz, reference.table.frequenciesHz[0]!)
  return { reference, analog: null, digital: fitTable(reference.table, sampleRateHz, how) }
}
