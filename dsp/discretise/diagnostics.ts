import { show } from '../check'
import { modulus, subtract } from '../numeric/complex'
import { fromHalf, valueAt, type HalfForm } from '../forms/zeros-poles-gain'
import type { Diagnostic } from '../forms/filter'
import type { FittedVersion } from './fitted'
import type { Original } from './original'

/** Above this part of the rate an edge is cautioned. */
const NEAR_HALF_RATE = 0.45
/** From here on the bilinear transform bends a flat delay visibly. */
const DELAY_BENDS = 0.25
/** In-band aliasing above this is a caution, below it a note. */
const ALIASING_CAUTION_DB = -40
const FLOOR_DB = -300

const plural = (count: number, one: string, many: string) => `${count} ${count === 1 ? one : many}`

/** What the rate does to any method. */
export function rateDiagnostics({ edgesHz }: Original, sampleRateHz: number): Diagnostic[] {
  return edgesHz.flatMap((edge, index): Diagnostic[] =>
    edge > NEAR_HALF_RATE * sampleRateHz
      ? [
          {
            code: 'edge-near-half-rate',
            severity: 'caution',
            message: `An edge at ${show(edge)} Hz is ${show((100 * edge) / sampleRateHz)} % of the rate; above 45 % little of the analog response is left below half the rate.`,
            field: `analog.edgesHz.${index}`,
            value: edge / sampleRateHz,
          },
        ]
      : [],
  )
}

/** What becomes of a maximally flat delay. */
export function delayDiagnostics(original: Original, sampleRateHz: number, bilinear: boolean): Diagnostic[] {
  const { family, edgesHz } = original
  if (family?.family !== 'bessel') return []
  if (family.response !== 'lowpass') {
    return [
      {
        code: 'flat-delay-is-lowpass',
        severity: 'caution',
        message:
          'The flat delay of a Bessel filter belongs to its low-pass form; the band transform keeps the magnitude, not the delay.',
        field: 'analog.response',
      },
    ]
  }
  const part = (edgesHz[0] ?? 0) / sampleRateHz
  if (!bilinear || part <= DELAY_BENDS) return []
  return [
    {
      code: 'flat-delay-lost',
      severity: 'caution',
      message:
        'Above a quarter of the rate the bilinear transform bends the flat delay; a higher rate keeps it, and so do matched-z and impulse-invariant versions better.',
      field: 'sampleRateHz',
      value: part,
    },
  ]
}

export function bilinearDiagnostics(zerosAtInfinity: number): Diagnostic[] {
  if (zerosAtInfinity === 0) return []
  return [
    {
      code: 'zeros-at-half-rate',
      severity: 'note',
      message: `${plural(zerosAtInfinity, 'zero', 'zeros')} at infinity came to half the rate (z = −1).`,
      field: 'how.method',
      value: zerosAtInfinity,
    },
  ]
}

export function matchedDiagnostics(fromInfinity: number, fromAbove: number, foldedPoles: number): Diagnostic[] {
  const found: Diagnostic[] = []
  if (fromInfinity > 0) {
    found.push({
      code: 'zeros-at-half-rate',
      severity: 'note',
      message: `${plural(fromInfinity, 'zero', 'zeros')} at infinity ${fromInfinity === 1 ? 'has' : 'have'} no place under e^{sT}; put at half the rate (z = −1).`,
      field: 'how.method',
      value: fromInfinity,
    })
  }
  if (fromAbove > 0) {
    found.push({
      code: 'zeros-above-half-rate',
      severity: 'caution',
      message: `${plural(fromAbove, 'zero lies', 'zeros lie')} above half the rate and would fold into the band; put at half the rate (z = −1).`,
      field: 'sampleRateHz',
      value: fromAbove,
    })
  }
  return [...found, ...foldedPoleDiagnostics(foldedPoles)]
}

