import { renderToStaticMarkup } from 'react-dom/server'
import { describe, expect, it } from 'vitest'
import { chainDesk } from '@/components/chain/chain-desk'
import { computedChain } from '@/components/chain/computed-chain'
import { Interferers, isAboveFloor, landedLevel, landingWords } from '@/components/chain/interferers'
import { chainJudgements, savedTolerance, withOlderRun } from '@/components/chain/judge'
import { ChainSheet } from '@/components/chain/sheet'
import { stageFacts } from '@/components/chain/stage-facts'
import { StageDesk } from '@/components/chain/stage-desk'
import { ChainStatement } from '@/components/chain/statement'
import { chainOptions } from '@/components/chain/statement-options'
import { createChainStore, toleranceFor } from '@/components/chain/store'
import { Strip } from '@/components/chain/strip'
import { DesignError, interfererLandings, type ChainSpec, type ComputedChain } from '@/dsp'
import { withAnalogLink, withBypass } from '@/lib/chains/edits'
import { withPartAt } from '@/lib/chains/fields'
import { startingChain } from '@/lib/chains/stage-starts'
import type { LinkableDesign } from '@/lib/chains/types'
import { defaultSpec } from '@/lib/designs/edits'

const nothing = () => undefined
const wordsOf = (html: string) =>
  html
    .replace(/<[^>]*>/g, ' ')
    .replaceAll('\u2009', ' ')
    .replace(/\s+/g, ' ')
const made = (spec: ChainSpec): ComputedChain => {
  const chain = computedChain(spec)
  if (chain instanceof DesignError) throw chain
  return chain
}
const designId = '00000000-0000-4000-8000-000000000001'
const version = (number: number): LinkableDesign => ({
  hasAnalog: true,
  link: { designId, version: number, drawing: 'HMF-LP-001', title: 'Deck', spec: defaultSpec },
})

describe('the strip', () => {
  const strip = (spec: ChainSpec, chosen: string | null = null, chain: ComputedChain | null = made(spec)) =>
    renderToStaticMarkup(
      <Strip
        spec={spec}
        chain={chain}
        chosen={chosen}
        desk={chainDesk(createChainStore(spec))}
        readOnly={false}
        onChoose={nothing}
      />,
    )
  it('has a cell for each stage, in signal order, and one for what is stored', () => {
    const html = strip(startingChain, 's4')
    expect([...html.matchAll(/data-stage="(s\d)"/g)].map(([, id]) => id)).toEqual(['s1', 's2', 's3', 's4', 's5'])
    expect(html.match(/aria-pressed="true"/g)).toHaveLength(1)
    const words = wordsOf(html)
    expect(words).toContain('Down by 4 Kaiser 34 taps → 500 Hz')
    expect(words).toContain('Stored 250 Hz kept to 90 Hz')
  })
  it('says which stage is bypassed, and draws each that is computed', () => {
    const bypassed = withBypass(startingChain, 3, true)
    expect(bypassed.ok && wordsOf(strip(bypassed.spec))).toContain('Down by 4 · bypassed')
    expect(strip(startingChain).match(/<svg/g)?.length).toBeGreaterThanOrEqual(5)
    expect(strip(startingChain, null, null)).not.toContain('<svg')
  })
  it('marks a stage that is tied to an older version, and opens it', () => {
    const spec = withAnalogLink(startingChain, 1, version(1).link)
    const at = (newest: number) =>
      wordsOf(
        renderToStaticMarkup(
          <Strip
            spec={spec}
            chain={null}
            chosen={null}
            desk={chainDesk(createChainStore(spec))}
            linkable={[version(newest)]}
            readOnly={false}
            onChoose={nothing}
          />,
        ),
      )
    expect(at(2)).toContain('newer version')
    expect(at(2)).toContain('HMF-LP-001 version 1; version 2 is newer')
    expect(at(2)).toContain('Open stage 2')
    expect(at(1)).not.toContain('newer')
  })
  it('tells the figures of every stage', () => {
    const facts = startingChain.stages.map((_, index) =>
      stageFacts(startingChain, index, made(startingChain).stages[index] ?? null),
    )
    expect(facts[0]).toContain('1\u2009V/g')
    expect(facts[0]).toContain('from 0.1\u2009Hz')
    expect(facts[2]).toEqual(['2\u2009kHz', '±5\u2009V'])
  })
})

