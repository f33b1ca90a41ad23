import fc from 'fast-check'
import { beforeAll, describe, expect, it, vi } from 'vitest'
import { DesignError, designFromSpec, frequencyResponse, isFir, runFilter, runTaps } from '@/dsp'
import { filtersOf } from '@/lib/designs/coefficients'
import {
  coefficientSet,
  exportFile,
  usualStructure,
  writtenFile,
  type CoefficientSet,
  type ExportOptions,
  type ExportSource,
} from '@/lib/exports'
import { runDirectForm } from '@/lib/exports/reference-run'
import { compileAndRun, doubleFromBits } from '../helpers/c-program'
import {
  anySpec,
  everyKind,
  firKinds,
  fittedLowPass,
  lowPass,
  makesFilter,
  ownKinds,
  sourceOf,
} from '../helpers/export-sources'

// Hundreds of designs; on a busy machine that takes longer than a test usually may.
vi.setConfig({ testTimeout: 120_000 })

/*
 * The headers are compiled with cc, all of them in one program, and run on their test vectors: once whole, once in two blocks and in
 * place, and once settled on a constant. What comes out is compared bit for bit with the output that the file states.
 */

interface Case {
  readonly name: string
  readonly source: ExportSource
  readonly options: ExportOptions
  readonly set: CoefficientSet
  readonly header: string
}

const combinations: readonly Omit<ExportOptions, 'name' | 'format'>[] = [
  { structure: 'sections', number: 'double', feedback: 'subtract', literals: 'decimal' },
  { structure: 'sections', number: 'double', feedback: 'add', literals: 'hexadecimal' },
  { structure: 'sections', number: 'float', feedback: 'subtract', literals: 'decimal' },
  { structure: 'sections', number: 'float', feedback: 'add', literals: 'hexadecimal' },
  { structure: 'ratio', number: 'double', feedback: 'subtract', literals: 'hexadecimal' },
  { structure: 'ratio', number: 'double', feedback: 'add', literals: 'decimal' },
  { structure: 'ratio', number: 'float', feedback: 'subtract', literals: 'decimal' },
  { structure: 'ratio', number: 'float', feedback: 'add', literals: 'decimal' },
]

const nasty = '*/ #error "ended" \n/* ??/\n\\ \u202E 床 %d " \' ??> //'

/** Each source takes its turn with the combinations; what is refused is left out, and counted. */
function casesOf(sources: readonly ExportSource[]): { cases: Case[]; refused: number } {
  const cases: Case[] = []
  let refused = 0
  sources.forEach((source, k) => {
    const combination = combinations[k % combinations.length] ?? fail()
    const name = `f${cases.length}_x`
    const options: ExportOptions = { format: 'c', name, ...combination }
    try {
      const set = coefficientSet(source, options)
      cases.push({ name, source, options, set, header: writtenFile(set).text })
    } catch (error) {
      if (!(error instanceof DesignError)) throw error
      refused++
    }
  })
  return { cases, refused }
}

/** A case of what must not be refused, once it is given its name. */
const caseOf =
  (source: ExportSource, combination: Omit<ExportOptions, 'name' | 'format'>) =>
  (name: string): Case => {
    const options: ExportOptions = { format: 'c', name, ...combination }
    const set = coefficientSet(source, options)
    return { name, source, options, set, header: writtenFile(set).text }
  }

/** Prints for each header: the largest difference, then the bits of every output sample of the three runs. */
function mainFor(cases: readonly Case[]): string {
  const include = ({ name }: Case) => `#define ${name.toUpperCase()}_SELF_TEST\n#include "${name}.h"`
  const run = ({ name, options }: Case, index: number) => {
    const type = options.number
    const length = `${name.toUpperCase()}_TEST_LENGTH`
    return `static void run_${index}(void) {
  ${name}_state state;
  ${type} block[${length}];
  size_t i;
  show(${name}_self_test());
  ${name}_reset(&state);
  for (i = 0; i < ${length}; i++) block[i] = ${name}_test_input[i];
  ${name}_process(&state, block, block, 7);
  ${name}_process(&state, block + 7, block + 7, ${length} - 7);
  for (i = 0; i < ${length}; i++) show(block[i]);
  ${name}_settle(&state, 1);
  for (i = 0; i < ${length}; i++) block[i] = 1;
  ${name}_process(&state, block, block, ${length});
  for (i = 0; i < ${length}; i++) show(block[i]);
  puts("");
}`
  }
  return `#include <stdio.h>
#include <string.h>
${cases.map(include).join('\n')}
static void show(double value) {
  unsigned char bytes[sizeof value];
  const unsigned int one = 1;
  size_t k;
  memcpy(bytes, &value, sizeof value);
  for (k = 0; k < sizeof value; k++)
    printf("%02x", bytes[*(const unsigned char *)&one ? sizeof value - 1 - k : k]);
  putchar(' ');
}
${cases.map(run).join('\n')}
int main(void) {
${cases.map((_, index) => `  run_${index}();`).join('\n')}
  return 0;
}
`
}

