import { checkDiscretization } from '../check'
import { DesignError } from '../errors'
import { toSections } from '../forms/sections'
import { expand, fromHalf, fullCount, type HalfForm } from '../forms/zeros-poles-gain'
import { modulus } from '../numeric/complex'
import { bilinearFactor, bilinearHalf } from './bilinear'
import {
  aliasingDiagnostics,
  bilinearDiagnostics,
  delayDiagnostics,
  firstSampleDiagnostics,
  fittedDiagnostics,
  foldedPoleDiagnostics,
  holdDiagnostics,
  matchedDiagnostics,
  rateDiagnostics,
  repeatedPoleDiagnostics,
} from './diagnostics'
import { fittedVersion } from './fitted'
import { impulseInvariant, restoreGain } from './impulse-invariant'
import { matchedZ } from './matched-z'
import { originalOfFamily, type Original } from './original'
import { bandAngles, keepIfGood, sectionDiagnostics } from './rounding'
import { stepInvariant } from './step-invariant'
import type { Diagnostic, DigitalFilter, ParallelForm, Section } from '../forms/filter'
import type { AnalogSpec, Method } from '../spec'

/** What a method yields before it is checked and cut into sections. */
interface Outcome {
  readonly form: HalfForm
  readonly parallel?: ParallelForm
  readonly diagnostics: readonly Diagnostic[]
}

type Hold = Extract<Method, { method: 'bilinear' }>['hold']
type ImpulseInvariant = Extract<Method, { method: 'impulse-invariant' }>
type Fitted = Extract<Method, { method: 'fitted' }>

const perSample = (sampleRateHz: number) => (2 * Math.PI) / sampleRateHz

function byBilinear(original: Original, sampleRateHz: number, hold: Hold): Outcome {
  const analog =
    hold === 'edges' && original.warped !== null
      ? original.warped(sampleRateHz)
      : original.scaled(perSample(sampleRateHz) / bilinearFactor(sampleRateHz, hold === 'edges' ? 'none' : hold))
  const excess = fullCount(analog.poles) - fullCount(analog.zeros)
  return {
    form: bilinearHalf(analog),
    diagnostics: [...bilinearDiagnostics(excess), ...delayDiagnostics(original, sampleRateHz, true)],
  }
}

/** Where a gain is compared, in rad per sample: DC, the centre of the band, or half the rate. */
function referenceAngle({ gainAtHz }: Original, sampleRateHz: number): number {
  return gainAtHz === 'half the rate' ? Math.PI : Math.min(gainAtHz * perSample(sampleRateHz), Math.PI)
}

/** The pass band in rad per sample, up to half the rate; of a band-stop filter, the lower one. */
function passBand({ passHz: [low, high] }: Original, sampleRateHz: number): readonly [number, number] {
  const unit = perSample(sampleRateHz)
  return [Math.min(low * unit, Math.PI), Math.min(high * unit, Math.PI)]
}

function byImpulseInvariant(original: Original, sampleRateHz: number, how: ImpulseInvariant): Outcome {
  const analog = original.scaled(perSample(sampleRateHz))
  const halved = how.halfFirstSample === true
  const plain = impulseInvariant(analog, halved)
  const restored = how.restoreGain === true ? restoreGain(analog, plain, referenceAngle(original, sampleRateHz)) : plain
  const jump = fullCount(analog.poles) - fullCount(analog.zeros) === 1
  return {
    ...restored,
    diagnostics: [
      ...aliasingDiagnostics(analog, plain.form, passBand(original, sampleRateHz)),
      ...firstSampleDiagnostics(jump, halved),
      ...foldedPoleDiagnostics(expand(analog.poles).filter((pole) => Math.abs(pole.im) > Math.PI).length),
      ...repeatedPoleDiagnostics(restored.parallel !== undefined),
      ...delayDiagnostics(original, sampleRateHz, false),
    ],
  }
}

function byMatchedZ(original: Original, sampleRateHz: number): Outcome {
  const { form, placed, foldedPoles } = matchedZ(
    original.scaled(perSample(sampleRateHz)),
    referenceAngle(original, sampleRateHz),
  )
  return {
    form,
    diagnostics: [
      ...matchedDiagnostics(placed.fromInfinity, placed.fromAboveHalfRate, foldedPoles),
      ...delayDiagnostics(original, sampleRateHz, false),
    ],
  }
}

