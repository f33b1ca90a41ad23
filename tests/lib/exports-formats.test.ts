import Papa from 'papaparse'
import { describe, expect, it, vi } from 'vitest'
import { z } from 'zod'
import { DesignError, type DesignSpec, type FamilyDesign, type Section } from '@/dsp'
import { canonicalText, checksumOfStored, isStoredTaps } from '@/lib/designs/coefficients'
import {
  coefficientSet,
  exportFile,
  ratioRefusal,
  structuresOf,
  usualStructure,
  writtenFile,
  type CoefficientSet,
  type ExportOptions,
} from '@/lib/exports'
import { coefficientSetJsonSchema, coefficientSetSchema } from '@/lib/exports/json'
import { filtersOf } from '@/lib/designs/coefficients'
import {
  everyKind,
  firDesign,
  firKinds,
  fittedLowPass,
  lowPass,
  ownKinds,
  ownMeasured,
  ownRoots,
  sourceOf,
} from '../helpers/export-sources'

// Hundreds of designs; on a busy machine that takes longer than a test usually may.
vi.setConfig({ testTimeout: 120_000 })

/*
 * Each file is read back by its own format's rules, and every number in it compared bit for bit with the version's own.
 */

const nasty = '=cmd|"/c calc"!A1; */ ??/ \\\n% # \' " {} \u202E 床'
const base: ExportOptions = {
  format: 'json',
  structure: 'sections',
  number: 'double',
  feedback: 'subtract',
  literals: 'decimal',
}

interface ReadBack {
  readonly sections?: readonly (readonly number[])[]
  readonly b?: readonly number[]
  readonly a?: readonly number[]
  readonly taps?: readonly number[]
  /** Taps have none. */
  readonly steadyState?: readonly unknown[]
  readonly input: readonly number[]
  readonly output: readonly number[]
}

const row = ({ b0, b1, b2, a1, a2 }: Section) => [b0, b1, b2, a1, a2]

const expected = ({ numbers, testVector }: CoefficientSet): ReadBack => ({
  ...(numbers.structure === 'taps'
    ? { taps: numbers.taps }
    : {
        ...(numbers.structure === 'sections'
          ? { sections: numbers.sections.map(row) }
          : { b: numbers.b, a: numbers.a }),
        steadyState: numbers.steadyState,
      }),
  input: testVector.input,
  output: testVector.output,
})

function readJson(text: string): ReadBack {
  const file = coefficientSetSchema.parse(JSON.parse(text))
  const { coefficients } = file
  return {
    ...(coefficients.structure === 'taps'
      ? { taps: coefficients.taps }
      : coefficients.structure === 'sections'
        ? { sections: coefficients.sections.map(row) }
        : { b: coefficients.b, a: coefficients.a }),
    ...(file.steadyState && { steadyState: file.steadyState }),
    input: file.testVector.input,
    output: file.testVector.output,
  }
}

function readCsv(text: string): ReadBack {
  const { data, errors } = Papa.parse<string[]>(text, { skipEmptyLines: true })
  expect(errors).toEqual([])
  expect(new Set(data.map((cells) => cells.length))).toEqual(new Set([4]))
  const of = (part: string, name?: string) =>
    data
      .filter((cells) => cells[0] === part && (name === undefined || cells[2] === name))
      .map((cells) => Number(cells[3]))
  const byFives = (values: readonly number[]) =>
    Array.from({ length: values.length / 5 }, (_, k) => values.slice(5 * k, 5 * k + 5))
  const steady = of('steady state')
  const isRatio = of('ratio').length > 0
  const taps = of('tap', 'h')
  if (taps.length > 0) return { taps, input: of('test input'), output: of('test output') }
  return {
    ...(isRatio ? { b: of('ratio', 'b'), a: of('ratio', 'a') } : { sections: byFives(of('section')) }),
    steadyState: isRatio ? steady : Array.from({ length: steady.length / 2 }, (_, k) => steady.slice(2 * k, 2 * k + 2)),
    input: of('test input'),
    output: of('test output'),
  }
}

