import { describe, expect, it } from 'vitest'
import { chainSpecSchema, computeChain, type ChainSpec } from '@/dsp'
import { withField } from '@/lib/chains/edits'
import { chainFieldOf, chainFieldText, numberAt, parseChainField } from '@/lib/chains/fields'
import { startingChain } from '@/lib/chains/stage-starts'
import { chainStatementParts, chainText, chainWordOfField } from '@/lib/chains/statement'
import { startingChains } from '@/lib/chains/templates'
import { defaultSpec } from '@/lib/designs/edits'

const plain = (spec: ChainSpec) => chainText(spec).replaceAll('\u2009', ' ')

const linked: ChainSpec = {
  ...startingChain,
  stages: startingChain.stages.map((stage) =>
    stage.kind === 'analog'
      ? {
          ...stage,
          source: {
            from: 'design',
            link: {
              designId: '00000000-0000-4000-8000-000000000001',
              version: 3,
              drawing: 'HMF-LP-001',
              title: 'Deck',
              spec: defaultSpec,
            },
          },
        }
      : stage,
  ),
}
const integrating: ChainSpec = {
  ...startingChain,
  stages: [
    ...startingChain.stages,
    {
      id: 's6',
      bypassed: false,
      kind: 'shape',
      filter: { type: 'integrate', times: 1, unit: 'mm/s', highPass: { cornerHz: 0.25, order: 2 } },
    },
  ],
}
const chains = { ...startingChains, linked, integrating }

describe('the sentence of a chain', () => {
  it('says what there is from the sensor to the stored sample', () => {
    expect(plain(startingChain)).toBe(
      'From a 1 V/g accelerometer through Butterworth order 4 at 160 Hz into 16 bits at 2 kHz, down by 4 and 2, kept from 0.5 to 90 Hz.',
    )
  })
  it('puts a unit that is a quotient in brackets', () => {
    const stages = startingChain.stages.map((stage) =>
      stage.kind === 'sensor' ? { ...stage, unit: 'm/s²' as const } : stage,
    )
    expect(plain({ ...startingChain, stages })).toContain('From a 1 V/(m/s²) accelerometer')
  })
  it('names the version that a stage is tied to', () => {
    expect(plain(linked)).toContain(' through HMF-LP-001 version 3 into 16 bits')
  })
  it('says what it integrates to, and from where', () => {
    expect(plain(integrating)).toContain('down by 4 and 2, integrated to mm/s above 0.25 Hz, kept')
  })
  it('says which stages are bypassed', () => {
    const stages = startingChain.stages.map((stage) => (stage.id === 's4' ? { ...stage, bypassed: true } : stage))
    expect(plain({ ...startingChain, stages })).toContain('down by 4 (bypassed) and 2,')
  })
  it('keeps the unit where a bare number would be read as another', () => {
    expect(plain({ ...startingChain, kept: { fromHz: 10, toHz: 1000 } })).toContain('kept from 10 Hz to 1 kHz')
  })
})

describe.each(Object.entries(chains))('every number of the %s chain', (_, spec) => {
  const quantities = chainStatementParts(spec).flatMap((part) => (part.kind === 'quantity' ? [part] : []))

  it('stands at the path that it is keyed by, and is read back as it is written', async () => {
    expect(quantities.length).toBeGreaterThan(2)
    for (const { key, value, text } of quantities) {
      expect(numberAt(spec, key)).toBe(value)
      expect(await parseChainField(spec, key, text, 1)).toEqual({ ok: true, value })
      expect(await parseChainField(spec, key, chainFieldText(spec, key, value), 1)).toEqual({ ok: true, value })
    }
  })
  it('can be set, and the schema takes what comes of it', () => {
    for (const { key, value } of quantities) {
      const isWhole = Number.isInteger(chainFieldOf(key)?.least) && !chainFieldOf(key)?.isOpen
      const next = withField(spec, key, isWhole && key !== 'kept.fromHz' ? value + 1 : value * 1.01)
      expect(numberAt(next, key)).not.toBe(value)
      expect(chainSpecSchema.safeParse(next).error).toBeUndefined()
      expect(chainText(next)).not.toBe(chainText(spec))
    }
  })
  it('makes a chain', () => expect(computeChain(spec).outputRateHz).toBeGreaterThan(0))
})

describe('a refused field', () => {
  it('belongs to the word that stands for it', () => {
    expect(chainWordOfField('stages.1.source.analog.edgesHz')).toBe('stages.1.source.analog.edgesHz.0')
    expect(chainWordOfField('stages.1.source.link.spec')).toBe('stages.1.source')
    expect(chainWordOfField('stages.4.filter.link.spec.how')).toBe('stages.4.filter')
    expect(chainWordOfField('kept.toHz')).toBe('kept.toHz')
  })
})
