import * as z from 'zod'
import { describe, expect, it } from 'vitest'
import { computeChain, DesignError, isFir, magnitudeDb, type ChainSpec } from '@/dsp'
import { canonicalJson } from '@/lib/chains/canonical'
import { chainChecksum } from '@/lib/chains/checksum'
import { linksOf, withLinks } from '@/lib/chains/links'
import { digitalStagesOf } from '@/lib/chains/stored-numbers'
import { startingChains } from '@/lib/chains/templates'
import { isStoredTaps, type StoredCoefficients } from '@/lib/designs/stored-coefficients'
import { chainFile, chainFileOptionsFrom } from '@/lib/exports/chain-file'
import { chainFileSchema, chainJsonSchema } from '@/lib/exports/chain-json'
import { chainFields } from '@/lib/exports/json-fields'
import { compileAndRun, doubleFromBits } from '../helpers/c-program'
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
const nasty = '*/ #error "ended" \n/* ??/\n\\ 床 %d " \' ??> //'

const sources = {
  plain: await chainSourceOf(startingChains.plain, { title: nasty, note: nasty }),
  averaging: await chainSourceOf(startingChains.averaging),
  taps: await chainSourceOf(linkedChain(tapsDesign, names)),
  feedback: await chainSourceOf(linkedChain(feedbackDesign, names)),
  none: await chainSourceOf(startingChains.empty),
  velocity: await chainSourceOf(velocityChain),
  displacement: await chainSourceOf(displacementChain),
  shaped: await chainSourceOf(shapedChain(names)),
}

const show = `static void show(double value) {
  unsigned char bytes[sizeof value];
  const unsigned int one = 1;
  size_t k;
  memcpy(bytes, &value, sizeof value);
  for (k = 0; k < sizeof value; k++)
    printf("%02x", bytes[*(const unsigned char *)&one ? sizeof value - 1 - k : k]);
  putchar(' ');
}`