/** A NumPy array literal is a nested list, whose notation is JSON's but for the last comma. */
function numpyArray(text: string, suffix: string, dtype: string): unknown {
  const match = new RegExp(`^[a-z0-9_]+_${suffix} = np\\.array\\((\\[[^=]*\\]), dtype=np\\.${dtype}\\)$`, 'm').exec(
    text,
  )
  return match?.[1] === undefined ? undefined : JSON.parse(match[1].replace(/,(\s*\])/g, '$1'))
}

/** An Octave matrix: three dots carry a row on, semicolons part rows, commas part values. */
function octaveArray(text: string, suffix: string, isSingle: boolean): number[][] | undefined {
  const [open, close] = isSingle ? ['single\\(', '\\)'] : ['', '']
  const match = new RegExp(`^[a-z0-9_]+_${suffix} = ${open}\\[([^\\]]*)\\]${close};$`, 'm').exec(text)
  if (match?.[1] === undefined) return undefined
  const joined = match[1].replace(/\.\.\.[^\n]*\n/g, ' ')
  expect(joined).not.toContain('\n')
  return joined.split(';').map((line) => line.split(',').map((value) => Number(z.string().trim().min(1).parse(value))))
}

const numberList = z.array(z.number())
const numberRows = z.array(numberList)

function readNumpy(text: string, number: ExportOptions['number']): ReadBack {
  const dtype = number === 'float' ? 'float32' : 'float64'
  const array = (suffix: string) => numpyArray(text, suffix, dtype)
  const isRatio = array('b') !== undefined
  const run = { input: numberList.parse(array('test_input')), output: numberList.parse(array('test_output')) }
  if (array('taps') !== undefined) return { taps: numberList.parse(array('taps')), ...run }
  return {
    ...(isRatio
      ? { b: numberList.parse(array('b')), a: numberList.parse(array('a')) }
      : { sections: numberRows.parse(array('sections')) }),
    steadyState: z.array(z.unknown()).parse(array('steady_state')),
    ...run,
  }
}

function readOctave(text: string, number: ExportOptions['number']): ReadBack {
  const matrix = (suffix: string) => octaveArray(text, suffix, number === 'float')
  const vector = (suffix: string) => {
    const rows = matrix(suffix) ?? []
    expect(rows.length).toBe(1)
    return rows[0] ?? []
  }
  const sections = matrix('sections')
  if (matrix('taps')) return { taps: vector('taps'), input: vector('test_input'), output: vector('test_output') }
  return {
    ...(sections ? { sections } : { b: vector('b'), a: vector('a') }),
    steadyState: sections ? (matrix('steady_state') ?? []) : vector('steady_state'),
    input: vector('test_input'),
    output: vector('test_output'),
  }
}

/** A C initialiser is a nested list in braces. */
function readC(text: string, { number, literals }: ExportOptions): ReadBack {
  const value = (literal: string) => {
    const bare = number === 'float' ? literal.replace(/f$/, '') : literal
    expect(bare).toMatch(literals === 'decimal' ? /^-?[\d.]+(?:e[+-]?\d+)?$/ : /^-?0x[\da-f.]+p[+-]\d+$/)
    return literals === 'decimal' ? Number(bare) : hexFloat(bare)
  }
  const array = (suffix: string): string | undefined =>
    new RegExp(`^static const (?:double|float) [a-z0-9_]+_${suffix}\\[[^=]*\\] = \\{\\n([^;]*)\\n\\};$`, 'm').exec(
      text,
    )?.[1]
  const vector = (suffix: string) => (array(suffix) ?? '').split(',').map((literal) => value(literal.trim()))
  const matrix = (suffix: string) =>
    [...(array(suffix) ?? '').matchAll(/\{([^}]*)\}/g)].map(([, cells = '']) => cells.split(', ').map(value))
  const isRatio = array('b') !== undefined
  if (array('taps') !== undefined)
    return { taps: vector('taps'), input: vector('test_input'), output: vector('test_output') }
  return {
    ...(isRatio ? { b: vector('b'), a: vector('a') } : { sections: matrix('sections') }),
    steadyState: isRatio ? vector('steady_state') : matrix('steady_state'),
    input: vector('test_input'),
    output: vector('test_output'),
  }
}

