import { checkDiscretization, fittedNotAvailable } from '../check'
import { designHalf } from '../design-analog'
import { DesignError } from '../errors'
import { toSections } from '../forms/sections'
import { expand, fromHalf, fullCount, type HalfForm } from '../forms/zeros-poles-gain'
import { modulus } from '../numeric/complex'
import { bilinearFactor, bilinearHalf, warp, warpedWidth } from './bilinear'
import {
  aliasingDiagnostics,
  bilinearDiagnostics,
  delayDiagnostics,
  firstSampleDiagnostics,
  foldedPoleDiagnostics,
  holdDiagnostics,
  matchedDiagnostics,
  rateDiagnostics,
  repeatedPoleDiagnostics,
} from './diagnostics'
import { impulseInvariant, restoreGain } from './impulse-invariant'
import { matchedZ } from './matched-z'
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

/** The analog filter with time in samples: edges in `unit` per Hz. */
function designScaled(spec: AnalogSpec, unit: number): HalfForm {
  const [low = 0, high = 0] = spec.edgesHz
  return designHalf(
    spec,
    spec.edgesHz.map((edge) => edge * unit),
    (high - low) * unit,
  )
}

const perSample = (sampleRateHz: number) => (2 * Math.PI) / sampleRateHz

function byBilinear(spec: AnalogSpec, sampleRateHz: number, hold: Hold): Outcome {
  const [low = 0, high = 0] = spec.edgesHz
  const analog =
    hold === 'edges'
      ? designHalf(
          spec,
          spec.edgesHz.map((edge) => warp(edge, sampleRateHz)),
          warpedWidth(low, high, sampleRateHz),
        )
      : designScaled(spec, perSample(sampleRateHz) / bilinearFactor(sampleRateHz, hold))
  const excess = fullCount(analog.poles) - fullCount(analog.zeros)
  return {
    form: bilinearHalf(analog),
    diagnostics: [...bilinearDiagnostics(excess), ...delayDiagnostics(spec, sampleRateHz, true)],
  }
}

/** Where a gain is compared, in rad per sample: DC, the centre of the band, or half the rate. */
function referenceAngle(spec: AnalogSpec, sampleRateHz: number): number {
  const [low = 0, high = 0] = spec.edgesHz
  if (spec.response === 'highpass') return Math.PI
  return spec.response === 'bandpass' ? Math.sqrt(low) * Math.sqrt(high) * perSample(sampleRateHz) : 0
}

/** The pass band in rad per sample; of a band-stop filter, the lower one. */
function passBand(spec: AnalogSpec, sampleRateHz: number): readonly [number, number] {
  const [low = 0, high = 0] = spec.edgesHz.map((edge) => edge * perSample(sampleRateHz))
  switch (spec.response) {
    case 'lowpass':
    case 'bandstop':
      return [0, low]
    case 'highpass':
      return [low, Math.PI]
    case 'bandpass':
      return [low, high]
  }
}

function byImpulseInvariant(spec: AnalogSpec, sampleRateHz: number, how: ImpulseInvariant): Outcome {
  const unit = perSample(sampleRateHz)
  const analog = designScaled(spec, unit)
  const halved = how.halfFirstSample === true
  const plain = impulseInvariant(analog, halved)
  const restored = how.restoreGain === true ? restoreGain(analog, plain, referenceAngle(spec, sampleRateHz)) : plain
  const jump = fullCount(analog.poles) - fullCount(analog.zeros) === 1
  return {
    ...restored,
    diagnostics: [
      ...aliasingDiagnostics(analog, plain.form, passBand(spec, sampleRateHz)),
      ...firstSampleDiagnostics(jump, halved),
      ...foldedPoleDiagnostics(expand(analog.poles).filter((pole) => Math.abs(pole.im) > Math.PI).length),
      ...repeatedPoleDiagnostics(restored.parallel !== undefined),
      ...delayDiagnostics(spec, sampleRateHz, false),
    ],
  }
}

function byMatchedZ(spec: AnalogSpec, sampleRateHz: number): Outcome {
  const { form, placed, foldedPoles } = matchedZ(
    designScaled(spec, perSample(sampleRateHz)),
    referenceAngle(spec, sampleRateHz),
  )
  return {
    form,
    diagnostics: [
      ...matchedDiagnostics(placed.fromInfinity, placed.fromAboveHalfRate, foldedPoles),
      ...delayDiagnostics(spec, sampleRateHz, false),
    ],
  }
}

function byStepInvariant(spec: AnalogSpec, sampleRateHz: number): Outcome {
  const held = stepInvariant(designScaled(spec, perSample(sampleRateHz)))
  return {
    ...held,
    diagnostics: [
      ...holdDiagnostics(sampleRateHz),
      ...repeatedPoleDiagnostics(held.parallel !== undefined),
      ...delayDiagnostics(spec, sampleRateHz, false),
    ],
  }
}

function byMethod(spec: AnalogSpec, sampleRateHz: number, how: Method): Outcome {
  switch (how.method) {
    case 'bilinear':
      return byBilinear(spec, sampleRateHz, how.hold)
    case 'impulse-invariant':
      return byImpulseInvariant(spec, sampleRateHz, how)
    case 'matched-z':
      return byMatchedZ(spec, sampleRateHz)
    case 'step-invariant':
      return byStepInvariant(spec, sampleRateHz)
    case 'fitted':
      throw fittedNotAvailable()
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
  const { form, parallel, diagnostics } = byMethod(spec, sampleRateHz, how)
  const filter = fromHalf('z', form)
  const sections = toSections(filter)
  if (filter.poles.some((pole) => modulus(pole) >= 1) || !sections.every(isStable)) {
    throw new DesignError(
      'poles-reach-circle',
      'sampleRateHz',
      'At this rate the poles lie closer to the unit circle than double precision can tell; lower the rate or widen the band.',
      Math.max(sampleRateHz / 10, 2.5 * Math.max(...spec.edgesHz)),
    )
  }
  const angles = bandAngles(passBand(spec, sampleRateHz))
  const { kept, diagnostics: left } = keepIfGood(parallel, filter, angles)
  return {
    ...filter,
    sampleRateHz,
    sections,
    ...(kept === undefined ? {} : { parallel: kept }),
    diagnostics: [
      ...rateDiagnostics(spec, sampleRateHz),
      ...diagnostics,
      ...left,
      ...sectionDiagnostics(sections, filter, angles),
    ],
  }
}
