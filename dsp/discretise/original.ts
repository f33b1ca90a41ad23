import { designHalf } from '../design-analog'
import { expand, toHalf, type HalfForm } from '../forms/zeros-poles-gain'
import { magnitudeDb } from '../response/frequency'
import { useBandOf } from '../response/use-band'
import { warp, warpedWidth } from './bilinear'
import type { Filter } from '../forms/filter'
import type { AnalogSpec } from '../spec'

/** An analog filter as the methods take it, whether it comes from a family or from roots of the user's own. */
export interface Original {
  /** The filter with frequencies multiplied by `unit`, which stands for one Hz: 2π/rate gives rad per sample. */
  readonly scaled: (unit: number) => HalfForm
  /** In the bilinear plane with every edge warped there; null where there are no edges. */
  readonly warped: ((sampleRateHz: number) => HalfForm) | null
  readonly edgesHz: readonly number[]
  /** Where analog and digital gain are made equal: 0, the centre of a band, or 'half the rate'. */
  readonly gainAtHz: number | 'half the rate'
  /** The pass band in Hz, Infinity for the end that is none; of a band-stop filter the lower one. */
  readonly passHz: readonly [number, number]
  readonly family: { readonly family: AnalogSpec['family']; readonly response: AnalogSpec['response'] } | null
}

/** The analog filter with time in samples, or in any other unit: edges in `unit` per Hz. */
function designScaled(spec: AnalogSpec, unit: number): HalfForm {
  const [low = 0, high = 0] = spec.edgesHz
  return designHalf(
    spec,
    spec.edgesHz.map((edge) => edge * unit),
    (high - low) * unit,
  )
}

function gainAtHz(spec: AnalogSpec): number | 'half the rate' {
  const [low = 0, high = 0] = spec.edgesHz
  if (spec.response === 'highpass') return 'half the rate'
  return spec.response === 'bandpass' ? Math.sqrt(low) * Math.sqrt(high) : 0
}

function passHz(spec: AnalogSpec): readonly [number, number] {
  const [low = 0, high = 0] = spec.edgesHz
  switch (spec.response) {
    case 'lowpass':
    case 'bandstop':
      return [0, low]
    case 'highpass':
      return [low, Infinity]
    case 'bandpass':
      return [low, high]
  }
}

/** The original of a specification that has passed checkAnalogSpec. */
export function originalOfFamily(spec: AnalogSpec): Original {
  const [low = 0, high = 0] = spec.edgesHz
  return {
    scaled: (unit) => designScaled(spec, unit),
    warped: (sampleRateHz) =>
      designHalf(
        spec,
        spec.edgesHz.map((edge) => warp(edge, sampleRateHz)),
        warpedWidth(low, high, sampleRateHz),
      ),
    edgesHz: spec.edgesHz,
    gainAtHz: gainAtHz(spec),
    passHz: passHz(spec),
    family: { family: spec.family, response: spec.response },
  }
}

const PEAK_NET = 240
const PEAK_ROUNDS = 60

/** Where an analog filter is strongest between two frequencies: on a net first, then by thirds. */
function strongestHz(filter: Filter<'s'>, fromHz: number, toHz: number): number {
  const level = (hertz: number) => magnitudeDb(filter, [hertz])[0]!
  const net = Array.from({ length: PEAK_NET + 1 }, (_, k) => fromHz * (toHz / fromHz) ** (k / PEAK_NET))
  const levels = magnitudeDb(filter, net)
  const at = levels.indexOf(Math.max(...levels))
  let [low, high] = [net[Math.max(at - 1, 0)]!, net[Math.min(at + 1, PEAK_NET)]!]
  for (let round = 0; round < PEAK_ROUNDS; round++) {
    const [left, right] = [low + (high - low) / 3, high - (high - low) / 3]
    if (level(left) < level(right)) low = left
    else high = right
  }
  return (low + high) / 2
}

/**
 * The original given by its roots. It has no edges. Its gain is matched at 0 Hz where it passes there within 20 dB of its peak, else at
 * half the rate where it passes at the highest frequencies, else where it is strongest.
 *
 * @param filter roots in rad/s
 */
export function originalOfRoots(filter: Filter<'s'>): Original {
  const half = toHalf(filter)
  const excess = expand(half.poles).length - expand(half.zeros).length
  const { fromHz, toHz } = useBandOf(filter)
  const atHz = fromHz === 0 ? 0 : toHz === Infinity ? ('half the rate' as const) : strongestHz(filter, fromHz, toHz)
  return {
    scaled: (unit) => {
      const perRadian = unit / (2 * Math.PI)
      const scale = (roots: HalfForm['zeros']) =>
        roots.map(({ re, im }) => ({ re: re * perRadian, im: im * perRadian }))
      return { zeros: scale(half.zeros), poles: scale(half.poles), gain: half.gain * perRadian ** excess }
    },
    warped: null,
    edgesHz: [],
    gainAtHz: atHz,
    passHz: [fromHz, toHz],
    family: null,
  }
}
