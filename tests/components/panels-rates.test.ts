import { describe, expect, it } from 'vitest'
import { answerWords, keptOf } from '@/components/studio/panels/rates/answer-words'
import { statedRate } from '@/components/studio/panels/rates/stated-rate'
import { interpolated, joined, levelSpan, limitIn, withLimit } from '@/components/studio/panels/rates/curves'
import {
  askLowest,
  askSweep,
  drawnSpan,
  reasonAgainst,
  searchSpan,
  subjectOf,
  sweepRates,
  usualUpTo,
  type LowestQuestion,
  type LowestRate,
  type RateCurve,
} from '@/components/studio/panels/rates/questions'
import { levelTicks, ratesFrame, ratesScene, rateTicks } from '@/components/studio/panels/rates/rates-picture'
import { ratesService } from '@/components/studio/panels/rates/rates-service'
import { logScale } from '@/components/plot/scale'
import {
  designAnalog,
  discretize,
  lowestRate,
  worstDeparture,
  type AnalogSpec,
  type DepartureBudget,
  type DesignSpec,
} from '@/dsp'
import { defaultSpec, withResponse } from '@/lib/designs/edits'

const budget: DepartureBudget = { magnitudeDb: 0.1, phaseDegrees: 1, removeDelay: false }
const subject = subjectOf(defaultSpec, 120)
const question: LowestQuestion = { ...subject, budget, searchHz: searchSpan(subject) }
const analog = designAnalog(defaultSpec.analog)

const curve = (values: number[], ratesHz = [100, 1000, 10_000]): RateCurve => ({
  id: 'bilinear',
  ratesHz: Float64Array.from(ratesHz),
  db: Float64Array.from(values),
  degrees: Float64Array.from(values),
  microseconds: Float64Array.from(values),
})

describe('the sweep over rates', () => {
  it('holds what every single rate gives, with and without the best delay', () => {
    for (const removeDelay of [false, true]) {
      const ratesHz = Float64Array.of(300, 600, 1200, 4800)
      const curves = askSweep({ ...subject, removeDelay, ratesHz })
      expect(curves.map(({ id }) => id)).toEqual([
        'bilinear',
        'impulse-invariant',
        'matched-z',
        'step-invariant',
        'fitted',
      ])
      for (const [index, how] of subject.methods.entries()) {
        ratesHz.forEach((rate, k) => {
          const worst = worstDeparture(analog, discretize(defaultSpec.analog, rate, how), 120, { removeDelay })
          const found = curves[index]
          for (const unit of ['db', 'degrees', 'microseconds'] as const) {
            const value = found?.[unit][k] ?? Number.NaN
            // A sweep judges on one grid for all rates, a single departure on one of its own: the fitted delays differ in the third digit.
            expect(Math.abs(value - worst[unit])).toBeLessThan(1e-2 * worst[unit] + 1e-9)
          }
        })
      }
    }
  })

  it('has a gap where a method refuses, at every rate or at some', () => {
    const highpass = subjectOf(withResponse(defaultSpec, 'highpass'), 120)
    const curves = askSweep({ ...highpass, removeDelay: false, ratesHz: Float64Array.of(600, 1200) })
    const refused = curves.find(({ id }) => id === 'impulse-invariant')
    expect([...(refused?.degrees ?? [])].every(Number.isNaN)).toBe(true)
    const [first] = askSweep({ ...subject, removeDelay: false, ratesHz: Float64Array.of(200, 1200) })
    expect(first?.db[0]).toBeNaN()
    expect(first?.db[1]).toBeGreaterThan(0)
  })
})

