import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { versionsOf } from '../helpers/versions-of'
import { stepCurve } from '@/components/studio/panels/time/step-curve'
import { timeFigures } from '@/components/studio/panels/time/time-figures'
import {
  analogCurve,
  digitalSamples,
  timeCurves,
  valuesAt,
  valueSpan,
} from '@/components/studio/panels/time/time-curves'
import { timeFrame, timeScene, valueUnit } from '@/components/studio/panels/time/time-picture'
import { timeRows } from '@/components/studio/panels/time/time-table'
import { panned, showing, usualSpan, zoomed } from '@/components/studio/panels/time/time-view'
import {
  designAnalog,
  discretize,
  impulseResponse,
  stepFigures,
  type AnalogSpec,
  type FamilyDesign,
  type Filter,
} from '@/dsp'
import { defaultSpec } from '@/lib/designs/edits'

/** ω²/(s² + 2ζω·s + ω²) */
function secondOrder(hertz: number, damping: number): Filter<'s'> {
  const omega = 2 * Math.PI * hertz
  const re = -damping * omega
  const im = omega * Math.sqrt(1 - damping * damping)
  return {
    domain: 's',
    zeros: [],
    poles: [
      { re, im },
      { re, im: -im },
    ],
    gain: omega * omega,
  }
}

const firstOrder = (seconds: number): Filter<'s'> => ({
  domain: 's',
  zeros: [],
  poles: [{ re: -1 / seconds, im: 0 }],
  gain: 1 / seconds,
})

const close = (value: number | null, wanted: number, relative: number) =>
  expect(Math.abs((value ?? Number.NaN) / wanted - 1)).toBeLessThan(relative)

describe('figures of an analog step response', () => {
  it('overshoots and peaks as the closed form of second order says', () => {
    // Overshoot exp(−πζ/√(1−ζ²)) at π/(ω√(1−ζ²)): K. Ogata, Modern Control Engineering, 5th ed., §5.3.
    fc.assert(
      fc.property(
        fc.double({ min: 0.05, max: 0.85, noNaN: true }),
        fc.double({ min: 0.01, max: 1e5, noNaN: true }),
        (damping, hertz) => {
          const figures = timeFigures(stepCurve(secondOrder(hertz, damping)), 0.02)
          const damped = Math.sqrt(1 - damping * damping)
          close(figures.overshoot, Math.exp((-Math.PI * damping) / damped), 1e-7)
          // A peak is flat: its place is only known to the root of the rounding.
          close(figures.peakSeconds, 1 / (2 * hertz * damped), 1e-4)
        },
      ),
      { numRuns: 40 },
    )
  })

  it('settles when the closed form enters its band for good', () => {
    for (const damping of [0.1, 0.3, 0.5, 0.7071, 0.9]) {
      const omega = 2 * Math.PI * 50
      const damped = Math.sqrt(1 - damping * damping)
      const response = (t: number) =>
        1 - (Math.exp(-damping * omega * t) / damped) * Math.sin(omega * damped * t + Math.acos(damping))
      for (const tolerance of [0.01, 0.02, 0.05]) {
        const settled = timeFigures(stepCurve(secondOrder(50, damping)), tolerance).settlingSeconds ?? Number.NaN
        expect(Math.abs(Math.abs(response(settled) - 1) / tolerance - 1)).toBeLessThan(1e-6)
        const after = Array.from({ length: 4000 }, (_, k) => Math.abs(response(settled + k * 1e-5) - 1))
        expect(Math.max(...after)).toBeLessThan(tolerance * (1 + 1e-6))
      }
    }
  })

  it('rises and settles as an exponential of first order', () => {
    const figures = timeFigures(stepCurve(firstOrder(0.0123)), 0.01)
    close(figures.riseSeconds, 0.0123 * Math.log(9), 1e-9)
    close(figures.settlingSeconds, 0.0123 * Math.log(100), 1e-9)
    expect(figures.overshoot).toBe(0)
    expect(figures.peakSeconds).toBeNull()
    expect(figures.finalValue).toBeCloseTo(1, 12)
  })

  it('measures against the largest swing where the response returns to zero', () => {
    const spec: AnalogSpec = { family: 'butterworth', response: 'highpass', order: 1, edgesHz: [10] }
    const figures = timeFigures(stepCurve(designAnalog(spec)), 0.02)
    expect(figures.returnsToZero).toBe(true)
    expect(figures.overshoot).toBeNull()
    expect(figures.riseSeconds).toBeNull()
    // exp(−ω·t) from 1 down to 2 %.
    close(figures.settlingSeconds, Math.log(50) / (2 * Math.PI * 10), 1e-9)
  })

  it('does the same where a stop band’s floor is all that is left', () => {
    const spec: AnalogSpec = {
      family: 'elliptic',
      response: 'bandpass',
      order: 6,
      edgesHz: [80, 120],
      rippleDb: 0.5,
      attenuationDb: 60,
    }
    const figures = timeFigures(stepCurve(designAnalog(spec)), 0.02)
    expect(figures.finalValue).toBeCloseTo(1e-3, 6)
    expect(figures.returnsToZero).toBe(true)
    expect(figures.overshoot).toBeNull()
    expect(figures.settlingSeconds).toBeGreaterThan(0.05)
  })

  it('follows a narrow band-pass until it has died away, without missing a swing', () => {
    const spec: AnalogSpec = { family: 'butterworth', response: 'bandpass', order: 1, edgesHz: [99.5, 100.5] }
    const figures = timeFigures(stepCurve(designAnalog(spec)), 0.02)
    // The envelope of the resonator decays by exp(−π·B·t) with B = 1 Hz; a swing of 10 ms is the most the band's crossing is off by.
    expect(figures.settlingSeconds).toBeGreaterThan(Math.log(50) / Math.PI - 0.02)
    expect(figures.settlingSeconds).toBeLessThan(Math.log(50) / Math.PI + 0.01)
  })
})