function hexFloat(text: string): number {
  const [, sign = '', lead = '', digits = '', exponent = ''] = /^(-?)0x([01])\.?([\da-f]*)p([+-]\d+)$/.exec(text) ?? []
  const value = Number.parseInt(lead + digits, 16) / 16 ** digits.length
  const scaled =
    Number(exponent) < -1000 ? value * 2 ** (Number(exponent) + 100) * 2 ** -100 : value * 2 ** Number(exponent)
  return sign === '-' ? -scaled : scaled
}

function readBack(text: string, options: ExportOptions): ReadBack {
  switch (options.format) {
    case 'json':
      return readJson(text)
    case 'csv':
      return readCsv(text)
    case 'numpy':
      return readNumpy(text, options.number)
    case 'octave':
      return readOctave(text, options.number)
    case 'c':
      return readC(text, options)
  }
}

const asType = (value: unknown, number: ExportOptions['number']): unknown => {
  if (Array.isArray(value)) return value.map((inner) => asType(inner, number))
  return typeof value === 'number' && number === 'float' ? Math.fround(value) : value
}

describe('every format', () => {
  it('reads back to the same numbers, whatever the title says', () => {
    let count = 0
    everyKind([1, 5]).forEach((spec, k) => {
      // Each design in one of eight combinations, in all five formats.
      const combination = {
        structure: k % 2 ? 'ratio' : 'sections',
        number: k % 4 > 1 ? 'float' : 'double',
        feedback: k % 8 > 3 ? 'add' : 'subtract',
        literals: k % 3 ? 'decimal' : 'hexadecimal',
      } as const
      const source = sourceOf(spec, { title: nasty, note: nasty })
      let set: CoefficientSet
      try {
        set = coefficientSet(source, { ...base, ...combination })
      } catch (error) {
        if (error instanceof DesignError) return
        throw error
      }
      for (const format of ['json', 'csv', 'c', 'numpy', 'octave'] as const) {
        const options: ExportOptions = { format, ...combination }
        count++
        // A single is written in the fewest digits that name it, so that it has to be read as a single.
        const read = readBack(writtenFile({ ...set, options }).text, options)
        const found = Object.fromEntries(
          Object.entries(read).map(([key, value]) => [key, asType(value, options.number)]),
        )
        expect(found, `${format} of ${set.statement}`).toEqual(expected(set))
      }
    })
    expect(count).toBeGreaterThan(700)
  })

  it('reads back for FIR filters, fitted versions and originals of one’s own', () => {
    const all: readonly DesignSpec[] = [...firKinds, ...ownKinds, fittedLowPass]
    all.forEach((spec, k) => {
      const source = sourceOf(spec, { title: nasty, note: nasty })
      const structure = usualStructure(source.kept)
      const literals = k % 2 ? ('decimal' as const) : ('hexadecimal' as const)
      for (const number of ['double', 'float'] as const) {
        const set = coefficientSet(source, { ...base, structure, number, literals })
        for (const format of ['json', 'csv', 'c', 'numpy', 'octave'] as const) {
          const options: ExportOptions = { ...base, format, structure, number, literals }
          const read = readBack(writtenFile({ ...set, options }).text, options)
          const found = Object.fromEntries(Object.entries(read).map(([key, value]) => [key, asType(value, number)]))
          expect(found, `${format} of ${set.statement}`).toEqual(expected(set))
        }
      }
    })
  })

  it('states of taps that there is no feedback, whatever sign is chosen, and takes no other name for it', () => {
    const source = sourceOf(firDesign())
    for (const format of ['json', 'csv', 'c', 'numpy', 'octave'] as const) {
      const options: ExportOptions = { ...base, format, structure: 'taps' }
      const { text, fileName } = exportFile(source, options)
      expect(exportFile(source, { ...options, feedback: 'add' })).toEqual({ ...exportFile(source, options), fileName })
      const plain = text.replace(/\n \*\s+/g, ' ')
      for (const stated of [
        'y[n] = h0*x[n] + h1*x[n-1] + ... + h40*x[n-40]',
        'direct form of 41 taps, the same from either end',
        source.version.checksum,
      ])
        expect(plain, format).toContain(stated)
      if (format === 'json') expect(JSON.parse(text)).toMatchObject({ feedback: null, steadyState: null })
      else {
        expect(plain).toContain('none: taps have no feedback')
        expect(plain).toContain('kept taps in double precision')
      }
      expect(plain).not.toMatch(/direct form II|denominator/)
    }
  })

  it('holds the kept sections themselves in double precision and with subtracted feedback', () => {
    const source = sourceOf(lowPass({ family: 'elliptic', rippleDb: 0.2, attenuationDb: 60, order: 7 }))
    for (const format of ['json', 'csv', 'c', 'numpy', 'octave'] as const) {
      const options = { ...base, format }
      expect(readBack(exportFile(source, options).text, options).sections).toEqual(source.kept.sections.map(row))
    }
  })

  it('negates the feedback terms, and nothing else, when they are to be added', () => {
    const source = sourceOf(lowPass())
    for (const structure of ['sections', 'ratio'] as const) {
      const read = (feedback: 'subtract' | 'add') => {
        const options: ExportOptions = { ...base, format: 'csv', structure, feedback }
        return readBack(exportFile(source, options).text, options)
      }
      const [subtracted, added] = [read('subtract'), read('add')]
      expect(added.b).toEqual(subtracted.b)
      expect(added.a).toEqual(subtracted.a?.map((value) => -value))
      expect(added.sections).toEqual(subtracted.sections?.map(([b0, b1, b2, a1 = 0, a2 = 0]) => [b0, b1, b2, -a1, -a2]))
      expect(added.output).toEqual(subtracted.output)
    }
  })

  it('is the same bytes at any hour, in any zone', () => {
    const source = sourceOf(lowPass())
    const files = () =>
      (['json', 'csv', 'c', 'numpy', 'octave'] as const).map((format) => exportFile(source, { ...base, format }).text)
    vi.useFakeTimers()
    try {
      vi.setSystemTime(new Date('2026-12-01T00:00:00Z'))
      const before = files()
      vi.setSystemTime(new Date('2031-07-09T12:34:56Z'))
      expect(files()).toEqual(before)
      for (const text of before) expect(text).not.toContain('2031-07')
    } finally {
      vi.useRealTimers()
    }
  })

  it('states what it is, in every format', () => {
    const source = sourceOf({ ...lowPass(), how: { method: 'bilinear', hold: 100 } })
    for (const format of ['json', 'csv', 'c', 'numpy', 'octave'] as const) {
      const { text, fileName } = exportFile(source, { ...base, format })
      for (const stated of [
        'HMF-LP-012',
        'Deck accelerometer, logger low-pass',
        '2026-12-01T09:42:00.000Z',
        'not reviewed',
        'held at 100',
        'y[n] = b0*x[n] + b1*x[n-1] + b2*x[n-2] - a1*y[n-1] - a2*y[n-2]',
        source.version.checksum,
        source.version.engineVersion,
        'direct form II transposed',
        'shared out over the sections',
        'A design aid; confirm on the target hardware.',
        'licensed practitioner',
      ])
        // Comments of C are broken into lines.
        expect(text.replace(/\n \*\s+/g, ' ').replace(/\\u2009/g, ' '), `${format}: ${stated}`).toContain(stated)
      expect(fileName).toMatch(/^hmf_lp_012_v3\.(json|csv|h|py|m)$/)
    }
  })
})

