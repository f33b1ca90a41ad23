import type { StackView, Trace } from '../view'
import type { StackFrame } from './frame'
import { valueAt } from './read-out'

/* The plotted values as a table on the page, and as a file. */

const ROWS = 30
const DEGREES = 180 / Math.PI

export interface ValueColumn {
  readonly key: string
  readonly trace: string
  /** With its unit. */
  readonly heading: string
  /** Decimals that the unit is read with. */
  readonly decimals: number
  at(hz: number): number
}

/** Frequencies for the page's table: evenly spread over the axis as it is drawn. */
export function tableFrequencies(frame: StackFrame): number[] {
  const [start, end] = frame.x.range
  return Array.from({ length: ROWS }, (_, i) => frame.x.toValue(start + ((end - start) * i) / (ROWS - 1)))
}

export function valueColumns(traces: readonly Trace[], view: StackView): ValueColumn[] {
  return traces.flatMap((trace) => {
    const { id, label, frequenciesHz } = trace
    const column = (
      name: string,
      heading: string,
      decimals: number,
      values: Float64Array,
      factor = 1,
    ): ValueColumn => ({
      key: `${id} ${name}`,
      trace: label,
      heading,
      decimals,
      at: (hz) => valueAt(frequenciesHz, values, hz) * factor,
    })
    const columns = [
      column('magnitude', 'Magnitude, dB', 2, trace.magnitudeDb),
      column('phase', 'Phase, °', 1, trace.phaseRadians, DEGREES),
      column('delay', 'Group delay, ms', 3, trace.groupDelaySeconds, 1e3),
    ]
    if (trace.departure) {
      const unit = { db: 'dB', degrees: '°', microseconds: 'µs' }[view.departureUnit]
      columns.push(column('departure', `Departure, ${unit}`, 3, trace.departure[view.departureUnit]))
    }
    return columns
  })
}

const csvHeader = [
  'trace',
  'frequency_hz',
  'magnitude_db',
  'phase_deg',
  'group_delay_s',
  'departure_db',
  'departure_deg',
  'departure_us',
] as const

/** Every computed point of every shown trace, one a line, in plain numbers; phase unwrapped. An exact zero is -Infinity dB. */
export function csvOfTraces(traces: readonly Trace[]): string {
  const lines: string[] = [csvHeader.join(',')]
  for (const trace of traces) {
    for (let i = 0; i < trace.frequenciesHz.length; i++) {
      const { departure } = trace
      const fields = [
        trace.frequenciesHz[i],
        trace.magnitudeDb[i],
        (trace.phaseRadians[i] ?? Number.NaN) * DEGREES,
        trace.groupDelaySeconds[i],
        departure?.db[i],
        departure?.degrees[i],
        departure?.microseconds[i],
      ]
      lines.push([trace.id, ...fields.map(csvNumber)].join(','))
    }
  }
  return `${lines.join('\r\n')}\r\n`
}

const csvNumber = (value: number | undefined): string =>
  value === undefined || Number.isNaN(value)
    ? ''
    : String(Number.isFinite(value) ? Number(value.toPrecision(12)) : value)
