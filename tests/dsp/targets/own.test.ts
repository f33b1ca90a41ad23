import { describe, expect, it } from 'vitest'
import {
  designAnalog,
  designOwn,
  DesignError,
  discretize,
  fittedAdvantage,
  frequencyResponse,
  magnitudeDb,
  phaseResponse,
  toTransferFunction,
  type AnalogSpec,
  type Complex,
  type DigitalFilter,
  type Method,
  type OwnTarget,
} from '@/dsp'
import { filterOfPolynomials } from '@/dsp/targets/polynomials'
import { spaced } from '../../helpers/dsp'

const RATE = 1000
const name = 'own'
type Roots = Extract<OwnTarget, { given: 'roots' }>
type Measured = Extract<OwnTarget, { given: 'measured' }>

const SPECS: readonly AnalogSpec[] = [
  { family: 'butterworth', response: 'lowpass', order: 4, edgesHz: [100] },
  { family: 'butterworth', response: 'lowpass', order: 5, edgesHz: [100] },
  { family: 'elliptic', response: 'lowpass', order: 5, edgesHz: [80], rippleDb: 0.5, attenuationDb: 50 },
  { family: 'chebyshev1', response: 'highpass', order: 4, edgesHz: [50], rippleDb: 1 },
  { family: 'butterworth', response: 'bandpass', order: 2, edgesHz: [40, 90] },
]

const rootsOf = (spec: AnalogSpec): Roots => {
  const { zeros, poles, gain } = designAnalog(spec)
  return { given: 'roots', name, zeros, poles, gain }
}

function worstApart(a: DigitalFilter, b: DigitalFilter): number {
  const net = spaced(1, 480, 120)
  const [left, right] = [frequencyResponse(a, net), frequencyResponse(b, net)]
  return Math.max(...net.map((_, k) => Math.hypot(left.re[k]! - right.re[k]!, left.im[k]! - right.im[k]!)))
}

const refusal = (work: () => unknown): DesignError => {
  try {
    work()
  } catch (error) {
    if (error instanceof DesignError) return error
    throw error
  }
  throw new Error('It was not refused.')
}

const METHODS: readonly Method[] = [
  { method: 'bilinear', hold: 'none' },
  { method: 'bilinear', hold: 70 },
  { method: 'matched-z' },
  { method: 'step-invariant' },
  { method: 'impulse-invariant' },
  { method: 'impulse-invariant', halfFirstSample: true },
]