describe('JSON', () => {
  it('is of its documented schema, to the letter', () => {
    const text = exportFile(sourceOf(lowPass(), { title: nasty }), base).text
    const file: unknown = JSON.parse(text)
    expect(coefficientSetSchema.parse(file)).toEqual(file)
    expect(coefficientSetSchema.safeParse({ ...z.record(z.string(), z.unknown()).parse(file), more: 1 }).success).toBe(
      false,
    )
    for (const spec of [firDesign(), ownMeasured]) {
      const source = sourceOf(spec)
      const other: unknown = JSON.parse(exportFile(source, { ...base, structure: usualStructure(source.kept) }).text)
      expect(coefficientSetSchema.parse(other)).toEqual(other)
    }
    expect(coefficientSetSchema.parse(file).design.title).toBe(nasty)
    expect(text).toMatch(/^[\x20-\x7e\n]*$/)
  })

  it('carries the numbers that its checksum is taken over', () => {
    const source = sourceOf(lowPass())
    for (const options of [base, { ...base, number: 'float', feedback: 'add', structure: 'ratio' }] as const) {
      const file = coefficientSetSchema.parse(JSON.parse(exportFile(source, options).text))
      expect(JSON.stringify(file.kept)).toBe(canonicalText(source.kept))
      expect(checksumOfStored(file.kept)).toBe(file.checksum.hex)
      expect(file.checksum.hex).toBe(source.version.checksum)
    }
    for (const spec of [...firKinds, ...ownKinds]) {
      const other = sourceOf(spec)
      const options = { ...base, number: 'float', structure: usualStructure(other.kept) } as const
      const file = coefficientSetSchema.parse(JSON.parse(exportFile(other, options).text))
      expect(JSON.stringify(file.kept)).toBe(canonicalText(other.kept))
      expect(checksumOfStored(file.kept)).toBe(other.version.checksum)
    }
  })

  it('has a schema that stands alone', () => {
    const schema = z.record(z.string(), z.unknown()).parse(JSON.parse(JSON.stringify(coefficientSetJsonSchema())))
    expect(schema.title).toBe('Polewright coefficient set')
    expect(schema.additionalProperties).toBe(false)
    expect(Object.keys(z.record(z.string(), z.unknown()).parse(schema.properties))).toContain('differenceEquation')
  })
})

