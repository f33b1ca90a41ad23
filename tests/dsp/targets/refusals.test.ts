import { describe, expect, it } from 'vitest'
import { designFromSpec, DesignError, designSpecSchema, type DesignSpec, type Method, type OwnTarget } from '@/dsp'
import { ownTargetSchema } from '@/dsp/spec'

const BILINEAR: Method = { method: 'bilinear', hold: 'none' }
const FITTED: Method = { method: 'fitted', upToHz: 400, order: 2 }

const specOf = (own: OwnTarget, how: Method): DesignSpec => ({
  format: 1,
  own,
  sampleRateHz: 1000,
  how,
  budget: { magnitudeDb: 0.1, phaseDegrees: 1, removeDelay: false },
})

function refusal(spec: DesignSpec): DesignError {
  try {
    designFromSpec(designSpecSchema.parse(spec))
  } catch (error) {
    if (error instanceof DesignError) return error
    throw error
  }
  throw new Error('It was not refused.')
}

const polynomials = (numerator: number[], denominator: number[]): OwnTarget => ({
  given: 'polynomials',
  name: 'own',
  numerator,
  denominator,
})
const measured = (rows: (readonly [number, number, number])[]): OwnTarget => ({ given: 'measured', name: 'own', rows })
const gained = (gain: number): OwnTarget => ({
  given: 'roots',
  name: 'own',
  zeros: [],
  poles: [{ re: -100, im: 0 }],
  gain,
})

describe('numbers at the ends of double precision', () => {
  it.each([
    ['coefficients-too-unlike', 'own.denominator', polynomials([1], [1e308, 1, 1e-308]), BILINEAR],
    ['coefficients-too-unlike', 'own.denominator', polynomials([1], [1e-308, 1, 1e308]), BILINEAR],
    ['coefficients-too-unlike', 'own.numerator', polynomials([1e-200, 1e200], [1, 100]), BILINEAR],
    ['gain-out-of-range', 'own.numerator', polynomials([5e-324], [1, 100]), BILINEAR],
    ['gain-out-of-range', 'own.gain', gained(5e-324), BILINEAR],
    ['gain-out-of-range', 'own.gain', gained(-1e308), BILINEAR],
    [
      'level-out-of-range',
      'own.rows.0.1',
      measured([
        [0, -2000, 0],
        [1, 2000, 1e308],
        [2, -2000, -1e308],
        [3, 2000, 0],
        [400, 0, 0],
      ]),
      FITTED,
    ],
    [
      'phase-out-of-range',
      'own.rows.1.2',
      measured([
        [0, 0, 0],
        [1, 0, 1e308],
        [2, 0, -1e308],
        [400, 0, 0],
      ]),
      FITTED,
    ],
  ] as [string, string, OwnTarget, Method][])('are refused as %s at %s', (code, field, own, how) => {
    const error = refusal(specOf(own, how))
    expect(error).toMatchObject({ name: 'DesignError', code, field })
    expect(error.message).toMatch(/\.$/)
  })

  it('names a gain factor and a phase that work', () => {
    const { nearest } = refusal(specOf(gained(5e-324), BILINEAR))
    expect(nearest).toBe(1e-300)
    expect(() => designFromSpec(specOf(gained(-1), BILINEAR))).not.toThrow()
  })

  it('says a throw that no check foresaw as a refusal, with its cause', () => {
    const hostile = specOf(gained(1), BILINEAR)
    const broken = { ...hostile, own: { ...gained(1), zeros: null } } as unknown as DesignSpec
    try {
      designFromSpec(broken)
      expect.unreachable()
    } catch (error) {
      expect(error).toMatchObject({ code: 'not-computable', field: 'own' })
      expect((error as DesignError).cause).toBeInstanceOf(TypeError)
    }
  })
})

describe('the name of an own target', () => {
  it.each(['a\u0000b', 'a\ud800b', '\u202eabc', 'ab\u2066c', 'line\nbreak', '   ', ''])('%j is refused', (name) => {
    expect(ownTargetSchema.safeParse({ ...gained(1), name }).success).toBe(false)
  })
  it.each(['Übertragungsglied 3', '传感器', 'a', ' spaced ', '📈 pair'])('%j is taken', (name) => {
    expect(ownTargetSchema.safeParse({ ...gained(1), name }).success).toBe(true)
  })
})
