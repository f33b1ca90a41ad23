import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { DesignError } from '@/dsp'
import { differenceEquation, typesetEquation } from '@/lib/exports/equation'
import { asciiJson, asciiLine, cComment, cString, csvText, octaveString, pythonString } from '@/lib/exports/escape'
import { checkIdentifier, defaultIdentifier, identifierFrom } from '@/lib/exports/names'
import { cLiteral, decimalText, hexFloatText, negated, withPoint } from '@/lib/exports/numbers'
import { exportOptionsFrom, exportQuery, type ExportOptions } from '@/lib/exports/options'

const anyDouble = fc.double({ noNaN: true, noDefaultInfinity: true })
const anySingle = fc.float({ noNaN: true, noDefaultInfinity: true })
const anyText = fc.oneof(
  fc.string({ unit: 'binary' }),
  fc.string({
    unit: fc.constantFrom('*', '/', '\\', '?', "'", '"', '\n', '\r', ' ', '%', '#', '{', '}', '=', ';', ','),
  }),
)

/** C99 6.4.4.2 hexadecimal floating constant, read by its definition. */
function readHexFloat(text: string): number {
  const match = /^(-?)0x([01])(?:\.([0-9a-f]+))?p([+-]\d+)$/.exec(text)
  if (!match) throw new Error(`${text} is no hexadecimal constant`)
  const [, sign, lead = '0', digits = '', exponent = '0'] = match
  let value = Number(lead)
  for (let k = 0; k < digits.length; k++) value += Number.parseInt(digits.charAt(k), 16) / 16 ** (k + 1)
  // In two steps, since 2^-1074 alone can't scale a value up and a subnormal one must not be rounded twice.
  const power = Number(exponent)
  const scaled = power < -1000 ? value * 2 ** (power + 100) * 2 ** -100 : value * 2 ** power
  return sign === '-' ? -scaled : scaled
}

describe('numbers as text', () => {
  it('reads back to the same double', () => {
    fc.assert(fc.property(anyDouble, (value) => Object.is(Number(decimalText(value, 'double')), value + 0)))
  })

  it('reads back to the same single, by way of a double and directly', () => {
    fc.assert(
      fc.property(anySingle, (value) => {
        const text = decimalText(value, 'float')
        expect(Math.fround(Number(text))).toBe(value + 0)
        // Not within a hair of the boundary between two singles, so that one rounding and two agree.
        for (const nudge of [1 - 2 ** -52, 1 + 2 ** -52]) expect(Math.fround(Number(text) * nudge)).toBe(value + 0)
        expect(
          text
            .replace(/e.*/, '')
            .replace(/[-.]/g, '')
            .replace(/^0+|0+$/g, '').length,
        ).toBeLessThanOrEqual(9)
      }),
    )
  })

  it('writes singles as short as they can be', () => {
    expect(decimalText(Math.fround(0.1), 'float')).toBe('0.1')
    expect(decimalText(Math.fround(16777216), 'float')).toBe('16777216')
    expect(decimalText(Math.fround(1 / 3), 'float')).toBe('0.33333334')
  })

  it('writes hexadecimal constants that read back to the same double', () => {
    fc.assert(fc.property(anyDouble, (value) => readHexFloat(hexFloatText(value)) === value))
    expect(hexFloatText(1)).toBe('0x1p+0')
    expect(hexFloatText(-0.15625)).toBe('-0x1.4p-3')
    expect(hexFloatText(5e-324)).toBe('0x0.0000000000001p-1022')
  })

  it('has no minus zero', () => {
    expect(decimalText(-0, 'double')).toBe('0')
    expect(hexFloatText(-0)).toBe('0x0p+0')
    expect(Object.is(negated(0), 0)).toBe(true)
    expect(negated(-5.2)).toBe(5.2)
  })

  it('never makes an integer constant where a floating one is meant', () => {
    expect(cLiteral(1, 'double', 'decimal')).toBe('1.0')
    expect(cLiteral(-2, 'float', 'decimal')).toBe('-2.0f')
    expect(cLiteral(1e-7, 'float', 'decimal')).toMatch(/^1e-7f$/)
    expect(withPoint('1e+21')).toBe('1e+21')
  })

  it('refuses what is no number', () => {
    for (const value of [Number.NaN, Number.POSITIVE_INFINITY]) {
      expect(() => decimalText(value, 'double')).toThrow(RangeError)
      expect(() => hexFloatText(value)).toThrow(RangeError)
    }
  })
})

