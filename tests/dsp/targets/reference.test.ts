import { describe, expect, it } from 'vitest'
import {
  departure,
  departureFrom,
  designAnalog,
  designOwn,
  discretize,
  frequencyResponse,
  groupDelay,
  magnitudeDb,
  phaseResponse,
  referenceDelay,
  referenceMagnitudeDb,
  referencePhase,
  referenceResponse,
  residual,
  type AnalogSpec,
  type Reference,
} from '@/dsp'
import { cubicAt, monotoneCubic } from '@/dsp/numeric/monotone-cubic'
import { measuredTable } from '@/dsp/targets/measured'
import { spaced } from '../../helpers/dsp'

const RATE = 1000
const SPEC: AnalogSpec = { family: 'butterworth', response: 'lowpass', order: 4, edgesHz: [100] }
const analog = designAnalog(SPEC)
const digital = discretize(SPEC, RATE, { method: 'matched-z' })
const ANALOG: Reference = { kind: 'analog', filter: analog }

/** The analog filter as a fine table, phases wrapped, with a turn of 360° added as instruments do. */
function fineTable(from: number, to: number, count: number) {
  const hz = Array.from({ length: count }, (_, k) => from * (to / from) ** (k / (count - 1)))
  const db = magnitudeDb(analog, hz)
  const { re, im } = frequencyResponse(analog, hz)
  return measuredTable({
    rows: hz.map((f, k) => [f, db[k]!, 360 + (Math.atan2(im[k]!, re[k]!) * 180) / Math.PI] as const),
  })
}
const MEASURED: Reference = { kind: 'measured', table: fineTable(5, 400, 400) }

const IDEAL: Extract<Reference, { kind: 'ideal' }> = {
  kind: 'ideal',
  bands: [
    { fromHz: 0, toHz: 100, gain: 1 },
    { fromHz: 150, toHz: 500, gain: 0 },
  ],
  isDifferentiator: false,
  delaySeconds: 0.01,
  sampleRateHz: RATE,
}

describe('an analog reference', () => {
  const net = spaced(0, 480, 25)

  it('is the filter itself', () => {
    expect(referenceResponse(ANALOG, net)).toEqual(frequencyResponse(analog, net))
    expect(referenceMagnitudeDb(ANALOG, net)).toEqual(magnitudeDb(analog, net))
    expect(referencePhase(ANALOG, net)).toEqual(phaseResponse(analog, net))
    expect(referenceDelay(ANALOG, net)).toEqual(groupDelay(analog, net))
  })

  it('departs exactly as departure says', () => {
    const options = { removeDelayOver: [0, 100] as const }
    expect(departureFrom(ANALOG, digital, net, options)).toEqual(departure(analog, digital, net, options))
  })
})

describe('a measured reference', () => {
  it('follows the response between its rows and says nothing outside', () => {
    const net = spaced(6, 390, 60)
    const [re, im] = [referenceResponse(MEASURED, net), frequencyResponse(analog, net)]
    net.forEach((_, k) => expect(Math.hypot(re.re[k]! - im.re[k]!, re.im[k]! - im.im[k]!)).toBeLessThan(2e-5))
    const delays = referenceDelay(MEASURED, net)
    groupDelay(analog, net).forEach((value, k) => expect(Math.abs(delays[k]! - value)).toBeLessThan(3e-5))
    for (const values of [referenceMagnitudeDb, referencePhase, referenceDelay]) {
      expect([...values(MEASURED, [4.9, 5, 400, 400.1])].map(Number.isNaN)).toEqual([true, false, false, true])
    }
  })

  it('compares as the filter it was measured of, whatever turn its phase stands on', () => {
    const net = spaced(10, 300, 30)
    const from = departureFrom(MEASURED, digital, net)
    const exact = departure(analog, digital, net)
    net.forEach((_, k) => {
      expect(Math.abs(from.db[k]! - exact.db[k]!)).toBeLessThan(1e-3)
      expect(Math.abs(from.degrees[k]! - exact.degrees[k]!)).toBeLessThan(1e-2)
    })
    expect(departureFrom(MEASURED, digital, [2, 450]).db).toEqual(Float64Array.of(Number.NaN, Number.NaN))
    const delayed = departureFrom(MEASURED, digital, net, { removeDelayOver: [5, 200] })
    expect(delayed.delaySeconds).toBeCloseTo(
      departure(analog, digital, net, { removeDelayOver: [5, 200] }).delaySeconds,
      5,
    )
  })

  it('leaves nothing of a filter that it was fitted to, and something of another', () => {
    const hz = Array.from({ length: 90 }, (_, k) => 2 + 5 * k)
    const [db, phase] = [magnitudeDb(digital, hz), phaseResponse(digital, hz)]
    const rows = hz.map((f, k) => [f, db[k]!, (phase[k]! * 180) / Math.PI] as const)
    const own = { given: 'measured' as const, name: 'rig', rows }
    const found = designOwn(own, RATE, { method: 'fitted', upToHz: 447, order: 4 })
    const left = residual(found.reference, found.digital, 2, 447)
    // Between rows 5 Hz apart the table is a curve through them, no more.
    expect(left.rms).toBeLessThan(1e-3)
    const other = residual(found.reference, discretize(SPEC, RATE, { method: 'bilinear', hold: 'edges' }), 2, 300)
    expect(other.worst).toBeGreaterThan(0.05)
    expect(other.atHz.worst).toBeGreaterThan(50)
    expect(other.points).toBeGreaterThan(300)
  })

  it('says so when there is nothing to compare', () => {
    expect(residual(MEASURED, digital, 420, 480)).toMatchObject({ points: 0, rms: 0, worst: 0, db: 0, degrees: 0 })
    expect(() => residual(MEASURED, digital, 100, 600)).toThrow(/half the rate/)
  })
})