describe('roots', () => {
  it.each(SPECS.flatMap((spec) => METHODS.map((how) => ({ spec, how, title: `${spec.response} ${how.method}` }))))(
    'of a known family give its own digital version: $title',
    ({ spec, how }) => {
      if (spec.response === 'highpass' && how.method === 'impulse-invariant') {
        expect(refusal(() => designOwn(rootsOf(spec), RATE, how))).toMatchObject({
          code: 'not-strictly-proper',
          field: 'how.method',
          nearest: 'bilinear',
        })
        return
      }
      const { digital, analog, reference } = designOwn(rootsOf(spec), RATE, how)
      // The gain of a band is matched at its peak, which is flat: its place is known to half the digits.
      const places = spec.response === 'bandpass' && how.method === 'matched-z' ? 1e-5 : 1e-9
      expect(worstApart(digital, discretize(spec, RATE, how))).toBeLessThan(places)
      expect(reference).toEqual({ kind: 'analog', filter: analog })
    },
  )

  it.each(SPECS)('fitted: $family $response, nowhere near worse than the family’s', (spec) => {
    const how: Method = { method: 'fitted', upToHz: 350 }
    const { digital } = designOwn(rootsOf(spec), RATE, how)
    expect(worstApart(digital, discretize(spec, RATE, how))).toBeLessThan(0.05)
    const { best } = fittedAdvantage({
      format: 1,
      own: rootsOf(spec),
      sampleRateHz: RATE,
      how,
      budget: { magnitudeDb: 0.1, phaseDegrees: 1, removeDelay: false },
    })
    expect(best.error).toBe('fitted')
  })

  it('makes pairs exact that agree to 1e-9', () => {
    const poles: Complex[] = [
      { re: -100, im: 300.0000001 },
      { re: -100.00000001, im: -300 },
      { re: -50, im: 1e-12 },
    ]
    const { analog } = designOwn({ given: 'roots', name, zeros: [], poles, gain: 1e7 }, RATE, METHODS[0]!)
    expect(analog!.poles[0]!.re).toBe(analog!.poles[1]!.re)
    expect(analog!.poles[0]!.im).toBe(-analog!.poles[1]!.im)
    expect(analog!.poles[2]!.im).toBe(0)
  })

  const PAIR = [
    { re: -100, im: 300 },
    { re: -100, im: -300 },
  ]
  const given = (change: Partial<Roots>): Roots => ({
    given: 'roots',
    name,
    zeros: [],
    poles: PAIR,
    gain: 1e5,
    ...change,
  })

  it.each([
    ['unpaired-root', 'own.poles.0.im', given({ poles: [{ re: -100, im: 300 }] })],
    ['unpaired-root', 'own.poles.0.im', given({ poles: [PAIR[0]!, { re: -100, im: -300.001 }] })],
    [
      'unpaired-root',
      'own.zeros.1.im',
      given({
        zeros: [
          { re: 0, im: 0 },
          { re: 0, im: 50 },
        ],
      }),
    ],
    [
      'unstable-pole',
      'own.poles.0.re',
      given({
        poles: [
          { re: 20, im: 300 },
          { re: 20, im: -300 },
        ],
      }),
    ],
    ['unstable-pole', 'own.poles.0.re', given({ poles: [{ re: 0, im: 0 }] })],
    ['pole-out-of-range', 'own.poles.0.re', given({ poles: [{ re: -1e11, im: 0 }] })],
    [
      'improper',
      'own.zeros',
      given({
        zeros: [
          { re: 0, im: 0 },
          { re: -1, im: 0 },
          { re: -2, im: 0 },
        ],
      }),
    ],
    ['gain-out-of-range', 'own.gain', given({ gain: 0 })],
    ['no-poles', 'own.poles', given({ poles: [] })],
    ['not-finite', 'own.poles.0', given({ poles: [{ re: Number.NaN, im: 0 }] })],
  ])('%s at %s', (code, field, own) => {
    const error = refusal(() => designOwn(own, RATE, METHODS[0]!))
    expect(error).toMatchObject({ code, field })
    expect(error.nearest).toBeDefined()
  })

  it('names the root that has no partner', () => {
    expect(refusal(() => designOwn(given({ poles: [{ re: -100, im: 300 }] }), RATE, METHODS[0]!)).message).toContain(
      '−100 + 300j',
    )
  })

  it.each([
    ['no-edges', 'how.hold', { method: 'bilinear', hold: 'edges' }],
    ['hold-out-of-range', 'how.hold', { method: 'bilinear', hold: 500 }],
    ['fit-out-of-range', 'how.upToHz', { method: 'fitted', upToHz: 600 }],
    ['order-out-of-range', 'how.order', { method: 'fitted', upToHz: 300, order: 0 }],
  ] as [string, string, Method][])('refuses %s at %s', (code, field, how) => {
    const error = refusal(() => designOwn(given({}), RATE, how))
    expect(error).toMatchObject({ code, field })
    expect(error.nearest).toBeDefined()
  })

  it('refuses a rate under which nothing of it is left', () => {
    const highpass = rootsOf({ family: 'butterworth', response: 'highpass', order: 2, edgesHz: [900] })
    const error = refusal(() => designOwn(highpass, RATE, METHODS[0]!))
    expect(error).toMatchObject({ code: 'passes-above-half-rate', field: 'sampleRateHz' })
    expect(() => designOwn(highpass, Number(error.nearest), METHODS[0]!)).not.toThrow()
  })
})

describe('polynomials', () => {
  it.each(SPECS)('agree with the roots of $family $response', (spec) => {
    const { b, a } = toTransferFunction(designAnalog(spec))
    const own: OwnTarget = { given: 'polynomials', name, numerator: [...b], denominator: [...a] }
    const { digital } = designOwn(own, RATE, METHODS[0]!)
    expect(worstApart(digital, designOwn(rootsOf(spec), RATE, METHODS[0]!).digital)).toBeLessThan(1e-9)
  })

  it('a second-order resonance worked by hand: s² + 20s + 10100 has roots −10 ± 100j', () => {
    const { filter } = filterOfPolynomials({ numerator: [0, 0, 20200], denominator: [2, 40, 20200] })
    expect(filter.poles).toEqual([
      { re: expect.closeTo(-10, 12) as number, im: expect.closeTo(100, 11) as number },
      { re: expect.closeTo(-10, 12) as number, im: expect.closeTo(-100, 11) as number },
    ])
    expect(filter.zeros).toEqual([])
    expect(filter.gain).toBe(10100)
  })

  it('says when digits are lost on the way to the roots', () => {
    const flat = filterOfPolynomials({ numerator: [1], denominator: [1, 20, 10100] })
    expect(flat.diagnostics).toEqual([])
    const repeated = filterOfPolynomials({ numerator: [1], denominator: [1, 4, 6, 4, 1] })
    expect(repeated.diagnostics[0]).toMatchObject({ code: 'polynomials-ill-conditioned', severity: 'caution' })
    // The response is still good, though each of the four roots isn't.
    const { re, im } = frequencyResponse(repeated.filter, [1 / (2 * Math.PI)])
    expect(Math.hypot(re[0]!, im[0]!)).toBeCloseTo(0.25, 9)
  })

  it.each([
    ['no-poles', 'own.denominator', [1], [0, 5]],
    ['no-numerator', 'own.numerator', [0, 0], [1, 5]],
    ['improper', 'own.numerator', [1, 0, 0], [1, 5]],
    ['unstable-pole', 'own.denominator', [1], [1, -2, 100]],
    ['order-out-of-range', 'own.denominator', [1], Array.from({ length: 26 }, () => 1)],
    ['not-finite', 'own.denominator.1', [1], [1, Number.NaN]],
  ])('refuses %s at %s', (code, field, numerator, denominator) => {
    const error = refusal(() => filterOfPolynomials({ numerator, denominator }))
    expect(error).toMatchObject({ code, field })
    expect(error.nearest).toBeDefined()
  })
})