describe('user text', () => {
  it('can’t end a C comment, open another, splice a line or make a trigraph', () => {
    fc.assert(
      fc.property(anyText, (text) => {
        const comment = cComment(text)
        expect(comment).not.toMatch(/\*\/|\/\*|\?\?|\\/)
        expect(comment).toMatch(/^[\x20-\x7e]*$/)
      }),
      { numRuns: 500 },
    )
    expect(cComment('*/ #include "x.h"')).toBe('* / #include "x.h"')
    expect(cComment('a ??/\nb')).toBe('a ? ?/ b')
    expect(cComment('*\\\n/')).toBe('*<U+005C> /')
    expect(cComment('*\uff0f')).toBe('* /')
  })

  it('can’t end a C string', () => {
    fc.assert(
      fc.property(anyText, (text) => {
        const inside = cString(text).slice(1, -1)
        expect(inside.replace(/\\["\\?]/g, '')).not.toMatch(/["\\?]/)
        expect(inside).toMatch(/^[\x20-\x7e]*$/)
      }),
    )
  })

  it('stays one line of ASCII in a script’s comment, direction overrides included', () => {
    fc.assert(fc.property(anyText, (text) => /^[\x20-\x7e]*$/.test(asciiLine(text))))
    expect(asciiLine('Brücke −3 dB, 50 µs')).toBe('Brucke -3 dB, 50 us')
    expect(asciiLine('a\u202Eb\u2028c')).toBe('a<U+202E>b c')
    expect(asciiLine('床板')).toBe('<U+5E8A><U+677F>')
  })

  it('is kept exactly in a Python string', () => {
    // Python's escapes as its reference lists them (2.4.1), for what is written here.
    const read = (literal: string) =>
      literal
        .slice(1, -1)
        .replace(/\\(?:U([0-9a-f]{8})|u([0-9a-f]{4})|(["\\]))/g, (_, wide?: string, code?: string, mark?: string) =>
          mark === undefined ? String.fromCodePoint(Number.parseInt(wide ?? code ?? '0', 16)) : mark,
        )
    fc.assert(
      fc.property(anyText, (text) => {
        const literal = pythonString(text)
        expect(literal).toMatch(/^"(?:[^"\\]|\\["\\]|\\u[0-9a-f]{4}|\\U[0-9a-f]{8})*"$/)
        expect(read(literal)).toBe(text)
      }),
    )
  })

  it('can’t end an Octave string', () => {
    fc.assert(
      fc.property(anyText, (text) => {
        const literal = octaveString(text)
        expect(literal).toMatch(/^'(?:[^'\n\r]|'')*'$/)
      }),
    )
    expect(octaveString("it's 100% \n done")).toBe("'it''s 100% done'")
  })

  it('starts no formula in a CSV cell', () => {
    expect(csvText('=HYPERLINK("http://example.org")')).toBe(`"'=HYPERLINK(""http://example.org"")"`)
    expect(csvText('+1')).toBe("'+1")
    expect(csvText('-5.2')).toBe("'-5.2")
    expect(csvText('@SUM(A1)')).toBe("'@SUM(A1)")
    // A quotation mark between the separator and the sign hides nothing.
    expect(csvText('x;"=1+2;z')).toContain(`;""'=1+2`)
    expect(csvText('a;=1+1')).toBe(`"a;'=1+1"`)
    expect(csvText('\t=1')).toBe("'=1")
    expect(csvText('Deck, logger')).toBe('"Deck, logger"')
    fc.assert(
      fc.property(anyText, (text) => {
        const cell = csvText(text)
        expect(cell).not.toMatch(/^"?\s*[=+\-@]/)
        expect(cell).not.toMatch(/[\r\n\t]/)
      }),
    )
  })

  it('is the same data in JSON of ASCII', () => {
    fc.assert(
      fc.property(anyText, (text) => {
        const written = asciiJson({ text })
        expect(written).toMatch(/^[\x20-\x7e\n]*$/)
        expect(JSON.parse(written)).toEqual({ text: JSON.parse(JSON.stringify(text)) as string })
      }),
    )
  })
})

describe('names', () => {
  it('makes identifiers of anything', () => {
    fc.assert(
      fc.property(anyText, (text) => {
        const name = identifierFrom(text)
        expect(() => checkIdentifier(name)).not.toThrow()
      }),
      { numRuns: 500 },
    )
    expect(identifierFrom('HMF-LP-012')).toBe('hmf_lp_012')
    expect(identifierFrom('3rd filter')).toBe('filter_3rd_filter')
    expect(identifierFrom('Brücke #1')).toBe('brucke_1')
    expect(identifierFrom('床板')).toBe('filter')
    expect(defaultIdentifier('HMF-LP-012', 3)).toBe('hmf_lp_012_v3')
    expect(defaultIdentifier('X'.repeat(80), 12)).toHaveLength(40)
  })

  it('refuses a name that is none, with the nearest that is one', () => {
    for (const [name, nearest] of [
      ['3rd', 'filter_3rd'],
      ['a b', 'a_b'],
      ['_hidden', 'hidden'],
      ['a__b', 'a_b'],
      ['', 'filter'],
    ] as const) {
      const refusal = catchDesignError(() => checkIdentifier(name))
      expect(refusal).toMatchObject({ field: 'name', nearest })
    }
  })
})

describe('options in the address', () => {
  it('come back as they went', () => {
    const options = fc.record({
      format: fc.constantFrom('json', 'csv', 'c', 'numpy', 'octave'),
      structure: fc.constantFrom('sections', 'ratio'),
      number: fc.constantFrom('double', 'float'),
      feedback: fc.constantFrom('subtract', 'add'),
      literals: fc.constant('decimal'),
    }) satisfies fc.Arbitrary<ExportOptions>
    fc.assert(
      fc.property(options, (chosen) => {
        expect(exportOptionsFrom(new URLSearchParams(exportQuery(chosen)))).toEqual(chosen)
      }),
    )
    const taps: ExportOptions = {
      format: 'csv',
      structure: 'taps',
      number: 'float',
      feedback: 'subtract',
      literals: 'decimal',
    }
    expect(exportQuery(taps)).not.toContain('feedback')
    expect(exportOptionsFrom(new URLSearchParams(exportQuery(taps)))).toEqual(taps)
    // A query that names no structure asks for the usual one of the version.
    expect(exportOptionsFrom(new URLSearchParams('format=c'))).toMatchObject({ structure: 'sections' })
    expect(exportOptionsFrom(new URLSearchParams('format=c'), 'taps')).toMatchObject({ structure: 'taps' })
    expect(exportOptionsFrom(new URLSearchParams('format=c&structure=ratio'), 'taps').structure).toBe('ratio')
    const named: ExportOptions = {
      format: 'c',
      structure: 'ratio',
      number: 'float',
      feedback: 'add',
      literals: 'hexadecimal',
      name: 'deck_z',
    }
    expect(exportOptionsFrom(new URLSearchParams(exportQuery(named)))).toEqual(named)
  })

  it('refuse what is unknown, doubled, missing or out of its list', () => {
    const refused = (query: string) => catchDesignError(() => exportOptionsFrom(new URLSearchParams(query)))
    expect(refused('format=xml')).toMatchObject({ code: 'option-out-of-list', field: 'format', nearest: 'json' })
    expect(refused('')).toMatchObject({ code: 'option-out-of-list', field: 'format' })
    expect(refused('format=c&sign=add')).toMatchObject({ code: 'option-unknown', field: 'sign' })
    expect(refused('format=c&__proto__=1')).toMatchObject({ code: 'option-unknown' })
    expect(refused('format=c&format=json')).toMatchObject({ code: 'option-twice', field: 'format' })
    expect(refused('format=c&structure=taps&feedback=add')).toMatchObject({ code: 'no-feedback', field: 'feedback' })
    expect(refused('format=c&number=q15')).toMatchObject({ code: 'option-out-of-list', field: 'number' })
    expect(refused('format=c&name=9')).toMatchObject({ code: 'name-not-an-identifier', nearest: 'filter_9' })
  })
})

describe('difference equations', () => {
  it('say whether feedback is subtracted or added', () => {
    expect(differenceEquation('sections', 'subtract', 8)).toBe(
      'y[n] = b0*x[n] + b1*x[n-1] + b2*x[n-2] - a1*y[n-1] - a2*y[n-2]',
    )
    expect(differenceEquation('ratio', 'add', 1)).toBe('y[n] = b0*x[n] + b1*x[n-1] + a1*y[n-1]')
    expect(differenceEquation('ratio', 'subtract', 8)).toBe(
      'y[n] = b0*x[n] + b1*x[n-1] + ... + b8*x[n-8] - a1*y[n-1] - a2*y[n-2] - ... - a8*y[n-8]',
    )
    expect(differenceEquation('taps', 'subtract', 40)).toBe('y[n] = h0*x[n] + h1*x[n-1] + ... + h40*x[n-40]')
    expect(typesetEquation('taps', 'add', 2)).toBe('y[n] = h₀·x[n] + h₁·x[n−1] + h₂·x[n−2]')
    expect(typesetEquation('sections', 'add', 4)).toBe('y[n] = b₀·x[n] + b₁·x[n−1] + b₂·x[n−2] + a₁·y[n−1] + a₂·y[n−2]')
    expect(typesetEquation('ratio', 'subtract', 12)).toContain('… − a₁₂·y[n−12]')
  })
})

function catchDesignError(run: () => unknown): DesignError {
  try {
    run()
  } catch (error) {
    if (error instanceof DesignError) return error
    throw error
  }
  throw new Error('Nothing was refused.')
}