describe('an ideal reference', () => {
  it('is its bands and its delay, and silent between them', () => {
    const { re, im } = referenceResponse(IDEAL, [25, 120, 300])
    expect([re[0]!, im[0]!]).toEqual([expect.closeTo(0, 12), expect.closeTo(-1, 12)])
    expect(Number.isNaN(re[1]!)).toBe(true)
    expect([...referenceMagnitudeDb(IDEAL, [25, 300])]).toEqual([0, -Infinity])
    expect(referenceDelay(IDEAL, [25, 120])).toEqual(Float64Array.of(0.01, Number.NaN))
  })

  it('judges no level where nothing is to pass, but the complex error', () => {
    const off = departureFrom(IDEAL, digital, [50, 300])
    expect(off.db[0]!).toBeCloseTo(magnitudeDb(digital, [50])[0]!, 12)
    expect(Number.isNaN(off.db[1]!)).toBe(true)
    const left = residual(IDEAL, digital, 150, 500)
    expect(left.db).toBe(0)
  })

  it('a differentiator turns by a quarter and rises with frequency', () => {
    const reference: Reference = { ...IDEAL, isDifferentiator: true, bands: [{ fromHz: 0, toHz: 400, gain: 2 }] }
    const level = referenceMagnitudeDb(reference, [10])[0]!
    expect(level).toBeCloseTo(20 * Math.log10(2 * 2 * Math.PI * 10), 12)
    expect(referencePhase(reference, [10])[0]!).toBeCloseTo(Math.PI / 2 - 2 * Math.PI * 10 * 0.01, 12)
  })

  it('states no phase of a minimum-phase filter', () => {
    const reference: Reference = { ...IDEAL, delaySeconds: 0 }
    expect(Number.isNaN(referencePhase(reference, [50])[0]!)).toBe(true)
    expect(departureFrom(reference, digital, [10]).db[0]!).toBeCloseTo(0, 1)
    expect(Number.isNaN(departureFrom(reference, digital, [50]).degrees[0]!)).toBe(true)
  })
})

describe('the curve through points', () => {
  const x = Float64Array.of(0, 1, 2, 3, 5, 8)
  const y = Float64Array.of(0, 0, 1, 4, 4, 3)
  const curve = monotoneCubic(x, y)

  it('meets every point, stays between neighbours, and ends where they end', () => {
    x.forEach((at, k) => expect(cubicAt(curve, at)!.value).toBeCloseTo(y[k]!, 13))
    for (let at = 0; at <= 8; at += 0.05) {
      const k = Math.min(
        x.findLastIndex((value) => value <= at),
        4,
      )
      const { value } = cubicAt(curve, at)!
      expect(value).toBeGreaterThanOrEqual(Math.min(y[k]!, y[k + 1]!) - 1e-12)
      expect(value).toBeLessThanOrEqual(Math.max(y[k]!, y[k + 1]!) + 1e-12)
    }
    expect(cubicAt(curve, -0.1)).toBeNull()
    expect(cubicAt(curve, 8.1)).toBeNull()
  })

  it('its slope is the derivative, and a straight line stays one', () => {
    for (const at of [0.3, 1.5, 2.2, 4, 7]) {
      const [before, after] = [cubicAt(curve, at - 1e-6)!.value, cubicAt(curve, at + 1e-6)!.value]
      expect(cubicAt(curve, at)!.slope).toBeCloseTo((after - before) / 2e-6, 6)
    }
    const line = monotoneCubic(
      x,
      x.map((value) => 3 - 2 * value),
    )
    expect(cubicAt(line, 6.3)).toEqual({ value: expect.closeTo(-9.6, 12), slope: expect.closeTo(-2, 12) })
  })
})