describe('the lowest rate', () => {
  it('is that of dsp, rounded up to one that would be stated', () => {
    for (const how of question.methods) {
      const found = lowestRate({ analog: question.analog, how, upToHz: 120, budget, searchHz: question.searchHz })
      const answer = askLowest(question, how)
      expect(answer.id).toBe(how.method)
      if ('refused' in found) expect('refused' in answer && answer.refused.length > 20).toBe(true)
      else {
        const rate = 'sampleRateHz' in answer ? answer.sampleRateHz : Number.NaN
        expect(rate).toBeGreaterThanOrEqual(found.sampleRateHz)
        expect(rate / found.sampleRateHz).toBeLessThan(1.001)
      }
    }
  })

  it('keeps the budget, and just below it the budget is broken', () => {
    const kept = keptOf(question.methods.map((how) => askLowest(question, how)))
    expect(kept.length).toBeGreaterThanOrEqual(2)
    for (const { id, sampleRateHz } of kept) {
      const how = question.methods.find(({ method }) => method === id)
      if (!how) throw new Error(`no method ${id}`)
      const worst = (rate: number) => worstDeparture(analog, discretize(defaultSpec.analog, rate, how), 120)
      const at = worst(sampleRateHz)
      expect(at.db).toBeLessThanOrEqual(budget.magnitudeDb * (1 + 1e-6))
      expect(at.degrees).toBeLessThanOrEqual(budget.phaseDegrees * (1 + 1e-6))
      // A fit is made anew at each rate and may fall on either side of its budget just below.
      if (id === 'fitted') continue
      const below = worst(sampleRateHz * 0.99)
      expect(below.db > budget.magnitudeDb || below.degrees > budget.phaseDegrees).toBe(true)
    }
  })

  it('gives the reason where there is none', () => {
    const spec = withResponse(defaultSpec, 'highpass')
    const highpass = subjectOf(spec, 120)
    const answer = askLowest({ ...highpass, budget, searchHz: searchSpan(highpass) }, { method: 'impulse-invariant' })
    // The method's own words, without the highest rate before them.
    expect('refused' in answer ? answer.refused : '').toMatch(/^Sampling the impulse response/)
    // And the budget's where the method itself would work.
    const strict = { magnitudeDb: 1e-9, phaseDegrees: 1e-9, removeDelay: false }
    const broken = askLowest({ ...question, budget: strict }, { method: 'matched-z' })
    expect('refused' in broken ? broken.refused : '').toMatch(/off by/)
  })

  it('judges a high-pass over its pass band, wherever its edge is', () => {
    const highpass = withResponse(defaultSpec, 'highpass').analog
    expect(usualUpTo(defaultSpec.analog)).toBe(120)
    expect(usualUpTo(highpass)).toBe(480)
    // The edge of a Chebyshev II filter is where its stop band ends.
    const stopEdge: AnalogSpec = {
      family: 'chebyshev2',
      response: 'highpass',
      order: 2,
      edgesHz: [10],
      attenuationDb: 80,
    }
    expect(reasonAgainst(stopEdge, 10)).not.toBeNull()
    expect(reasonAgainst(stopEdge, usualUpTo(stopEdge))).toBeNull()
    expect(reasonAgainst(defaultSpec.analog, 120)).toBeNull()
  })

  it('is rounded up in the fourth digit and no further', () => {
    expect(statedRate(9613.27)).toBe(9614)
    expect(statedRate(2094.3)).toBe(2095)
    expect(statedRate(123456)).toBe(123500)
    expect(statedRate(9600)).toBe(9600)
    expect(statedRate(0.012341)).toBe(0.01235)
  })
})

describe('the service behind the panel', () => {
  it('ends an older question when a newer one of its kind comes in, and answers the newer', async () => {
    const service = ratesService()
    const ask = (ticket: number) =>
      service.sweep(ticket, { ...subject, removeDelay: false, ratesHz: sweepRates(drawnSpan(subject, 1200)) })
    const [older, newer] = await Promise.all([ask(1), ask(2)])
    expect(older).toBeNull()
    expect(newer?.[0]?.ratesHz).toHaveLength(121)
  })

  it('keeps kinds apart, and in pieces gives the same as at once', async () => {
    const service = ratesService()
    const sweepQuestion = { ...subject, removeDelay: false, ratesHz: sweepRates([300, 6000]).slice(0, 20) }
    const [sweep, lowest] = await Promise.all([service.sweep(1, sweepQuestion), service.lowest(1, question)])
    expect(sweep).toEqual(askSweep(sweepQuestion))
    expect(lowest).toEqual(question.methods.map((how) => askLowest(question, how)))
  })
})

describe('the rates that are looked at', () => {
  it('start above twice the highest frequency and hold the design’s rate', () => {
    for (const upToHz of [10, 120, 500]) {
      const [from, to] = drawnSpan({ ...subject, upToHz }, 40_000)
      expect(from).toBeGreaterThan(2 * Math.max(120, upToHz))
      expect(to).toBeGreaterThan(40_000)
      const [least, most] = searchSpan({ ...subject, upToHz })
      expect(least).toBeGreaterThan(2 * Math.max(120, upToHz))
      expect(most).toBeGreaterThan(least * 10)
    }
    const rates = sweepRates([300, 12_000])
    expect(rates[0]).toBe(300)
    expect(rates.at(-1)).toBeCloseTo(12_000, 6)
  })

  it('don’t shift while the rate is pulled inside an octave', () => {
    expect(drawnSpan(subject, 20_000)).toEqual(drawnSpan(subject, 22_000))
  })
})