describe('figures beside those of dsp, which are found another way', () => {
  const specs: readonly AnalogSpec[] = [
    { family: 'bessel', response: 'lowpass', order: 8, edgesHz: [5] },
    { family: 'elliptic', response: 'lowpass', order: 7, edgesHz: [100], rippleDb: 0.1, attenuationDb: 80 },
    { family: 'chebyshev1', response: 'bandstop', order: 3, edgesHz: [40, 60], rippleDb: 0.5 },
    { family: 'butterworth', response: 'highpass', order: 4, edgesHz: [20] },
  ]
  it.each(specs)('agree for $family $response', (spec) => {
    for (const filter of [designAnalog(spec), discretize(spec, 1200, { method: 'bilinear', hold: 'edges' })]) {
      const theirs = stepFigures(filter)
      const curve = stepCurve(filter)
      for (const [tolerance, settled] of [
        [0.01, theirs.settlingSeconds.within1],
        [0.02, theirs.settlingSeconds.within2],
        [0.05, theirs.settlingSeconds.within5],
      ] as const) {
        close(timeFigures(curve, tolerance).settlingSeconds, settled, 1e-6)
      }
      expect(Math.abs((timeFigures(curve, 0.01).overshoot ?? 0) - theirs.overshoot)).toBeLessThan(1e-6)
    }
  })
})