describe('CSV', () => {
  it('starts no formula, and leaves negative numbers alone', () => {
    const source = sourceOf(lowPass(), { title: '=1+1', note: '-5.2 looked right' })
    const { data } = Papa.parse<string[]>(exportFile(source, { ...base, format: 'csv' }).text, { skipEmptyLines: true })
    for (const [part, , , value = ''] of data) {
      if (part === 'about') expect(value).not.toMatch(/^[=+\-@]/)
      else if (part !== 'part') expect(String(Number(value))).toBe(value)
    }
    expect(data.some(([part, , , value]) => part === 'section' && value?.startsWith('-'))).toBe(true)
  })
})

describe('held frequencies', () => {
  const heldOf = (change: Partial<FamilyDesign>) => {
    const { heldHz, heldWords } = coefficientSet(sourceOf({ ...lowPass(), ...change }), base)
    return [heldHz, heldWords]
  }
  it('are stated for each way', () => {
    expect(heldOf({})).toEqual([[120], '120 Hz'])
    expect(heldOf({ how: { method: 'bilinear', hold: 100.5 } })).toEqual([[100.5], '100.5 Hz'])
    expect(heldOf({ how: { method: 'bilinear', hold: 'none' } })[0]).toEqual([])
    expect(heldOf({ how: { method: 'matched-z' } })).toEqual([[], 'none: this method holds no single frequency'])
    expect(heldOf({ how: { method: 'fitted', upToHz: 400 } })).toEqual([[], 'none: fitted up to 400 Hz'])
    const ofOther = (spec: DesignSpec, structure: ExportOptions['structure'] = 'sections') => {
      const { heldHz, heldWords } = coefficientSet(sourceOf(spec), { ...base, structure })
      return [heldHz, heldWords]
    }
    expect(ofOther(ownRoots)).toEqual([[90], '90 Hz'])
    expect(ofOther(ownMeasured)).toEqual([[], 'none: fitted up to 300 Hz to a response given as measured'])
    expect(ofOther(firDesign(), 'taps')).toEqual([[], 'none: an FIR filter stated by its bands has no analog original'])
    expect(heldOf({ analog: lowPass({ response: 'bandpass', edgesHz: [60, 180] }).analog })).toEqual([
      [60, 180],
      '60 Hz and 180 Hz',
    ])
  })
})