describe('curves', () => {
  it('are straight between their points on logarithmic axes, and silent outside', () => {
    const line = curve([1, 0.1, 0.01])
    expect(interpolated(line, 'db', Math.sqrt(1e5))).toBeCloseTo(Math.sqrt(0.1), 12)
    expect(interpolated(line, 'db', 100)).toBe(1)
    expect(interpolated(line, 'db', 99)).toBeNaN()
    expect(interpolated(line, 'db', 10_001)).toBeNaN()
    expect(interpolated(curve([Number.NaN, 1, 0]), 'db', 300)).toBeNaN()
    expect(interpolated(curve([2, 1, 0]), 'db', Math.sqrt(1e7))).toBeCloseTo(0.5, 12)
  })

  it('are put together along the rates', () => {
    const [all] = joined([[curve([1, 2], [10, 20])], [curve([3], [30])]])
    expect([...(all?.ratesHz ?? [])]).toEqual([10, 20, 30])
    expect([...(all?.microseconds ?? [])]).toEqual([1, 2, 3])
    expect(joined([])).toEqual([])
  })

  it('turn a limit into each unit and back', () => {
    expect(limitIn('db', budget, 100)).toBe(0.1)
    expect(limitIn('degrees', budget, 100)).toBe(1)
    // One degree of 100 Hz is 10 ms / 360.
    expect(limitIn('microseconds', budget, 100)).toBeCloseTo(1e4 / 360, 10)
    for (const unit of ['db', 'degrees', 'microseconds'] as const) {
      expect(limitIn(unit, withLimit(budget, unit, 0.37, 100), 100)).toBeCloseTo(0.37, 12)
    }
    expect(withLimit(budget, 'db', 0.5, 100).phaseDegrees).toBe(1)
  })

  it('are shown over whole decades around the limit', () => {
    expect(levelSpan([], 'db', 0.1)).toEqual([0.01, 1])
    const [from, to] = levelSpan([curve([500, 3, 1e-9])], 'degrees', 1)
    expect(from).toBeCloseTo(1e-3, 12)
    expect(to).toBeCloseTo(1000, 9)
    expect(levelSpan([curve([Number.NaN, 0, 2])], 'degrees', 1)).toEqual([0.1, 10])
  })
})

describe('the picture', () => {
  it('labels rates by multiples of the edge, none too close to the next', () => {
    for (const width of [300, 700, 1300]) {
      const x = logScale([250, 12_000], [0, width])
      const ticks = rateTicks(x, 120, 50)
      expect(ticks.length).toBeGreaterThan(1)
      ticks.forEach(({ value, label }, index) => {
        expect(label).toMatch(/×$/)
        const before = ticks[index - 1]
        if (before) expect(x.toPixel(value) - x.toPixel(before.value)).toBeGreaterThan(40)
      })
    }
  })

  it('labels whole decades of departure with their unit', () => {
    const labels = levelTicks(logScale([0.01, 100], [200, 0]), '°').flatMap(({ label }) => label ?? [])
    expect(labels).toEqual(['0.01°', '0.1°', '1°', '10°', '100°'])
  })

  it('shows each curve in its own ink, fades an older answer and marks the rates that keep the budget', () => {
    const curves = askSweep({
      ...subject,
      removeDelay: false,
      ratesHz: sweepRates([260, 12_000]).filter((_, k) => k % 10 === 0),
    })
    const frame = ratesFrame(900, [260, 12_000], [0.01, 100])
    const plan = {
      curves,
      unit: 'degrees',
      edgeHz: 120,
      stated: 'bilinear',
      kept: [{ id: 'bilinear', sampleRateHz: 3000 }],
    } as const
    const inside = (faded: boolean) => {
      const clip = ratesScene({ ...plan, faded }, frame).marks.find((mark) => mark.kind === 'clip')
      return clip?.kind === 'clip' ? clip.marks : []
    }
    const paths = inside(false).flatMap((mark) => (mark.kind === 'path' ? [mark.stroke] : []))
    for (const ink of ['spruce', 'ochre', 'plum', 'slate'])
      expect(paths.some((stroke) => stroke.ink === ink)).toBe(true)
    const filled = inside(false).filter((mark) => mark.kind === 'marker' && mark.fill !== 'sheet')
    expect(filled).toHaveLength(1)
    expect(inside(true).filter((mark) => mark.kind === 'marker')).toHaveLength(0)
    expect(inside(true).some((mark) => mark.kind === 'path' && mark.stroke.opacity !== undefined)).toBe(true)
  })
})

describe('the answer in words', () => {
  const answers: readonly LowestRate[] = [
    { id: 'bilinear', sampleRateHz: 9600 },
    { id: 'impulse-invariant', sampleRateHz: 2100 },
    { id: 'matched-z', refused: 'none' },
  ]

  it('names the lowest first, then the others, then those that never keep it', () => {
    expect(answerWords(answers, budget, 100, 120)).toBe(
      'Impulse-invariant keeps 0.1\u2009dB and 1° up to 100\u2009Hz from 2.1\u2009kHz, 17.5× the edge; bilinear from 9.6\u2009kHz; matched-z at no rate tried.',
    )
  })

  it('says so when no method does', () => {
    const none: readonly LowestRate[] = [{ id: 'matched-z', refused: 'none' }]
    expect(answerWords(none, { ...budget, removeDelay: true }, 100, 120)).toMatch(
      /^No method keeps .*best delay removed/,
    )
  })
})

describe('a spec with options', () => {
  it('keeps the stated method as it is stated', () => {
    const spec: DesignSpec = { ...defaultSpec, how: { method: 'bilinear', hold: 'none' } }
    expect(subjectOf(spec, 100).methods[0]).toEqual({ method: 'bilinear', hold: 'none' })
    expect(subjectOf(defaultSpec, 100).methods).toHaveLength(5)
  })
})