export function foldedPoleDiagnostics(foldedPoles: number): Diagnostic[] {
  if (foldedPoles === 0) return []
  return [
    {
      code: 'poles-above-half-rate',
      severity: 'caution',
      message: `${plural(foldedPoles, 'pole lies', 'poles lie')} above half the rate and ${foldedPoles === 1 ? 'folds' : 'fold'} into the band; a higher rate avoids it.`,
      field: 'sampleRateHz',
      value: foldedPoles,
    },
  ]
}

export function holdDiagnostics(sampleRateHz: number): Diagnostic[] {
  return [
    {
      code: 'hold-delay',
      severity: 'note',
      message: 'The zero-order hold adds half a sample of delay.',
      field: 'how.method',
      value: 0.5 / sampleRateHz,
    },
  ]
}

export function repeatedPoleDiagnostics(parallelKept: boolean): Diagnostic[] {
  if (parallelKept) return []
  return [
    {
      code: 'repeated-poles-in-cascade',
      severity: 'note',
      message: 'A repeated pole has no place in a sum of second-order sections; this version is kept as a cascade.',
      field: 'how.method',
    },
  ]
}

/**
 * Aliasing of an impulse-invariant version: the largest |H(e^{jω}) − H(jω)| over the pass band, which is the sum of all images, in dB
 * relative to the largest |H(jω)| there.
 *
 * @param analog in rad per sample
 * @param digital before any gain is restored
 * @param band pass band in rad per sample
 */
export function aliasingDiagnostics(
  analog: HalfForm,
  digital: HalfForm,
  band: readonly [number, number],
): Diagnostic[] {
  const s = fromHalf('s', analog)
  const z = fromHalf('z', digital)
  const points = 48
  let peak = 0
  let residue = 0
  for (let k = 0; k <= points; k += 1) {
    const omega = band[0] + ((band[1] - band[0]) * k) / points
    const wanted = valueAt(s, { re: 0, im: omega })
    const got = valueAt(z, { re: Math.cos(omega), im: Math.sin(omega) })
    peak = Math.max(peak, modulus(wanted))
    residue = Math.max(residue, modulus(subtract(got, wanted)))
  }
  const db = Math.max(FLOOR_DB, 20 * Math.log10(residue / peak))
  return [
    {
      code: 'aliased-residue',
      severity: db > ALIASING_CAUTION_DB ? 'caution' : 'note',
      message: `Images above half the rate fold into the pass band at up to ${show(Math.round(db * 10) / 10).replace('-', '−')} dB of its peak.`,
      field: 'sampleRateHz',
      value: db,
    },
  ]
}

/** The jump of h(t) at zero, taken whole. */
export function firstSampleDiagnostics(jump: boolean, halved: boolean): Diagnostic[] {
  if (!jump || halved) return []
  return [
    {
      code: 'first-sample-whole',
      severity: 'note',
      message: 'The impulse response jumps at zero; taking half of the first sample would lower the aliasing.',
      field: 'how.halfFirstSample',
    },
  ]
}

/** What a fit came to. */
export function fittedDiagnostics(fit: FittedVersion, sampleRateHz: number, freeDelay: boolean): Diagnostic[] {
  const found: Diagnostic[] = []
  if (freeDelay) {
    const micro = (1e6 * fit.delay) / sampleRateHz
    found.push({
      code: 'fitted-delay',
      severity: 'note',
      message: `With the delay left free, this version comes ${show(Math.abs(Math.round(micro * 1000) / 1000))} µs ${micro < 0 ? 'earlier' : 'later'} than the original.`,
      field: 'how.freeDelay',
      value: fit.delay / sampleRateHz,
    })
  }
  if (fit.kept !== 'fit') {
    found.push({
      code: 'fit-no-better',
      severity: 'note',
      message: `No better fit than the ${fit.kept} version was found; this is that version.`,
      field: 'how.method',
    })
  }
  if (fit.endedEarly) {
    found.push({
      code: 'fit-ended-early',
      severity: 'note',
      message:
        'At this order the fit is ended early, so that it can follow the hand; a lower order is fitted to the end.',
      field: 'how.order',
    })
  }
  return found
}