function byStepInvariant(original: Original, sampleRateHz: number): Outcome {
  const held = stepInvariant(original.scaled(perSample(sampleRateHz)))
  return {
    ...held,
    diagnostics: [
      ...holdDiagnostics(sampleRateHz),
      ...repeatedPoleDiagnostics(held.parallel !== undefined),
      ...delayDiagnostics(original, sampleRateHz, false),
    ],
  }
}

function byFit(original: Original, sampleRateHz: number, how: Fitted): Outcome {
  const rivals = [
    byBilinear(original, sampleRateHz, original.warped === null ? 'none' : 'edges').form,
    byMatchedZ(original, sampleRateHz).form,
  ]
  const fitted = fittedVersion(original.scaled(perSample(sampleRateHz)), rivals, {
    upTo: how.upToHz * perSample(sampleRateHz),
    freeDelay: how.freeDelay === true,
    order: how.order,
  })
  return { form: fitted.form, diagnostics: fittedDiagnostics(fitted, sampleRateHz, how.freeDelay === true) }
}

function byMethod(original: Original, sampleRateHz: number, how: Method): Outcome {
  switch (how.method) {
    case 'bilinear':
      return byBilinear(original, sampleRateHz, how.hold)
    case 'impulse-invariant':
      return byImpulseInvariant(original, sampleRateHz, how)
    case 'matched-z':
      return byMatchedZ(original, sampleRateHz)
    case 'step-invariant':
      return byStepInvariant(original, sampleRateHz)
    case 'fitted':
      return byFit(original, sampleRateHz, how)
  }
}

/** Schur–Cohn for one section: |a2| < 1 and |a1| < 1 + a2. */
const isStable = ({ a1, a2 }: Section) => Math.abs(a2) < 1 && Math.abs(a1) < 1 + a2

/**
 * A specification brought to a sampling rate by one method.
 *
 * @param spec analog specification, edges in Hz
 * @param sampleRateHz sampling rate in Hz
 * @param how method and its options
 * @returns zeros, poles and gain on the z-plane, the cascade, the sum of sections where the method yields one, and diagnostics as data
 * @throws DesignError as checkDiscretization; `poles-reach-circle` (field `sampleRateHz`) when rounding would make the filter unstable
 */
export function discretize(spec: AnalogSpec, sampleRateHz: number, how: Method): DigitalFilter {
  checkDiscretization(spec, sampleRateHz, how)
  return discretizeOriginal(originalOfFamily(spec), sampleRateHz, how)
}

/**
 * The same for any original; whoever calls this has checked that the method suits it.
 *
 * @throws DesignError `poles-reach-circle` as above
 */
export function discretizeOriginal(original: Original, sampleRateHz: number, how: Method): DigitalFilter {
  const { form, parallel, diagnostics } = byMethod(original, sampleRateHz, how)
  const angles = bandAngles(passBand(original, sampleRateHz))
  const digital = digitalOf(form, sampleRateHz, angles, Math.max(...original.edgesHz, original.passHz[0]))
  const { kept, diagnostics: left } = keepIfGood(parallel, digital, angles)
  return {
    ...digital,
    ...(kept === undefined ? {} : { parallel: kept }),
    diagnostics: [...rateDiagnostics(original, sampleRateHz), ...diagnostics, ...left, ...digital.diagnostics],
  }
}

/**
 * The digital filter of a z-plane form: its sections, and a caution where rounding them shows.
 *
 * @param angles rad per sample where the filter passes
 * @param highestHz the highest frequency that a lower rate must still hold
 * @throws DesignError `poles-reach-circle`
 */
export function digitalOf(
  form: HalfForm,
  sampleRateHz: number,
  angles: readonly number[],
  highestHz: number,
): DigitalFilter {
  const filter = fromHalf('z', form)
  const sections = toSections(filter)
  if (filter.poles.some((pole) => modulus(pole) >= 1) || !sections.every(isStable)) {
    throw new DesignError(
      'poles-reach-circle',
      'sampleRateHz',
      'At this rate the poles lie closer to the unit circle than double precision can tell; lower the rate or widen the band.',
      Math.max(sampleRateHz / 10, 2.5 * highestHz),
    )
  }
  return { ...filter, sampleRateHz, sections, diagnostics: sectionDiagnostics(sections, filter, angles) }
}