interface Ran {
  readonly worst: number
  readonly output: readonly number[]
  readonly settled: readonly number[]
}

function runAll(cases: readonly Case[], optimise: '-O0' | '-O1'): Ran[] {
  const headers = new Map(cases.map(({ name, header }) => [`${name}.h`, header]))
  return compileAndRun(headers, mainFor(cases), optimise).map((line) => {
    const numbers = line.trim().split(' ').map(doubleFromBits)
    const end = 1 + (numbers.length - 1) / 2
    return { worst: numbers[0] ?? Number.NaN, output: numbers.slice(1, end), settled: numbers.slice(end) }
  })
}

describe('C headers of every family, response and method', () => {
  const { cases, refused } = casesOf(everyKind([1, 2, 5]).map((spec) => sourceOf(spec, { title: nasty, note: nasty })))
  let ran: readonly Ran[] = []
  beforeAll(() => {
    ran = runAll(cases, '-O1')
  }, 120_000)

  it('covers both structures, types, signs and literals', () => {
    expect(cases.length).toBeGreaterThan(250)
    expect(refused).toBeLessThan(cases.length / 10)
    for (const combination of combinations)
      expect(cases.filter(({ options }) => matches(options, combination)).length).toBeGreaterThan(20)
  })

  it('agrees with the test vector to the last bit', () => {
    expect(ran).toHaveLength(cases.length)
    ran.forEach(({ worst, output }, k) => {
      const { set, source, options } = cases[k] ?? fail()
      const about = `${set.statement} ${JSON.stringify(options)}`
      expect(worst, about).toBe(0)
      expect(output.map(plain), about).toEqual(set.testVector.output)
      expect(source.version.spec.sampleRateHz).toBe(1200)
    })
  })

  it('starts settled on a constant', () => {
    ran.forEach(({ settled }, k) => {
      const { set, source, options } = cases[k] ?? fail()
      const level = frequencyResponse(filtersOf(source.kept).digital, [0]).re[0] ?? Number.NaN
      // The states are rounded to the type, and the sum of the denominator has lost digits at low corners, more of them in one ratio.
      const give = options.number === 'float' ? 2e-4 : options.structure === 'ratio' ? 1e-7 : 1e-10
      for (const value of settled)
        expect(Math.abs(value - level), `${set.statement} ${JSON.stringify(options)}`).toBeLessThan(give)
    })
  })
})

describe('C headers of random designs', () => {
  const specs = fc.sample(anySpec, { seed: 4021, numRuns: 110 }).filter(makesFilter)
  const { cases } = casesOf(specs.map((spec) => sourceOf(spec)))

  it('agree with their test vectors to the last bit, unoptimised as well', () => {
    expect(cases.length).toBeGreaterThan(60)
    runAll(cases, '-O0').forEach(({ worst, output }, k) => {
      const { set, options } = cases[k] ?? fail()
      expect(worst, `${set.statement} ${JSON.stringify(options)}`).toBe(0)
      expect(output.map(plain)).toEqual(set.testVector.output)
    })
  })
})

