import { describe, expect, it } from 'vitest'
import { computeChain, type ChainSpec } from '@/dsp'
import { runBehind } from '@/dsp/chain/proof/run-chain'
import { chainNumbersOf, digitalStagesOf, type StoredDigitalStage } from '@/lib/chains/stored-numbers'
import { startingChains } from '@/lib/chains/templates'
import { isStoredTaps, type StoredCoefficients } from '@/lib/designs/stored-coefficients'
import { chainFile } from '@/lib/exports/chain-file'
import { chainFileSchema } from '@/lib/exports/chain-json'
import { runDigitalPart } from '@/lib/exports/chain-run'
import type { ChainSource } from '@/lib/exports/chain-source'
import { chainTestVector } from '@/lib/exports/chain-test-vector'
import { compileAndRun } from '../helpers/c-program'
import {
  chainSourceOf,
  displacementChain,
  feedbackDesign,
  linkedChain,
  shapedChain,
  tapsDesign,
  velocityChain,
} from '../helpers/chain-sources'

const names = { designId: '7a2f1c9e-3b64-4d0e-9c55-0e6a4a1d2b30', version: 3, drawing: 'HMF-LP-001', title: 'A design' }

/** Its total factor, 500, has every input held over many samples. */
const longChain: ChainSpec = {
  ...startingChains.averaging,
  stages: startingChains.averaging.stages.map((stage) =>
    stage.kind !== 'decimate'
      ? stage
      : stage.filter.type === 'cic'
        ? { ...stage, factor: 50, filter: { type: 'cic', order: 2, combDelay: 1, compensation: null } }
        : stage.id === 's4'
          ? { ...stage, factor: 10, filter: { type: 'equiripple', taps: 101, passHz: 10, stopHz: 30, stopWeight: 10 } }
          : { ...stage, bypassed: true },
  ),
  kept: { fromHz: 1, toHz: 10 },
  sheet: [],
}

const sources: Readonly<Record<string, ChainSource>> = {
  plain: await chainSourceOf(startingChains.plain),
  averaging: await chainSourceOf(startingChains.averaging),
  velocity: await chainSourceOf(velocityChain),
  displacement: await chainSourceOf(displacementChain),
  shaped: await chainSourceOf(shapedChain(names)),
  taps: await chainSourceOf(linkedChain(tapsDesign, names)),
  feedback: await chainSourceOf(linkedChain(feedbackDesign, names)),
  long: await chainSourceOf(longChain),
  none: await chainSourceOf(startingChains.empty),
}

/* What firmware would do, written from the header's comments: integrators and combs in whole numbers that wrap round. */
const library = `#include <stdio.h>
#include <stdlib.h>
#include <math.h>
#include <stdint.h>

static size_t keep(double *x, size_t n, size_t factor) {
  size_t m = 0, i;
  for (i = 0; i < n; i += factor) x[m++] = x[i];
  return m;
}
static void taps(const double *h, size_t count, double *x, size_t n) {
  size_t i = n, k;
  while (i-- > 0) {
    double sum = 0;
    for (k = 0; k < count && k <= i; k++) sum += h[k] * x[i - k];
    x[i] = sum;
  }
}
static void sections(const double (*rows)[5], size_t count, double *x, size_t n) {
  size_t i, k;
  for (k = 0; k < count; k++) {
    const double *c = rows[k];
    double x1 = 0, x2 = 0, y1 = 0, y2 = 0;
    for (i = 0; i < n; i++) {
      const double y = c[0] * x[i] + c[1] * x1 + c[2] * x2 - c[3] * y1 - c[4] * y2;
      x2 = x1; x1 = x[i]; y2 = y1; y1 = y; x[i] = y;
    }
  }
}
static void integrals(int times, double rate, double scale, double *x, size_t n) {
  size_t i;
  while (times-- > 0) {
    double y = 0, before = 0;
    for (i = 0; i < n; i++) {
      y += (x[i] + before) / (2 * rate);
      before = x[i]; x[i] = y;
    }
  }
  for (i = 0; i < n; i++) x[i] *= scale;
}
static size_t cic(int order, size_t delay, double gain, size_t factor, double *x, size_t n) {
  uint64_t sums[8] = {0}, combs[8][2] = {{0}};
  const double unit = 4294967296.0;
  size_t i, m = 0;
  int k;
  for (i = 0; i < n; i++) {
    uint64_t value = (uint64_t)(int64_t)llround(x[i] * unit);
    for (k = 0; k < order; k++) value = sums[k] += value;
    if (i % factor != 0) continue;
    for (k = 0; k < order; k++) {
      const uint64_t older = combs[k][m % delay];
      combs[k][m % delay] = value;
      value -= older;
    }
    x[m++] = (double)(int64_t)value / unit / gain;
  }
  return m;
}
`