describe('a run that a version was saved with', () => {
  const line = { kind: 'channel-match', toHz: 50, withinDegrees: 0.5, withinDb: 0.05 } as const
  const spec: ChainSpec = { ...startingChain, sheet: [line] }
  const match = [0, 100].map((hz) => ({ hz, gainDb: 0.001, phaseDegrees: hz / 500 }))
  it('judges the channel match as it was judged then', () => {
    const saved = savedTolerance(spec, { match })
    const result = chainJudgements(spec, toleranceFor(spec, saved)).get(line)
    // A fifth of a degree at 100 Hz is a tenth at 50 Hz, between straight lines.
    expect(result).toMatchObject({ met: true, unit: '°' })
    expect(result?.value).toBeCloseTo(0.1, 12)
    expect(savedTolerance(spec, { match: [] })).toBeNull()
  })
  it('is said to be of an older state once the chain has gone on', () => {
    const open = chainJudgements({ ...spec }, null)
    expect(open.get(line)?.reason).toContain('No tolerance run')
    expect(withOlderRun(open).get(line)?.reason).toContain('older state')
  })
})

describe('the desk', () => {
  const desk = (spec: ChainSpec, index: number, linkable: readonly LinkableDesign[] = [], readOnly = false) =>
    renderToStaticMarkup(
      <StageDesk
        spec={spec}
        index={index}
        desk={chainDesk(createChainStore(spec))}
        linkable={linkable}
        readOnly={readOnly}
        onClose={nothing}
      />,
    )
  it('shows every field of a decimation', () => {
    const html = desk(startingChain, 3)
    for (const label of ['factor', 'taps', 'pass band to', 'stop band from', 'stop band down'])
      expect(html).toContain(`aria-label="Stage 4, ${label}"`)
  })
  it('says when a newer version of a tied design is there, and only then', () => {
    const tied = withAnalogLink(startingChain, 1, version(2).link)
    expect(wordsOf(desk(tied, 1, [version(3)]))).toContain('Version 3 is newer. Move to version 3')
    expect(wordsOf(desk(tied, 1, [version(2)]))).not.toContain('is newer')
    expect(wordsOf(desk(tied, 1, [version(3)], true))).not.toContain('Move to')
  })
  it('leaves a tied design at its pinned version among the choices', () => {
    const tied = withAnalogLink(startingChain, 1, version(2).link)
    const { current, options } = chainOptions(tied, 'stages.1.source', [version(3)])
    expect(current).toBe(designId)
    expect(options.map(({ label }) => label)).toEqual(['a filter of its own', 'HMF-LP-001 version 2, Deck'])
    expect(options[0]?.apply(tied).stages[1]).toMatchObject({ source: { from: 'here' } })
  })
})

describe('the statement of a chain', () => {
  it('is a heading of editable words, and plain text for who may not edit', () => {
    const store = createChainStore(startingChain)
    const editable = renderToStaticMarkup(<ChainStatement store={store} linkable={[]} readOnly={false} />)
    expect(editable).toContain('aria-label="Kept to"')
    expect(editable).toContain('aria-label="Stage 2, family: Butterworth"')
    expect(editable).toContain('value="accelerometer"')
  })
  it('carries no number that readers of the page don’t know', () => {
    const quiet = withPartAt(startingChain, 'stages.2.resolution', { by: 'noise', voltsPerRootHz: 2e-7 })
    const html = renderToStaticMarkup(<ChainStatement store={createChainStore(quiet)} linkable={[]} readOnly={false} />)
    expect(html).toContain('aria-valuetext="200\u2009nV/√Hz"')
    expect(html).not.toContain('e-7')
  })
})