describe('figures of a digital step response', () => {
  const spec: AnalogSpec = { family: 'butterworth', response: 'lowpass', order: 2, edgesHz: [120] }

  it('are those of the analog one, sample by sample, for the step-invariant version', () => {
    const analog = timeFigures(stepCurve(designAnalog(spec)), 0.02)
    const rate = 1.2e6
    const digital = timeFigures(stepCurve(discretize(spec, rate, { method: 'step-invariant' })), 0.02)
    close(digital.overshoot, analog.overshoot ?? 0, 1e-5)
    close(digital.riseSeconds, analog.riseSeconds ?? 0, 1e-5)
    const late = (digital.settlingSeconds ?? 0) - (analog.settlingSeconds ?? 0)
    expect(late).toBeGreaterThanOrEqual(-1e-9)
    expect(late).toBeLessThanOrEqual(1 / rate + 1e-9)
  })

  it('settle on a sample from which all stay inside', () => {
    const filter = discretize(spec, 1200, { method: 'bilinear', hold: 'edges' })
    const curve = stepCurve(filter)
    const { settlingSeconds } = timeFigures(curve, 0.05)
    const n = Math.round((settlingSeconds ?? 0) * 1200)
    expect(n / 1200).toBeCloseTo(settlingSeconds ?? 0, 12)
    expect(Math.abs((curve.values[n - 1] ?? 0) - 1)).toBeGreaterThan(0.05)
    for (const value of curve.values.subarray(n)) expect(Math.abs(value - 1)).toBeLessThanOrEqual(0.05)
  })
})

describe('curves over time', () => {
  const spec: FamilyDesign = { ...defaultSpec, how: { method: 'impulse-invariant' } }
  const versions = versionsOf(spec)

  it('scales impulse responses so that samples fall onto the analog curve', () => {
    const filter = versions.digital.find(({ id }) => id === 'impulse-invariant')?.filter
    if (!filter) throw new Error('impulse-invariant version missing')
    const samples = digitalSamples(filter, 'impulse-invariant', true, 'impulse', [0, 0.02])
    const analog = impulseResponse(versions.analog, { count: samples.values.length, sampleRateHz: 1200 })
    const peak = Math.max(...analog.values)
    samples.values.forEach((value, n) => expect(Math.abs(value - (analog.values[n] ?? 0))).toBeLessThan(1e-9 * peak))
  })

  it('starts at the sample before the view and ends after it', () => {
    const filter = versions.digital[0]?.filter
    if (!filter) throw new Error('no version')
    const samples = digitalSamples(filter, 'bilinear', false, 'step', [0.01, 0.02])
    expect(samples.first).toBe(11)
    expect(samples.first + samples.values.length - 1).toBeGreaterThanOrEqual(24)
  })

  it('is zero before t = 0 and jumps upright there', () => {
    const highpass = designAnalog({ family: 'butterworth', response: 'highpass', order: 1, edgesHz: [10] })
    const { timesSeconds, values } = analogCurve(highpass, 'step', [-0.01, 0.05])
    expect([...timesSeconds.slice(0, 3)]).toEqual([-0.01, 0, 0])
    expect([...values.slice(0, 2)]).toEqual([0, 0])
    expect(values[2]).toBeCloseTo(1, 12)
  })

  it('knows the area of an impulse that passes straight through and doesn’t let its sample flatten the rest', () => {
    const highpass: FamilyDesign = {
      ...defaultSpec,
      analog: { family: 'butterworth', response: 'highpass', order: 2, edgesHz: [20] },
    }
    const curves = timeCurves(versionsOf(highpass), [], 'impulse', [0, 0.1])
    expect(curves.analog?.impulseArea).toBeCloseTo(1, 12)
    const stated = curves.digital.find((version) => version.stated)
    const [, most] = valueSpan(curves)
    expect(most).toBeLessThan(0.5 * (stated?.values[0] ?? 0))
  })

  it('reads every version at the same instant', () => {
    const curves = timeCurves(versions, ['matched-z'], 'step', [0, 0.02])
    const values = valuesAt(versions, curves, 'step', 7, 1200)
    expect([...values.keys()]).toEqual(['analog', 'bilinear', 'impulse-invariant', 'step-invariant', 'fitted'])
    expect(Math.abs((values.get('step-invariant') ?? 0) - (values.get('analog') ?? 1))).toBeLessThan(1e-10)
    const rows = timeRows(versions, curves, 'step', [-0.001, 0.01], 1200, 1)
    expect(rows[0]?.[0]).toBe('0')
    expect(rows).toHaveLength(13)
    for (const row of rows) expect(row).toHaveLength(2 + values.size)
  })

  it('draws the stated version as stems or held steps while its samples stand apart, and as a curve when they don’t', () => {
    const plan = (kind: 'impulse' | 'step', to: number) => {
      const curves = timeCurves(versions, ['bilinear', 'matched-z', 'step-invariant', 'fitted'], kind, [0, to])
      const scene = timeScene(kind, curves, timeFrame(900, [0, to], curves))
      const inside = scene.marks.find((mark) => mark.kind === 'clip')
      const marks = inside?.kind === 'clip' ? inside.marks : []
      const path = marks.filter((mark) => mark.kind === 'path').at(-1)
      return {
        samples: curves.digital[0]?.values.length ?? 0,
        points: path?.kind === 'path' ? [...path.points] : [],
        markers: marks.filter(({ kind }) => kind === 'marker').length,
      }
    }
    const stems = plan('impulse', 0.02)
    expect(stems.points).toHaveLength(6 * stems.samples)
    expect(stems.markers).toBe(stems.samples)
    const held = plan('step', 0.02)
    expect(held.points).toHaveLength(4 * held.samples)
    for (let k = 0; k < held.points.length; k += 4) expect(held.points[k + 1]).toBe(held.points[k + 3])
    const curve = plan('step', 0.8)
    expect(curve.markers).toBeLessThan(curve.samples / 4)
  })

  it('writes densities in a unit that keeps the numbers short', () => {
    const fast = versionsOf({ ...spec, sampleRateHz: 120_000, analog: { ...spec.analog, edgesHz: [12_000] } })
    expect(valueUnit('impulse', timeCurves(versions, [], 'impulse', [0, 0.02])).symbol).toBe('1/s')
    expect(valueUnit('impulse', timeCurves(fast, [], 'impulse', [0, 0.0002])).symbol).toBe('1/ms')
    expect(valueUnit('step', timeCurves(versions, [], 'step', [0, 0.02])).symbol).toBe('')
  })
})

