import { bisectRight } from 'd3'
import { formatDb, formatDegrees, formatFixed, formatHz, formatNumber, formatSeconds } from '@/lib/format/quantity'
import type { DepartureUnit, Trace } from '../view'
import type { PlotId } from './props'

/* Values of the curves at one frequency, as numbers and in words. */

const THIN = '\u2009'

/** The curve at `hz` between its samples; NaN outside them. Beside a −∞ the nearer sample counts. */
export function valueAt(frequenciesHz: Float64Array, values: Float64Array, hz: number): number {
  const count = Math.min(frequenciesHz.length, values.length)
  const first = frequenciesHz[0] ?? Number.NaN
  const last = frequenciesHz[count - 1] ?? Number.NaN
  const slack = Math.abs(last) * 1e-9
  if (!(hz >= first - slack && hz <= last + slack)) return Number.NaN
  const high = Math.min(bisectRight(frequenciesHz, hz, 1, count), count - 1)
  const low = Math.max(high - 1, 0)
  const f0 = frequenciesHz[low] ?? 0
  const f1 = frequenciesHz[high] ?? 0
  const v0 = values[low] ?? Number.NaN
  const v1 = values[high] ?? Number.NaN
  if (f1 === f0) return v0
  const part = Math.min(1, Math.max(0, (hz - f0) / (f1 - f0)))
  if (!Number.isFinite(v0) || !Number.isFinite(v1)) return part < 0.5 ? v0 : v1
  return v0 + (v1 - v0) * part
}

const DEGREES = 180 / Math.PI

/** Phase as it is plotted: unwrapped, or folded into −180…180 degrees. */
export const shownDegrees = (degrees: number, unwrapped: boolean): number =>
  unwrapped ? degrees : degrees - Math.floor((degrees + 180) / 360) * 360

/** What a plot shows of a trace at `hz`, in the plot's unit (dB, degrees, seconds, or the departure's unit). */
export function plottedValue(
  trace: Trace,
  plot: PlotId,
  hz: number,
  shown: { unwrapped: boolean; departureUnit: DepartureUnit },
): number {
  switch (plot) {
    case 'magnitude':
      return valueAt(trace.frequenciesHz, trace.magnitudeDb, hz)
    case 'phase':
      return shownDegrees(valueAt(trace.frequenciesHz, trace.phaseRadians, hz) * DEGREES, shown.unwrapped)
    case 'group-delay':
      return valueAt(trace.frequenciesHz, trace.groupDelaySeconds, hz)
    case 'departure':
      return trace.departure ? valueAt(trace.frequenciesHz, trace.departure[shown.departureUnit], hz) : Number.NaN
  }
}

export function formatPlotted(value: number, plot: PlotId, unit: DepartureUnit): string {
  if (Number.isNaN(value)) return '—'
  switch (plot) {
    case 'magnitude':
      return formatDb(value)
    case 'phase':
      return formatDegrees(value)
    case 'group-delay':
      return formatSeconds(value)
    case 'departure':
      if (unit === 'db') return formatDb(value, 3)
      if (unit === 'degrees') return formatDegrees(value, 2)
      return `${formatFixed(value, Math.abs(value) >= 100 ? 0 : 1)}${THIN}µs`
  }
}

/** "200 Hz", or the part of the sampling rate. */
export const formatFrequency = (hz: number, sampleRateHz: number, normalised: boolean): string =>
  normalised ? `${formatNumber(hz / sampleRateHz, 3)}${THIN}fs` : formatHz(hz, 4)

/** Everything at one frequency in one sentence, for those who listen. */
export function spokenValues(
  traces: readonly Trace[],
  hz: number,
  sampleRateHz: number,
  shown: { unwrapped: boolean; departureUnit: DepartureUnit },
): string {
  const parts = traces.flatMap((trace) => {
    const say = (plot: PlotId) => formatPlotted(plottedValue(trace, plot, hz, shown), plot, shown.departureUnit)
    if (Number.isNaN(plottedValue(trace, 'magnitude', hz, shown))) return [`${trace.label} ends before`]
    const words = [say('magnitude'), say('phase'), `delay ${say('group-delay')}`]
    if (trace.departure) words.push(`departs ${say('departure')}`)
    return [`${trace.label} ${words.join(', ')}`]
  })
  return `At ${formatHz(hz)}, ${formatNumber(hz / sampleRateHz, 3)} of the sampling rate: ${parts.join('; ')}.`
}
