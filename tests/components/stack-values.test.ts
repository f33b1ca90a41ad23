import { describe, expect, it } from 'vitest'
import { formatPlotted, plottedValue, shownDegrees, spokenValues, valueAt } from '@/components/studio/stack/read-out'
import { csvOfTraces, tableFrequencies, valueColumns } from '@/components/studio/stack/value-table'
import type { Trace } from '@/components/studio/view'
import { plainSpec, stackOf } from './stack-fixture'

const plain = (text: string) => text.replaceAll('\u2009', ' ')

describe('values under the crosshair', () => {
  it('lie between the samples, and are no number outside them', () => {
    const hz = Float64Array.of(10, 20, 40)
    const values = Float64Array.of(0, -10, -30)
    expect(valueAt(hz, values, 15)).toBe(-5)
    expect(valueAt(hz, values, 40)).toBe(-30)
    expect(valueAt(hz, values, 10)).toBe(0)
    expect(valueAt(hz, values, 41)).toBeNaN()
    expect(valueAt(hz, values, 9)).toBeNaN()
  })

  it('beside an exact zero are those of the nearer sample', () => {
    const hz = Float64Array.of(10, 20)
    expect(valueAt(hz, Float64Array.of(-50, Number.NEGATIVE_INFINITY), 19)).toBe(Number.NEGATIVE_INFINITY)
    expect(valueAt(hz, Float64Array.of(-50, Number.NEGATIVE_INFINITY), 11)).toBe(-50)
  })

  it('agree with the closed form of a Butterworth low-pass', () => {
    // |H|² = 1 / (1 + (f/fc)^2N): any textbook on analog filters.
    const { traces, view } = stackOf(plainSpec)
    const analog = traces[0]
    if (!analog) throw new Error('no analog trace')
    for (const hz of [20, 119, 200, 555]) {
      const expected = -10 * Math.log10(1 + (hz / 120) ** 8)
      expect(Math.abs(plottedValue(analog, 'magnitude', hz, view) - expected)).toBeLessThan(0.002)
    }
  })

  it('are written with their unit, a true minus sign, and a dash where there is none', () => {
    expect(plain(formatPlotted(-17.824, 'magnitude', 'db'))).toBe('−17.82 dB')
    expect(plain(formatPlotted(0.00347, 'group-delay', 'db'))).toBe('3.47 ms')
    expect(plain(formatPlotted(-12.34, 'departure', 'microseconds'))).toBe('−12.3 µs')
    expect(formatPlotted(Number.NaN, 'phase', 'db')).toBe('—')
    expect(plain(formatPlotted(Number.NEGATIVE_INFINITY, 'magnitude', 'db'))).toBe('−∞ dB')
  })

  it('fold their phase when the plot does', () => {
    expect(shownDegrees(-270, true)).toBe(-270)
    expect(shownDegrees(-270, false)).toBe(90)
    expect(shownDegrees(190, false)).toBe(-170)
  })

  it('are said in one sentence, departure included', () => {
    const { traces, view, spec } = stackOf(plainSpec)
    const said = plain(spokenValues(traces, 200, spec.sampleRateHz, view))
    expect(said).toMatch(/^At 200 Hz, 0\.333 of the sampling rate: analog −17\.82 dB/)
    expect(said).toMatch(/bilinear −30\.19 dB, .*, delay .*, departs −/)
    expect(plain(spokenValues(traces, 450, spec.sampleRateHz, view))).toContain('bilinear ends before')
  })
})

describe('the table', () => {
  it('spreads its rows over the axis and names every unit', () => {
    const { traces, view, frame } = stackOf(plainSpec)
    const rows = tableFrequencies(frame)
    expect(rows).toHaveLength(30)
    expect(rows[0]).toBeCloseTo(view.fromHz, 6)
    expect(rows.at(-1)).toBeCloseTo(view.toHz, 6)
    const columns = valueColumns(traces, view)
    expect(columns).toHaveLength(3 + 4 * (traces.length - 1))
    for (const { heading } of columns) expect(heading).toMatch(/, (dB|°|ms|µs)$/)
  })
})

describe('the CSV file', () => {
  const { traces } = stackOf(plainSpec)
  const lines = csvOfTraces(traces).trimEnd().split('\r\n')

  it('has one line a computed point, in plain numbers', () => {
    expect(lines[0]).toBe(
      'trace,frequency_hz,magnitude_db,phase_deg,group_delay_s,departure_db,departure_deg,departure_us',
    )
    expect(lines).toHaveLength(1 + traces.reduce((sum, trace) => sum + trace.frequenciesHz.length, 0))
    for (const line of lines.slice(1)) expect(line).toMatch(/^[a-z-]+(,(-?\d[\d.e+-]*|-Infinity)?){7}$/)
    expect(csvOfTraces(traces)).not.toContain('−')
  })

  it('leaves the analog departure empty and writes an exact zero as -Infinity', () => {
    expect(lines[1]).toMatch(/^analog,.*,,,$/)
    const one = (value: number) => Float64Array.of(value)
    const zero: Trace = {
      id: 'bilinear',
      label: 'bilinear',
      frequenciesHz: one(300),
      magnitudeDb: one(Number.NEGATIVE_INFINITY),
      phaseRadians: one(Math.PI),
      groupDelaySeconds: one(1e-3),
      departure: { db: one(Number.NEGATIVE_INFINITY), degrees: one(-5.2), microseconds: one(1) },
      stated: true,
      image: null,
    }
    expect(csvOfTraces([zero]).split('\r\n')[1]).toBe('bilinear,300,-Infinity,180,0.001,-Infinity,-5.2,1')
  })
})
