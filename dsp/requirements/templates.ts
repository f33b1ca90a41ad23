import { show } from '../check'
import { DesignError } from '../errors'
import type { RequirementSheet } from './requirement'

/*
 * Sheets for usual jobs, to be edited. Where a number has a published source it is named; the others are common practice, which is no
 * source, and each sheet says so.
 */

export interface TemplateOptions {
  readonly sampleRateHz: number
  /** Of the converter. */
  readonly bits?: number
  /** Highest frequency of interest. */
  readonly bandHz?: number
}

export interface RequirementTemplate {
  readonly id: string
  readonly title: string
  readonly source: string
  readonly note: string
  /**
   * The lines for a rate.
   * @throws DesignError `rate-out-of-range` (field `sampleRateHz`) or `band-out-of-range` (field `bandHz`), with the nearest that works
   */
  readonly sheet: (options: TemplateOptions) => RequirementSheet
}

const FEWEST_BITS = 4
const MOST_BITS = 32

/** Ratio of a full-scale sine to the quantisation noise of an ideal converter: 20·N·lg 2 + 10·lg 1.5, or 6.02·N + 1.76 dB. */
function quantisationRatioDb(bits: number): number {
  if (!(Number.isInteger(bits) && bits >= FEWEST_BITS && bits <= MOST_BITS)) {
    const nearest = bits > MOST_BITS ? MOST_BITS : FEWEST_BITS
    throw new DesignError('bits', 'bits', `A converter has ${FEWEST_BITS} to ${MOST_BITS} bits here.`, nearest)
  }
  return 20 * bits * Math.log10(2) + 10 * Math.log10(1.5)
}

/** Rates are often 2.56 times the band, which leaves 0.56 of it for the filter to fall in. */
const RATE_PER_BAND = 2.56
const FIRST_ALIAS = RATE_PER_BAND - 1
/** Part of half the rate up to which a stop band may begin. */
const ROOM = 0.95

function bandOf({ sampleRateHz, bandHz }: TemplateOptions, usual: number, reach: number): number {
  const most = (ROOM * sampleRateHz) / 2 / reach
  const band = bandHz ?? Math.min(usual, most)
  if (band > 0 && band <= most) return band
  const nearest = Number(most.toPrecision(6))
  const message = `At ${show(sampleRateHz)} Hz the band ends between 0 and ${show(most)} Hz: this sheet needs room above it.`
  throw new DesignError('band-out-of-range', 'bandHz', message, nearest)
}

function needRate(sampleRateHz: number, leastHz: number, job: string): void {
  if (sampleRateHz >= leastHz) return
  const message = `${job} needs a rate of ${show(leastHz)} Hz or more; ${show(sampleRateHz)} Hz was given.`
  throw new DesignError('rate-out-of-range', 'sampleRateHz', message, leastHz)
}

/** Relative sensitivities of at most 1.1 and at least 1/1.1. */
const TENTH_DB = 20 * Math.log10(1.1)

export const requirementTemplates: readonly RequirementTemplate[] = [
  {
    id: 'anti-alias',
    title: 'Anti-alias before a lower rate, for a converter of N bits',
    source:
      'Attenuation 6.02·N + 1.76 dB: signal to quantisation noise of an ideal converter (W. R. Bennett, Bell Syst. Tech. J. 27, 1948). Where it is asked for, at the lower rate less the band, and the lower rate of 2.56 times the band: common practice.',
    note: 'What lies at the lower rate less the band folds onto the band; there a full-scale tone comes out no stronger than the converter’s own noise. The analog filter before the converter is a job of its own. Where people depend on the result, the applicable code and licensed practice decide.',
    sheet: (options) => {
      const bandHz = bandOf(options, options.sampleRateHz / (4 * RATE_PER_BAND), FIRST_ALIAS)
      return [
        { kind: 'pass', fromHz: 0, toHz: bandHz, withinDb: 0.1 },
        { kind: 'stop', fromHz: bandHz * FIRST_ALIAS, attenuationDb: quantisationRatioDb(options.bits ?? 16) },
      ]
    },
  },
  {
    id: 'velocity',
    title: 'Vibration velocity, 10 to 1000 Hz',
    source:
      'Band and ±10 %: after the sensitivity table of ISO 2954 (1975), as quoted second-hand and kept only as a check of sanity. What is lost below 1 Hz and from 4 kHz on: common practice.',
    note: 'The limits of the edition in force were not confirmed: take them from the standard itself before a verdict on machinery rests on this sheet. Where people depend on the result, the applicable code and licensed practice decide.',
    sheet: ({ sampleRateHz }) => {
      needRate(sampleRateHz, 1000 * RATE_PER_BAND, 'Velocity up to 1000 Hz')
      return [
        { kind: 'pass', fromHz: 10, toHz: 1000, withinDb: TENTH_DB },
        { kind: 'stop', fromHz: 0, toHz: 1, attenuationDb: 40 },
        ...(sampleRateHz * (ROOM / 2) >= 4000 ? [{ kind: 'stop', fromHz: 4000, attenuationDb: 20 } as const] : []),
      ]
    },
  },
  {
    id: 'structural-modes',
    title: 'Structural modes below 50 Hz',
    source: 'Common practice.',
    note: 'Phase is held so that mode shapes keep their signs and sizes; one constant delay, the same for all channels, does no harm. Where people depend on the result, the applicable code and licensed practice decide.',
    sheet: (options) => {
      const bandHz = bandOf(options, 50, 2)
      return [
        { kind: 'pass', fromHz: 0, toHz: bandHz, withinDb: 0.5 },
        { kind: 'stop', fromHz: 2 * bandHz, attenuationDb: 40 },
        { kind: 'phase-departure', upToHz: bandHz, withinDegrees: 2, removeDelay: true },
      ]
    },
  },
  {
    id: 'delay-matched',
    title: 'Delay-matched channels',
    source: 'Common practice; 0.36° for each hertz and millisecond of delay is arithmetic.',
    note: 'Channels through the same filter are matched by themselves; the spread matters where one of them goes through another filter, or through none and a constant delay. Where people depend on the result, the applicable code and licensed practice decide.',
    sheet: (options) => {
      const bandHz = bandOf(options, options.sampleRateHz / 10, 2)
      return [
        { kind: 'pass', fromHz: 0, toHz: bandHz, withinDb: 0.5 },
        { kind: 'stop', fromHz: 2 * bandHz, attenuationDb: 30 },
        // A twentieth of the shortest period: 18° there, had it all come at that frequency.
        { kind: 'delay-spread', fromHz: 0, toHz: bandHz, atMostSeconds: 0.05 / bandHz },
      ]
    },
  },
]