describe('the part of time that is shown', () => {
  const usual = usualSpan([timeFigures(stepCurve(secondOrder(120, 0.7)), 0.02)], 1200)

  it('reaches past the settling, whatever the rate', () => {
    const settled = timeFigures(stepCurve(secondOrder(120, 0.7)), 0.02).settlingSeconds ?? 0
    expect(usual[1]).toBeGreaterThan(settled)
    expect(usual[0]).toBeLessThan(0)
    expect(usualSpan([], 1200)[1]).toBeGreaterThan(8 / 1200)
  })

  it('zooms around a time and stops at its limits', () => {
    const [from, to] = zoomed(usual, 0.5, usual[1] / 2, usual, 1200)
    expect(to - from).toBeCloseTo((usual[1] - usual[0]) / 2, 12)
    let span = usual
    for (let k = 0; k < 60; k++) span = zoomed(span, 1.5, 0, usual, 1200)
    expect(span[0]).toBeGreaterThanOrEqual(usual[0])
    expect(span[1]).toBeLessThanOrEqual(usual[1] * 20 * (1 + 1e-9))
    for (let k = 0; k < 60; k++) span = zoomed(span, 1 / 1.5, 0, usual, 1200)
    expect(span[1] - span[0]).toBeGreaterThan(0)
  })

  it('pans no further than its limits and follows the crosshair', () => {
    expect(panned(usual, 1, usual, 1200)[0]).toBeCloseTo(usual[0], 12)
    expect(showing([0, 1], 1.5)).toEqual([0.5, 1.5])
    expect(showing([1, 2], 0.5)).toEqual([0.5, 1.5])
    expect(showing([0, 1], 0.5)).toEqual([0, 1])
  })
})