function filterCalls(kept: StoredCoefficients, name: string): string {
  const upper = name.toUpperCase()
  return isStoredTaps(kept)
    ? `taps(${name}_taps, ${upper}_TAPS, x, n);`
    : `sections(${name}_sections, ${upper}_SECTIONS, x, n);`
}

function stageCalls(stage: StoredDigitalStage, name: string): string[] {
  const upper = name.toUpperCase()
  if (stage.kind === 'shape') return [filterCalls(stage.coefficients, name)]
  if (stage.kind === 'integrate')
    return [
      filterCalls(stage.highPass, `${name}_high_pass`),
      `integrals(${upper}_INTEGRALS, ${upper}_RATE_HZ, ${upper}_SCALE, x, n);`,
    ]
  const [first, second] = stage.parts
  if (first?.kind === 'filter') return [filterCalls(first.coefficients, name), `n = keep(x, n, ${upper}_FACTOR);`]
  return [
    `n = cic(${upper}_CIC_ORDER, ${upper}_CIC_COMB_DELAY, ${upper}_CIC_GAIN, ${upper}_FACTOR, x, n);`,
    ...(second?.kind === 'filter' ? [filterCalls(second.coefficients, `${name}_compensation`)] : []),
  ]
}

function chainProgram(name: string, { version }: ChainSource): string {
  const upper = name.toUpperCase()
  const stages = digitalStagesOf(version.numbers)
  return `static void run_${name}(void) {
  size_t n = (size_t)${upper}_TEST_INPUTS * ${upper}_TEST_HOLD, i, wrong = 0;
  double *x = malloc(n * sizeof *x);
  for (i = 0; i < n; i++) x[i] = ${name}_test_volts[i / ${upper}_TEST_HOLD] / ${upper}_VOLTS_PER_UNIT;
  ${stages.flatMap((stage, at) => stageCalls(stage, `${name}_s${at + 1}`)).join('\n  ')}
  for (i = 0; i < n && i < ${upper}_TEST_STORED; i++)
    wrong += !(fabs(x[i] - ${name}_test_stored[i]) <= ${upper}_TEST_TOLERANCE);
  printf("${name} %d %d %d\\n", (int)n, ${upper}_TEST_STORED, (int)wrong);
  free(x);
}`
}