describe('refusals', () => {
  const refusalOf = (spec: DesignSpec, options: Partial<ExportOptions>) => {
    try {
      coefficientSet(sourceOf(spec), { ...base, ...options })
      return null
    } catch (error) {
      if (error instanceof DesignError) return error
      throw error
    }
  }

  it('refuse b/a that doesn’t hold the filter, and offer the sections', () => {
    const steep = lowPass({ order: 12, edgesHz: [12] })
    expect(refusalOf(steep, { structure: 'sections' })).toBeNull()
    const refusal = refusalOf(steep, { structure: 'ratio' })
    expect(refusal).toMatchObject({ code: 'ratio-badly-conditioned', field: 'structure', nearest: 'sections' })
    expect(refusal?.message).toMatch(/double precision, (the response moves by|the filter is no longer stable)/)
    expect(ratioRefusal(filtersOf(sourceOf(steep).kept).digital, 'double')?.message).toBe(refusal?.message)
    expect(ratioRefusal(filtersOf(sourceOf(lowPass()).kept).digital, 'double')).toBeNull()
  })

  it('know one structure of taps, and no taps of what has feedback', () => {
    const fir = sourceOf(firDesign())
    expect(structuresOf(fir.kept)).toEqual(['taps'])
    expect(structuresOf(sourceOf(ownRoots).kept)).toEqual(['sections', 'ratio'])
    for (const structure of ['sections', 'ratio'] as const)
      expect(refusalOf(firDesign(), { structure })).toMatchObject({
        code: 'structure-not-there',
        field: 'structure',
        nearest: 'taps',
      })
    for (const spec of [lowPass(), ownMeasured])
      expect(refusalOf(spec, { structure: 'taps' })).toMatchObject({
        code: 'structure-not-there',
        field: 'structure',
        nearest: 'sections',
      })
  })

  it('refuse single precision that would lose the taps', () => {
    const fir = sourceOf(firDesign())
    if (!isStoredTaps(fir.kept)) throw new Error('Taps were stated.')
    const { kept } = fir
    const scaled = (factor: number) => ({ ...fir, kept: { ...kept, taps: kept.taps.map((tap) => tap * factor) } })
    const options = { ...base, structure: 'taps', number: 'float' } as const
    expect(() => coefficientSet(scaled(1e-39), options)).toThrow(/double precision/)
    expect(() => coefficientSet(scaled(1e40), options)).toThrow(/double precision/)
    expect(coefficientSet(scaled(1e-39), { ...options, number: 'double' }).rounding.worstDeviationDb).toBe(0)
  })

  it('judge b/a in the number type that is asked for', () => {
    const low = lowPass({ edgesHz: [12] })
    expect(refusalOf(low, { structure: 'ratio', number: 'double' })).toBeNull()
    expect(refusalOf(low, { structure: 'ratio', number: 'float' })).toMatchObject({
      code: 'ratio-badly-conditioned',
      field: 'structure',
    })
    expect(refusalOf(low, { structure: 'ratio', number: 'float' })?.message).toContain('single precision')
  })

  it('refuse single precision where a pole would leave the circle', () => {
    const refusal = refusalOf(lowPass({ edgesHz: [0.1] }, 48_000), {
      number: 'float',
    })
    expect(refusal).toMatchObject({ code: 'single-unstable', field: 'number', nearest: 'double' })
  })

  it('never state a number that isn’t one', () => {
    for (const spec of everyKind([8])) {
      const { numbers, testVector } = coefficientSet(sourceOf(spec), base)
      if (numbers.structure === 'taps') throw new Error('A family has no taps.')
      for (const value of [...testVector.input, ...testVector.output, ...numbers.steadyState.flat()])
        expect(value).toBeTypeOf('number')
      expect([...testVector.output, ...numbers.steadyState.flat()].every(Number.isFinite)).toBe(true)
    }
  })
})
