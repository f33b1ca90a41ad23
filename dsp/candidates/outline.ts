import type { Requirement, RequirementSheet } from '../requirements/requirement'
import type { ResponseKind } from '../spec'

/*
 * What a sheet says of the magnitude, from low to high: stretches that are kept and stretches that are lost, in turn. Two stretches make
 * a low-pass or a high-pass filter, three a band-pass or a band-stop; more of them only a FIR filter of several bands can have.
 */

export interface Stretch {
  readonly isKept: boolean
  readonly fromHz: number
  readonly toHz: number
  /** The strictest line in it: within so many dB of 0 dB, or so many dB down. */
  readonly strictestDb: number
  /** The mildest. */
  readonly mildestDb: number
}

export interface Outline {
  readonly stretches: readonly Stretch[]
  readonly response: ResponseKind | 'multiband'
  readonly sampleRateHz: number
}

function stretchOf(line: Requirement, foldHz: number): Stretch | null {
  const of = (isKept: boolean, fromHz: number, toHz: number, db: number): Stretch => ({
    isKept,
    fromHz,
    toHz,
    strictestDb: db,
    mildestDb: db,
  })
  switch (line.kind) {
    case 'pass':
      return of(true, line.fromHz, line.toHz, line.withinDb)
    case 'keep-tone':
      return of(true, line.hz, line.hz, line.withinDb)
    case 'stop':
      return of(false, line.fromHz, line.toHz ?? foldHz, line.attenuationDb)
    case 'lose-tone':
      return of(false, line.hz, line.hz, line.attenuationDb)
    default:
      return null
  }
}

function joined(left: Stretch, right: Stretch): Stretch {
  const levels = [left.strictestDb, right.strictestDb, left.mildestDb, right.mildestDb]
  const [least, most] = [Math.min(...levels), Math.max(...levels)]
  return {
    isKept: left.isKept,
    fromHz: Math.min(left.fromHz, right.fromHz),
    toHz: Math.max(left.toHz, right.toHz),
    strictestDb: left.isKept ? least : most,
    mildestDb: left.isKept ? most : least,
  }
}

const RESPONSES: Readonly<Record<string, ResponseKind>> = {
  'keep lose': 'lowpass',
  'lose keep': 'highpass',
  'lose keep lose': 'bandpass',
  'keep lose keep': 'bandstop',
}

/**
 * The outline of a sheet without contradictions.
 * @returns a sentence when the sheet doesn't say enough
 */
export function outlineOf(sheet: RequirementSheet, sampleRateHz: number): Outline | string {
  const parts = sheet.flatMap((line) => stretchOf(line, sampleRateHz / 2) ?? [])
  if (!parts.some(({ isKept }) => isKept)) return 'No line says what is to be kept: add a pass band or a tone to keep.'
  if (parts.every(({ isKept }) => isKept)) return 'No line says what is to be lost: add a stop band or a tone to lose.'
  const sorted = parts.sort((left, right) => left.fromHz - right.fromHz || left.toHz - right.toHz)
  const stretches: Stretch[] = []
  for (const part of sorted) {
    const last = stretches[stretches.length - 1]
    if (last !== undefined && last.isKept === part.isKept) stretches[stretches.length - 1] = joined(last, part)
    else if (last !== undefined && last.toHz >= part.fromHz) {
      return 'A band that is kept and one that is lost lie on one another, each so mildly that both can be met; state them apart to search.'
    } else stretches.push(part)
  }
  const turns = stretches.map(({ isKept }) => (isKept ? 'keep' : 'lose')).join(' ')
  return { stretches, response: RESPONSES[turns] ?? 'multiband', sampleRateHz }
}