describe('the test vector of a chain', () => {
  it('is what a program stores that runs the stages of the header', () => {
    const entries = Object.entries(sources)
    const headers = new Map(entries.map(([name, source]) => [`${name}.h`, chainFile(source, { as: 'c', name }).text]))
    const main = `${entries.map(([name]) => `#include "${name}.h"`).join('\n')}
${library}
${entries.map(([name, source]) => chainProgram(name, source)).join('\n')}
int main(void) {
${entries.map(([name]) => `  run_${name}();`).join('\n')}
  return 0;
}
`
    const lines = compileAndRun(headers, main, '-O1', ['-lm'])
    expect(lines).toEqual(
      entries.map(([name, { version }]) => {
        const count = chainTestVector(version)?.stored.length
        return `${name} ${count} ${count} 0`
      }),
    )
  })

  it.each(Object.entries(sources))(
    'has eight stored samples or more, most of them far from nothing: %s',
    (_, { version }) => {
      const test = chainTestVector(version)
      if (!test) throw new Error('A new version has its test.')
      expect(test.stored.length).toBeGreaterThanOrEqual(8)
      expect(test.inputVolts.length).toBeLessThanOrEqual(512)
      expect(test.stored.slice(-8).filter((value) => Math.abs(value) > test.tolerance).length).toBeGreaterThan(5)
    },
  )

  it('is in the JSON file, from volts at the converter to the unit of the stored samples', () => {
    const { test } = chainFileSchema.parse(JSON.parse(chainFile(sources.velocity!, { as: 'json' }).text))
    expect(test).toMatchObject({ inputRateHz: 102_400, voltsPerUnit: 0.1, unit: 'mm/s', hold: 4 })
  })
})

describe('a run of the kept numbers', () => {
  it.each([
    ['decimations', startingChains.plain, 3],
    ['an integral between decimations', velocityChain, 3],
    ['two integrals at the output rate', displacementChain, 8],
    ['designs', shapedChain(names), 3],
  ])('settles at what the proof runs for a signal that was there for ever: %s', (_, spec, seconds) => {
    const chain = computeChain(spec)
    const { outputRateHz, converterRateHz } = chain
    // A tenth of a second is a whole number of stored samples, and of periods of both tones.
    const length = Math.round(converterRateHz / 10)
    const period = Float64Array.from(
      { length },
      (_, n) => Math.sin((2 * Math.PI * n * 2) / length) + 0.5 * Math.cos((2 * Math.PI * n * 5) / length),
    )
    const run = runBehind(chain, period)
    let step = run.next()
    while (!step.done) step = run.next()
    const settled = step.value
    const sensitivity = spec.stages[0]?.kind === 'sensor' ? spec.stages[0].sensitivity : 1
    const volts = Float64Array.from({ length: length * seconds * 10 }, (_, n) => period[n % length] ?? 0)
    const stored = runDigitalPart(chainNumbersOf(chain).stages, volts, sensitivity)
    expect(settled.length).toBe(outputRateHz / 10)
    const last = stored.slice(-settled.length)
    const largest = settled.reduce((most, value) => Math.max(most, Math.abs(value)), 0)
    last.forEach((value, n) => expect(Math.abs(value - settled[n]!)).toBeLessThan(1e-6 * largest))
  })

  it('takes g·s to mm/s, and g·s² to mm', () => {
    const scales = [velocityChain, displacementChain].map((spec) =>
      chainNumbersOf(computeChain(spec)).stages.flatMap((stage) => (stage.kind === 'integrate' ? [stage.scale] : [])),
    )
    expect(scales.flat().map((scale) => Number(scale.toPrecision(12)))).toEqual([9806.65, 9806.65])
  })
})

describe('a version that was kept before', () => {
  /** As numbers were kept in format 1. */
  const keptBefore = (source: ChainSource): ChainSource => {
    const decimations = digitalStagesOf(source.version.numbers).flatMap((stage) => {
      if (stage.kind !== 'decimate') return []
      const { stageId, factor, inRateHz, outRateHz, delaySeconds, parts } = stage
      return [{ stageId, factor, inRateHz, outRateHz, delaySeconds, parts }]
    })
    return { ...source, version: { ...source.version, numbers: { format: 1, decimations } } }
  }

  it('is handed over whole where it has decimations alone', () => {
    const before = keptBefore(sources.averaging!)
    const file = chainFileSchema.parse(JSON.parse(chainFile(before, { as: 'json' }).text))
    expect(file.numbers).toEqual(before.version.numbers)
    expect(file.test?.stored).toEqual(chainTestVector(sources.averaging!.version)?.stored)
    expect(chainFile(before, { as: 'c' }).text).not.toContain('MISSING')
  })

  it('says what it lacks where it integrates or shapes, and has no test', () => {
    for (const source of [sources.velocity!, sources.shaped!]) {
      const before = keptBefore(source)
      const file = chainFileSchema.parse(JSON.parse(chainFile(before, { as: 'json' }).text))
      expect(file.test).toBeNull()
      const { text } = chainFile(before, { as: 'c' })
      expect(text).toContain('THEY ARE MISSING HERE')
      expect(text).not.toContain('test_stored')
      expect(chainFile(source, { as: 'c' }).text).not.toContain('MISSING')
    }
  })
})

describe('the C header alone', () => {
  it('compiles without a warning where nothing of it is used', () => {
    const [velocity, none] = ['velocity', 'none'].map((name) => chainFile(sources[name]!, { as: 'c', name }).text)
    const use = 'int main(void) { return 0; }\n'
    expect(compileAndRun(new Map(), `${velocity}${none}${use}`, '-O0', ['-Wunused-const-variable=2'])).toEqual([])
  })
})