describe('the sheet of a chain', () => {
  const sheet = (spec: ChainSpec, readOnly = false) =>
    wordsOf(
      renderToStaticMarkup(
        <ChainSheet
          spec={spec}
          judgements={chainJudgements(spec, null)}
          desk={chainDesk(createChainStore(spec))}
          readOnly={readOnly}
          onTrace={nothing}
          onRunTolerance={nothing}
        />,
      ),
    )
  it('says each line, what the chain comes to and by how much', () => {
    const words = sheet(startingChain, true)
    expect(words).toContain('Alias floor below 90 Hz , 80 dB down 82.6 dB met by 2.57 dB')
    expect(words).toContain('Keeps 0.5 Hz to 60 Hz within 0.5 dB')
  })
  it('sends a channel match to the tolerance run until there is one', () => {
    const spec: ChainSpec = {
      ...startingChain,
      sheet: [{ kind: 'channel-match', toHz: 50, withinDegrees: 0.5, withinDb: 0.1 }],
    }
    expect(sheet(spec)).toContain('not judged')
    expect(sheet(spec)).toContain('To the tolerance run')
  })
  it('shows the next step where nothing is required', () => {
    expect(sheet({ ...startingChain, sheet: [] })).toContain('Add a line')
  })
})

describe('interferers', () => {
  const spec: ChainSpec = {
    ...startingChain,
    interferers: [
      { kind: 'tone', name: 'inside', hz: 40, level: 0.1 },
      { kind: 'tone', name: 'folds', hz: 163, level: 0.1 },
      { kind: 'band', name: 'far', fromHz: 700, toHz: 720, level: 0.1 },
    ],
  }
  it('are felt where they lie in the kept band above the alias floor', () => {
    const felt = interfererLandings(made(spec)).map((landing) => isAboveFloor(landing, spec))
    expect(felt[0]).toBe(true)
    expect(felt[2]).toBe(false)
    const landing = interfererLandings(made(spec))[1]
    expect(landing?.landsHz).toBeCloseTo(87, 9)
    expect(landing && isAboveFloor(landing, { ...spec, sheet: [] })).toBe(false)
  })
  it('say of a band how much of it lands inside, and judge it by that part', () => {
    const wide: ChainSpec = {
      ...spec,
      interferers: [{ kind: 'band', name: 'wide', fromHz: 50, toHz: 350, level: 0.1 }],
    }
    const [landing] = interfererLandings(made(wide))
    expect(landing!.keptShare).toBeGreaterThan(0)
    expect(landing!.keptShare).toBeLessThan(1)
    expect(landing!.landsHz).toBeLessThanOrEqual(wide.kept.toHz)
    expect(isAboveFloor(landing!, wide)).toBe(true)
    expect(landingWords(landing!, true)).toMatch(
      /^the \d+\s% of it that lands inside the kept band: .* at its worst, above the alias floor$/,
    )
    expect(landingWords({ ...landing!, keptShare: 0, levelDb: -90 }, false)).toBe('90.0\u2009dB down')
    const html = renderToStaticMarkup(
      <Interferers
        spec={wide}
        chain={made(wide)}
        desk={chainDesk(createChainStore(wide))}
        readOnly={false}
        onTrace={nothing}
      />,
    )
    expect(html).toContain('Root mean square at the sensor over the whole band, evenly spread')
  })
  it('show no digits of what is lost far below the noise', () => {
    expect(landedLevel(8.29e-27, 1e-6, 'mm/s')).toBe('below the noise')
    expect(landedLevel(0, 1e-6, 'g')).toBe('below the noise')
    expect(landedLevel(2e-12, 1e-6, 'g')).not.toBe('below the noise')
    expect(landedLevel(0.05, 1e-6, 'g')).toBe('50\u2009mg')
  })
  it('are a list of editable names, frequencies and levels', () => {
    const html = renderToStaticMarkup(
      <Interferers
        spec={spec}
        chain={made(spec)}
        desk={chainDesk(createChainStore(spec))}
        readOnly={false}
        onTrace={nothing}
      />,
    )
    expect(html).toContain('aria-label="Interferer 2, frequency"')
    expect(html).toContain('aria-label="Interferer 3, to"')
    expect(html).toContain('value="100\u2009mg"')
  })
})
