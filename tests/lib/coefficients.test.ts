import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { designFromSpec, ENGINE_VERSION, type FamilyDesign } from '@/dsp'
import {
  canonicalText,
  checksumOf,
  checksumOfStored,
  coefficientsOf,
  filtersOf,
  type StoredFamily,
} from '@/lib/designs/coefficients'
import { defaultSpec } from '@/lib/designs/edits'
import { recomputeDifference, worstRelativeDifference } from '@/lib/designs/recompute'

const bandPass: FamilyDesign = {
  ...defaultSpec,
  analog: { family: 'butterworth', response: 'bandpass', order: 4, edgesHz: [10, 200] },
}
const impulse: FamilyDesign = { ...defaultSpec, how: { method: 'impulse-invariant' } }
const specs = [defaultSpec, bandPass, impulse]
const storedOf = (spec: FamilyDesign) => coefficientsOf(designFromSpec(spec))
const versionOf = (spec: FamilyDesign, coefficients = storedOf(spec), engineVersion = ENGINE_VERSION) => ({
  number: 3,
  spec,
  coefficients,
  engineVersion,
})

/** The same value with every object's keys turned round, as jsonb may give them back. */
function turned<T>(value: T): T {
  return JSON.parse(JSON.stringify(value), (_, part: unknown) =>
    part !== null && typeof part === 'object' && !Array.isArray(part)
      ? Object.fromEntries(Object.entries(part).reverse())
      : part,
  ) as T
}

describe('canonical coefficients', () => {
  it.each(specs)('are one text for the same numbers, in whatever order the keys come', (spec) => {
    const stored = storedOf(spec)
    expect(canonicalText(turned(stored))).toBe(canonicalText(stored))
    expect(JSON.parse(canonicalText(stored))).toEqual(stored)
  })

  it('write each number so that it reads back to the same double', () => {
    fc.assert(
      fc.property(fc.double({ noNaN: true, noDefaultInfinity: true }), (value) => {
        const stored: StoredFamily = { ...storedOf(defaultSpec), gain: value }
        const back = JSON.parse(canonicalText(stored)) as StoredFamily
        return Object.is(back.gain, value === 0 ? 0 : value)
      }),
    )
  })

  it('do not tell minus zero from zero', () => {
    const stored = storedOf(defaultSpec)
    expect(checksumOfStored({ ...stored, gain: -0 })).toBe(checksumOfStored({ ...stored, gain: 0 }))
  })

  it('refuse what is no number', () => {
    expect(() => canonicalText({ ...storedOf(defaultSpec), gain: NaN })).toThrow(RangeError)
    expect(() => canonicalText({ ...storedOf(defaultSpec), gain: Infinity })).toThrow(RangeError)
  })

  it('have a checksum that moves with the last bit of any number', () => {
    const stored = storedOf(defaultSpec)
    const [first, ...rest] = stored.sections
    if (!first) throw new Error('no section')
    const nudged = { ...stored, sections: [{ ...first, a2: first.a2 * (1 + Number.EPSILON) }, ...rest] }
    expect(checksumOfStored(nudged)).not.toBe(checksumOfStored(stored))
  })

  it('have the SHA-256 of their text for a checksum', () => {
    // The digest of this very text, by sha256sum of GNU coreutils.
    const tiny: StoredFamily = {
      format: 1,
      sampleRateHz: 1000,
      gain: 0.5,
      zeros: [{ re: -1, im: 0 }],
      poles: [{ re: 0.25, im: -0 }],
      sections: [{ b0: 0.5, b1: 0.5, b2: 0, a1: -0.25, a2: 0 }],
      parallel: null,
      analog: { gain: 1, zeros: [], poles: [{ re: -1e-7, im: 0 }] },
    }
    expect(canonicalText(tiny)).toBe(
      '{"format":1,"sampleRateHz":1000,"gain":0.5,"zeros":[{"re":-1,"im":0}],"poles":[{"re":0.25,"im":0}],"sections":[{"b0":0.5,"b1":0.5,"b2":0,"a1":-0.25,"a2":0}],"parallel":null,"analog":{"gain":1,"zeros":[],"poles":[{"re":-1e-7,"im":0}]}}',
    )
    expect(checksumOfStored(tiny)).toBe('d6912f1fac997eea3cf446be39cec0d2074f904e8454fdec2721e0f7961b50e4')
  })

  it.each(specs)('turn back into the filters they came from', (spec) => {
    const filters = filtersOf(storedOf(spec))
    expect(checksumOf(filters)).toBe(checksumOf(designFromSpec(spec)))
  })
})

describe('computing a version anew', () => {
  it.each(specs)('finds no difference when the engine is the same', (spec) => {
    expect(recomputeDifference(versionOf(spec))).toBeNull()
  })

  it('does not mind another engine that gives the same filter', () => {
    expect(recomputeDifference(versionOf(defaultSpec, storedOf(defaultSpec), '0.9.0'))).toBeNull()
  })

  it('does not mind roots in another order', () => {
    const stored = storedOf(bandPass)
    expect(recomputeDifference(versionOf(bandPass, { ...stored, poles: [...stored.poles].reverse() }))).toBeNull()
  })

  const nudge = (value: number) => value * (1 + 1e-9)
  const changes: Record<string, (stored: StoredFamily) => StoredFamily> = {
    'the gain': (stored) => ({ ...stored, gain: nudge(stored.gain) }),
    'the rate': (stored) => ({ ...stored, sampleRateHz: nudge(stored.sampleRateHz) }),
    'a pole': (stored) => ({
      ...stored,
      poles: stored.poles.map((pole, at) => (at === 0 ? { re: nudge(pole.re), im: nudge(pole.im) } : pole)),
    }),
    'an analog pole': (stored) => ({
      ...stored,
      analog: { ...stored.analog, poles: stored.analog.poles.map(({ re, im }) => ({ re: nudge(re), im: nudge(im) })) },
    }),
    'a small b0 beside large feedback': (stored) => ({
      ...stored,
      sections: stored.sections.map((section) => ({ ...section, b0: nudge(section.b0) })),
    }),
  }
  it.each(Object.keys(changes))('notices a change of 1e-9 in %s', (what) => {
    const low: FamilyDesign = { ...defaultSpec, analog: { ...defaultSpec.analog, edgesHz: [0.5] } }
    const changed = changes[what]?.(storedOf(low))
    const difference = recomputeDifference(versionOf(low, changed, '0.9.0'))
    expect(difference).toMatchObject({ versionNumber: 3, storedEngine: '0.9.0', currentEngine: ENGINE_VERSION })
    expect(difference?.worstRelative).toBeGreaterThan(5e-10)
    expect(difference?.worstRelative).toBeLessThan(1e-8)
  })

  it('notices a root or a section too few, and a sum that became a cascade', () => {
    const stored = storedOf(defaultSpec)
    expect(worstRelativeDifference(stored, { ...stored, poles: stored.poles.slice(1) })).toBe(Infinity)
    expect(worstRelativeDifference(stored, { ...stored, sections: stored.sections.slice(1) })).toBe(Infinity)
    const parallel = storedOf(impulse)
    expect(parallel.parallel).not.toBeNull()
    expect(worstRelativeDifference(parallel, { ...parallel, parallel: null })).toBe(Infinity)
  })

  it('counts a refusal by today’s engine as a difference', () => {
    const impossible: FamilyDesign = { ...defaultSpec, analog: { ...defaultSpec.analog, edgesHz: [700] } }
    expect(recomputeDifference(versionOf(impossible, storedOf(defaultSpec)))?.worstRelative).toBe(Infinity)
  })
})