/** A digital filter's own response, as a table with wrapped phases. */
function tableOf(filter: DigitalFilter, frequencies: readonly number[]): Measured {
  const db = magnitudeDb(filter, frequencies)
  const phase = phaseResponse(filter, frequencies)
  return {
    given: 'measured',
    name,
    rows: frequencies.map((hz, k) => {
      const degrees = (phase[k]! * 180) / Math.PI
      return [hz, db[k]!, degrees - 360 * Math.round(degrees / 360)] as const
    }),
  }
}

const SWEEP = Array.from({ length: 110 }, (_, k) => 2 * 1.05 ** k).filter((hz) => hz < 420)

describe('measured responses', () => {
  it.each(SPECS.flatMap((spec) => (['bilinear', 'matched-z'] as const).map((method) => ({ spec, method }))))(
    'a digital filter is found again from its own response: $spec.family $spec.response by $method',
    ({ spec, method }) => {
      const truth = discretize(spec, RATE, method === 'bilinear' ? { method, hold: 'edges' } : { method })
      const own = tableOf(truth, SWEEP)
      const how: Method = { method: 'fitted', upToHz: 420, order: truth.poles.length }
      const { digital, analog, reference } = designOwn(own, RATE, how)
      expect(analog).toBeNull()
      expect(reference.kind).toBe('measured')
      expect(worstApart(digital, truth)).toBeLessThan(1e-6)
      for (const pole of truth.poles) {
        const apart = digital.poles.map(({ re, im }) => Math.hypot(re - pole.re, im - pole.im))
        expect(Math.min(...apart)).toBeLessThan(1e-5)
      }
    },
  )

  it('an analog table with noise is fitted by a stable filter', () => {
    const rows = SWEEP.map((hz, k) => {
      const { re, im } = frequencyResponse(designAnalog(SPECS[0]!), [hz])
      const ripple = 0.05 * Math.sin(17 * k) // a rough reading, the same each time
      return [
        hz,
        20 * Math.log10(Math.hypot(re[0]!, im[0]!)) + ripple,
        (Math.atan2(im[0]!, re[0]!) * 180) / Math.PI,
      ] as const
    })
    for (const order of [1, 3, 6, 12]) {
      const { digital } = designOwn({ given: 'measured', name, rows }, RATE, { method: 'fitted', upToHz: 400, order })
      expect(digital.poles.length).toBe(order)
      for (const pole of digital.poles) expect(Math.hypot(pole.re, pole.im)).toBeLessThan(1)
    }
  })

  const table = tableOf(discretize(SPECS[0]!, RATE, { method: 'matched-z' }), SWEEP)
  const withRow = (at: number, row: readonly [number, number, number]): Measured => ({
    ...table,
    rows: table.rows.map((old, k) => (k === at ? row : old)),
  })
  const FIT: Method = { method: 'fitted', upToHz: 400, order: 4 }

  it.each([
    ['measured-is-fitted', 'how.method', table, { method: 'bilinear', hold: 'none' }],
    ['measured-is-fitted', 'how.method', table, { method: 'matched-z' }],
    ['order-missing', 'how.order', table, { method: 'fitted', upToHz: 400 }],
    ['fit-out-of-range', 'how.upToHz', table, { ...FIT, upToHz: 500 }],
    ['fit-below-pass-band', 'how.upToHz', table, { ...FIT, upToHz: 1 }],
    ['too-few-rows', 'how.upToHz', table, { ...FIT, upToHz: 2.3 }],
    ['too-few-rows', 'own.rows', { ...table, rows: table.rows.slice(0, 3) }, FIT],
    ['not-rising', 'own.rows.5.0', withRow(5, [2, 0, 0]), FIT],
    ['not-finite', 'own.rows.6.1', withRow(6, [table.rows[6]![0], Number.NaN, 0]), FIT],
    ['level-out-of-range', 'own.rows.6.1', withRow(6, [table.rows[6]![0], -3000, 0]), FIT],
  ] as [string, string, Measured, Method][])('refuses %s at %s', (code, field, own, how) => {
    const error = refusal(() => designOwn(own, RATE, how))
    expect(error).toMatchObject({ code, field })
    expect(error.nearest).toBeDefined()
    if (field.startsWith('how.') && typeof error.nearest === 'number') {
      const key = field.slice('how.'.length)
      expect(() => designOwn(own, RATE, { ...how, [key]: error.nearest } as Method)).not.toThrow()
    }
  })

  it('has no rivals', () => {
    const spec = {
      format: 1 as const,
      own: table,
      sampleRateHz: RATE,
      how: FIT,
      budget: { magnitudeDb: 1, phaseDegrees: 1, removeDelay: false },
    }
    expect(refusal(() => fittedAdvantage(spec)).code).toBe('no-rivals')
  })
})