describe('C headers of FIR filters, fitted versions and originals of one’s own', () => {
  const types = (['double', 'float'] as const).flatMap((number) =>
    (['decimal', 'hexadecimal'] as const).map((literals) => ({ number, literals })),
  )
  const sources = [...firKinds, ...ownKinds, fittedLowPass].map((spec) => sourceOf(spec, { title: nasty, note: nasty }))
  const cases = sources
    .flatMap((source) =>
      types.map(({ number, literals }) => {
        const structure = usualStructure(source.kept)
        return caseOf(source, { structure, number, literals, feedback: 'subtract' })
      }),
    )
    .map((make, k) => make(`g${k}_x`))
  const ran = new Map<string, readonly Ran[]>()
  beforeAll(() => {
    for (const optimise of ['-O0', '-O1'] as const) ran.set(optimise, runAll(cases, optimise))
  }, 120_000)

  it('agree with their test vectors to the last bit, in one block, in two, and settled', () => {
    for (const runs of ran.values()) {
      expect(runs).toHaveLength(cases.length)
      runs.forEach(({ worst, output, settled }, k) => {
        const { set, source, options } = cases[k] ?? fail()
        const about = `${set.statement} ${JSON.stringify(options)}`
        expect(worst, about).toBe(0)
        expect(output.map(plain), about).toEqual(set.testVector.output)
        const { re } = frequencyResponse(filtersOf(source.kept).digital, [0])
        for (const value of settled)
          expect(Math.abs(value - (re[0] ?? Number.NaN)), about).toBeLessThan(options.number === 'float' ? 2e-4 : 1e-10)
      })
    }
    expect(ran.size).toBe(2)
  })

  it('give every tap something to do', () => {
    for (const { set } of cases) {
      if (set.numbers.structure !== 'taps') continue
      const { taps } = set.numbers
      expect(set.testVector.input.length).toBeGreaterThanOrEqual(taps.length + 32)
      const input = Float64Array.from(set.testVector.input)
      const largest = Math.max(...taps.map(Math.abs))
      for (const left of [0, Math.floor(taps.length / 2), taps.length - 1]) {
        // The middle tap of a differentiator is none, nor are the ends of a Hann window.
        if (Math.abs(taps[left] ?? 0) < 1e-6 * largest) continue
        const without = taps.map((tap, k) => (k === left ? 0 : tap))
        expect([...runDirectForm(without, input, set.options.number)]).not.toEqual(set.testVector.output)
      }
    }
  })
})

describe('the stated output', () => {
  it('is that of runTaps, bit for bit, for taps in double precision', () => {
    for (const spec of firKinds) {
      const { digital } = designFromSpec(spec)
      if (!isFir(digital)) return fail()
      const { testVector } = coefficientSet(sourceOf(spec), {
        ...(combinations[0] ?? fail()),
        format: 'c',
        structure: 'taps',
      })
      const output = runTaps(digital.taps, Float64Array.from(testVector.input), { mode: 'causal' })
      expect(Array.from(output, plain)).toEqual(testVector.output.map(plain))
    }
  })

  it('is that of runFilter, bit for bit, for sections in double precision', () => {
    for (const spec of everyKind([1, 6])) {
      const source = sourceOf(spec)
      for (const feedback of ['subtract', 'add'] as const) {
        const { testVector } = coefficientSet(source, { ...(combinations[0] ?? fail()), format: 'c', feedback })
        const output = runFilter(filtersOf(source.kept).digital.sections, Float64Array.from(testVector.input), {
          mode: 'causal',
        })
        expect(Array.from(output, plain)).toEqual(testVector.output)
      }
    }
  })

  it('differs between the types by single precision only, and between structures by rounding only', () => {
    const source = sourceOf(lowPass())
    const vectorOf = (change: Partial<ExportOptions>) =>
      coefficientSet(source, { ...(combinations[0] ?? fail()), format: 'c', ...change }).testVector.output
    const exact = vectorOf({})
    const distance = (other: readonly number[]) =>
      Math.max(...other.map((value, n) => Math.abs(value - (exact[n] ?? 0))))
    expect(distance(vectorOf({ number: 'float' }))).toBeGreaterThan(0)
    expect(distance(vectorOf({ number: 'float' }))).toBeLessThan(1e-6)
    expect(distance(vectorOf({ structure: 'ratio' }))).toBeLessThan(1e-13)
  })
})

describe('a header', () => {
  it('is silent and small in a file that uses nothing of it, and can be included twice', () => {
    const source = sourceOf(lowPass(), { title: nasty })
    const header = exportFile(source, { ...(combinations[0] ?? fail()), format: 'c', name: 'twice' }).text
    const main =
      '#include "twice.h"\n#include "twice.h"\n#include <stdio.h>\nint main(void) { puts(TWICE_SHA256); return 0; }\n'
    expect(compileAndRun(new Map([['twice.h', header]]), main, '-O0')).toEqual([source.version.checksum])
  })
})

const matches = (options: ExportOptions, wanted: Partial<ExportOptions>) =>
  options.structure === wanted.structure && options.number === wanted.number && options.feedback === wanted.feedback

/** 0 for −0, which C's arithmetic also makes and which compares equal there. */
const plain = (value: number) => value + 0

function fail(): never {
  throw new Error('There is no such case.')
}
