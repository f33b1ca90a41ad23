import { describe, expect, it } from 'vitest'
import type { ChainSpec } from '@/dsp'
import { otherChanges } from '@/lib/chains/changes'
import { changesBetween, changeText, factsAt } from '@/lib/chains/facts'
import { withPartAt } from '@/lib/chains/fields'
import { startingChains } from '@/lib/chains/templates'
import { displacementChain, linkedChain, tapsDesign } from '../../helpers/chain-sources'

const { plain, averaging } = startingChains
const names = { designId: '7a2f1c9e-3b64-4d0e-9c55-0e6a4a1d2b30', version: 3, drawing: 'HMF-LP-001', title: 'A design' }

const spaced = (text: string) => text.replace(/[\u2009\u202f\u00a0]/g, ' ')
const changes = (left: ChainSpec, index: number, right: ChainSpec) =>
  changesBetween(left, `stages.${index}`, right, `stages.${index}`).map((change) => spaced(changeText(change)))
const changed = (spec: ChainSpec, path: string, value: unknown) => {
  const [, index] = path.split('.')
  return changes(spec, Number(index), withPartAt(spec, path, value))
}

/** Paths of all numbers and words of a part; a design counts as one. */
function leavesOf(value: unknown, path: string): string[] {
  if (typeof value !== 'object' || value === null) return value === null ? [] : [path]
  if ('drawing' in value) return [path]
  return Object.entries(value).flatMap(([key, inner]) => leavesOf(inner, `${path}.${key}`))
}

describe('the facts of a stage', () => {
  it.each([
    ['plain', plain],
    ['averaging', averaging],
    ['displacement', displacementChain],
    ['linked', linkedChain(tapsDesign, names)],
  ])('leave no field out, and give each a name of its own: %s', (_, spec) => {
    spec.stages.forEach((stage, index) => {
      const facts = factsAt(spec, `stages.${index}`)
      const wanted = leavesOf(stage, `stages.${index}`).filter((path) => !/\.(id|kind)$/.test(path))
      expect(facts.filter(({ isAbsence }) => !isAbsence).map(({ path }) => `stages.${index}.${path}`)).toEqual(wanted)
      expect(new Set(facts.map(({ label }) => label)).size).toBe(facts.length)
      expect(facts.every(({ text }) => text !== '' && !/undefined|\[object/.test(text))).toBe(true)
    })
  })

  it('name a design by its drawing and version, and what isn’t there', () => {
    const linked = factsAt(linkedChain(tapsDesign, names), 'stages.3')
    expect(linked.find(({ label }) => label === 'Design')?.text).toBe('HMF-LP-001, version 3')
    expect(factsAt(plain, 'stages.0').find(({ label }) => label === 'Resonance')?.text).toBe('none')
  })
})

describe('what differs between two stages', () => {
  it.each([
    ['stages.1.source.analog.edgesHz.0', 200, ['Edge 160 Hz → 200 Hz']],
    ['stages.1.source.analog.family', 'bessel', ['Family Butterworth → Bessel–Thomson']],
    ['stages.3.filter.taps', 41, ['Taps 34 taps → 41 taps']],
    ['stages.3.filter.attenuationDb', 90, ['Stop band down 80 dB → 90 dB']],
    ['stages.2.fullScaleVolts', 10, ['Full scale 5 V → 10 V']],
    ['stages.2.averaging', { order: 3 }, ['Order of the averaging — → 3']],
    ['stages.0.highPass', null, ['High-pass corner 0.1 Hz → —', 'Order of the high-pass 1 → —']],
    ['stages.0.sensitivity', 0.1, ['Sensitivity 1 V/g → 100 mV/g']],
    ['stages.3.bypassed', true, ['In use yes → bypassed']],
    // Alike in the digits that are usually shown.
    ['stages.2.sampleRateHz', 2000.0001, ['Converter rate 2000 → 2000.0001']],
    ['stages.3.filter.taps', 34, []],
  ] as const)('is named with both values: %s', (path, value, texts) => {
    expect(changed(plain, path, value)).toEqual(texts)
  })

  it('is the Q of a resonance too, and the version of a design', () => {
    expect(changed(averaging, 'stages.0.resonance.q', 30)).toEqual(['Q of the resonance 20 → 30'])
    expect(changed(linkedChain(tapsDesign, names), 'stages.3.filter.link.version', 4)).toEqual([
      'Design HMF-LP-001, version 3 → HMF-LP-001, version 4',
    ])
  })
})

describe('what else differs', () => {
  it('is nothing for a chain and itself', () => {
    expect(otherChanges(plain, plain)).toEqual([])
  })

  it('is the kept band, lines, interferers and the tolerance run', () => {
    const tone = { kind: 'tone', name: 'mains', hz: 50, level: 0.2 } as const
    const left: ChainSpec = { ...plain, interferers: [tone, { ...tone, name: 'drive', hz: 400 }] }
    const right: ChainSpec = {
      ...left,
      kept: { fromHz: 0.5, toHz: 80 },
      sheet: [
        { kind: 'alias-floor', toHz: 90, atLeastDb: 85 },
        { kind: 'effective-bits', atLeast: 12 },
      ],
      interferers: [{ ...tone, level: 0.3 }],
      tolerance: { ...plain.tolerance, spread: { of: 'parts', percent: 2 }, seed: 8 },
    }
    const rows = otherChanges(left, right).map(({ what, left: one, right: other }) =>
      spaced(`${what}: ${one} | ${other}`),
    )
    expect(rows).toEqual([
      'Kept to: 90 Hz | 80 Hz',
      'Alias floor: Alias floor below 90 Hz, 80 dB down | Alias floor below 90 Hz, 85 dB down',
      'Effective bits: — | Effective bits, 12 at least',
      'Flatness: Keeps 0.5 Hz to 60 Hz within 0.5 dB | —',
      'Interferer mains: tone, frequency 50 Hz, level 200 mg | tone, frequency 50 Hz, level 300 mg',
      'Interferer drive: tone, frequency 400 Hz, level 200 mg | —',
      'Tolerance: spread: ± 1 % | ± 2 %',
      'Tolerance: seed: 7 | 8',
    ])
  })
})