describe('the C header of a chain', () => {
  it('compiles without a warning, and every number comes back to the last bit', () => {
    const entries = Object.entries(sources)
    const headers = new Map(
      entries.map(([name, source]) => [`${name}.h`, chainFile(source, { as: 'c', name: `c_${name}` }).text]),
    )
    const expected: number[][] = []
    const prints: string[] = []
    for (const [name, { version }] of entries) {
      const upper = `C_${name.toUpperCase()}`
      const stages = digitalStagesOf(version.numbers)
      const numbers = [version.figures.outputRateHz, stages.length]
      const lines = [`show(${upper}_OUTPUT_RATE_HZ);`, `show(${upper}_STAGES);`]
      const putFilter = (kept: StoredCoefficients, array: string) => {
        if (isStoredTaps(kept)) {
          numbers.push(kept.taps.length, ...kept.taps)
          lines.push(`show(${array.toUpperCase()}_TAPS);`)
          lines.push(`for (k = 0; k < ${array.toUpperCase()}_TAPS; k++) show(${array}_taps[k]);`)
          return
        }
        numbers.push(...kept.sections.flatMap(({ b0, b1, b2, a1, a2 }) => [b0, b1, b2, a1, a2]))
        lines.push(`for (k = 0; k < 5 * ${array.toUpperCase()}_SECTIONS; k++) show(${array}_sections[k / 5][k % 5]);`)
      }
      stages.forEach((stage, index) => {
        const own = `c_${name}_s${index + 1}`
        const put = (suffix: string, value: number) => {
          numbers.push(value)
          lines.push(`show(${own.toUpperCase()}_${suffix});`)
        }
        put('DELAY_SECONDS', stage.delaySeconds)
        if (stage.kind !== 'decimate') put('RATE_HZ', stage.rateHz)
        if (stage.kind === 'shape') putFilter(stage.coefficients, own)
        if (stage.kind === 'integrate') {
          put('INTEGRALS', stage.times)
          put('SCALE', stage.scale)
          putFilter(stage.highPass, `${own}_high_pass`)
        }
        if (stage.kind !== 'decimate') return
        put('FACTOR', stage.factor)
        put('IN_RATE_HZ', stage.inRateHz)
        put('OUT_RATE_HZ', stage.outRateHz)
        stage.parts.forEach((part, at) => {
          if (part.kind === 'cic') {
            put('CIC_ORDER', part.order)
            put('CIC_COMB_DELAY', part.combDelay)
            put('CIC_GAIN', (part.factor * part.combDelay) ** part.order)
          } else putFilter(part.coefficients, at > 0 ? `${own}_compensation` : own)
        })
      })
      expected.push(numbers)
      prints.push(`  ${lines.join('\n  ')}\n  puts("");`)
    }
    const main = `#include <stdio.h>
#include <string.h>
${entries.map(([name]) => `#include "${name}.h"\n#include "${name}.h"`).join('\n')}
${show}
int main(void) {
  size_t k = 0;
${prints.join('\n')}
  return k > 1000000;
}
`
    const printed = compileAndRun(headers, main, '-O0').map((line) => line.trim().split(' ').map(doubleFromBits))
    expect(printed).toEqual(expected)
    expect(printed[0]?.length).toBeGreaterThan(70)
  })

  it('says in which order things are done, and what to beware of; a title ends no comment', () => {
    const { text, fileName } = chainFile(sources.averaging, { as: 'c' })
    expect(fileName).toBe('hmf_ch_005_v2.h')
    expect(text).toContain('from 102400 Hz down by 10 to 10240 Hz')
    expect(text).toContain('Stage 1 of 3 (s3): decimation from 102400 Hz')
    expect(text).toContain('#define HMF_CH_005_V2_S1_CIC_GAIN 100000.0')
    // Hogenauer 1981, equation 11: N·log2(RM) bits, rounded up; 5·log2(10) = 16.6.
    expect(text).toContain('#define HMF_CH_005_V2_S1_CIC_BIT_GROWTH 17')
    expect(text).toContain('caution: A design aid; confirm on the target hardware.')
    expect(chainFile(sources.plain, { as: 'c' }).text).not.toMatch(/[^\n\x20-\x7e]/)
  })

  it('hands over taps that have the response of the stage', () => {
    const chain = computeChain(startingChains.plain)
    const [first] = digitalStagesOf(sources.plain.version.numbers)
    const part = first?.kind === 'decimate' ? first.parts[0] : null
    const filter = chain.stages[3]?.parts[0]
    if (part?.kind !== 'filter' || !isStoredTaps(part.coefficients) || filter?.kind !== 'digital')
      throw new Error('The first decimation has taps.')
    if (!isFir(filter.filter)) throw new Error('The first decimation has taps.')
    expect(part.coefficients.taps).toEqual([...filter.filter.taps])
    const sum = part.coefficients.taps.reduce((total, tap) => total + tap, 0)
    expect(20 * Math.log10(sum)).toBeCloseTo(magnitudeDb(filter.filter, [0])[0] ?? 0, 9)
  })
})

describe('the JSON file of a chain', () => {
  it.each(Object.entries(sources))('reads back as what was saved, checksum and all: %s', (_, source) => {
    const { text, mediaType } = chainFile(source, { as: 'json' })
    expect(mediaType).toBe('application/json; charset=utf-8')
    const file = chainFileSchema.parse(JSON.parse(text))
    const { spec, figures, numbers, checksum } = source.version
    expect(file.spec).toEqual(spec)
    expect(file.figures).toEqual(figures)
    expect(file.numbers).toEqual(numbers)
    expect(file.checksum.hex).toBe(checksum)
    const read = JSON.parse(text) as { figures: typeof figures }
    expect(chainChecksum({ spec: file.spec, figures: read.figures, numbers })).toBe(checksum)
    expect(text).not.toMatch(/[^\n\x20-\x7e]/)
  })

  it('refuses a key that it doesn’t know', () => {
    const file = JSON.parse(chainFile(sources.plain, { as: 'json' }).text) as object
    expect(chainFileSchema.safeParse({ ...file, extra: 1 }).success).toBe(false)
  })

  it('has a schema that can be served, and a page that lists its fields', () => {
    const schema = z.object({ title: z.string(), required: z.array(z.string()) }).parse(chainJsonSchema())
    expect(schema.title).toBe('Polewright chain')
    expect(schema.required).toContain('spec')
    const paths = chainFields().map(({ path }) => path)
    expect(paths).toContain('spec.kept.toHz')
    expect(paths).toContain('numbers.stages[].parts[].coefficients.taps')
    expect(paths.some((path) => path.includes('.link.spec.'))).toBe(false)
  })
})

describe('the choice of a file', () => {
  it.each([
    ['', 'as'],
    ['as=xml', 'as'],
    ['as=json&as=c', 'as'],
    ['as=json&team=1', 'team'],
    ['as=c&name=a%22%0d%0aset-cookie', 'name'],
    ['as=c&name=..%2F..%2Fetc', 'name'],
  ])('refuses ?%s, naming the parameter', (query, field) => {
    const ask = () => chainFileOptionsFrom(new URLSearchParams(query))
    expect(ask).toThrow(DesignError)
    expect(ask).toThrow(expect.objectContaining({ field }))
  })
})

describe('the canonical text', () => {
  it('is the same whatever the order of keys, and another for another value', () => {
    expect(canonicalJson({ b: [1, { d: -0, c: 'x' }], a: undefined })).toBe('{"b":[1,{"c":"x","d":0}]}')
    expect(canonicalJson({ a: 1, b: 2 })).toBe(canonicalJson({ b: 2, a: 1 }))
    expect(canonicalJson({ a: 1e-7 })).not.toBe(canonicalJson({ a: 1.0000000000000002e-7 }))
    expect(() => canonicalJson({ a: Number.NaN })).toThrow(RangeError)
  })
})

describe('the links of a chain', () => {
  it('are found with their field, and changed where they stand', () => {
    const spec: ChainSpec = linkedChain(tapsDesign, names)
    expect(linksOf(spec).map(({ field, stageId }) => [field, stageId])).toEqual([['stages.3.filter.link', 'tied']])
    const moved = withLinks(spec, (link) => ({ ...link, version: 9 }))
    expect(linksOf(moved).map(({ link }) => link.version)).toEqual([9])
    expect(linksOf(startingChains.plain)).toEqual([])
  })
})
