import { renderToStaticMarkup } from 'react-dom/server'
import { describe, expect, it } from 'vitest'
import { buildCsv, errorWords, partWords, sectionName, sectionWords } from '@/components/chain/panels/build-rows'
import { curveAt, linesFrame, linesScene, spanOf } from '@/components/chain/panels/chart/lines-picture'
import { LinesPlot } from '@/components/chain/panels/chart/lines-plot'
import { delayShares } from '@/components/chain/panels/delay-panel'
import { compareAddress, HistoryPanel } from '@/components/chain/panels/history-panel'
import { noiseRows } from '@/components/chain/panels/noise-panel'
import { responseCurves, responseSpan } from '@/components/chain/panels/response-curves'
import { responsePlan, responseRows, responseViews } from '@/components/chain/panels/response-panel'
import {
  delayWords,
  highest,
  proofCells,
  proofColumns,
  proofVerdict,
  spectrumPlan,
  spectrumRows,
} from '@/components/chain/panels/proof-words'
import {
  answersFor,
  bestWords,
  missWords,
  notesOf,
  planCells,
  planColumns,
  rateCells,
  rateColumns,
  ratesPlan,
  standingWords,
  standsAs,
} from '@/components/chain/panels/trade-offs'
import { ShareBar } from '@/components/chain/panels/share-bar'
import { isOlder } from '@/components/chain/panels/tolerance-panel'
import {
  matchVerdicts,
  settingsWords,
  toleranceCsv,
  toleranceColumns,
  tolerancePlan,
  toleranceRows,
  toleranceViews,
} from '@/components/chain/panels/tolerance-curves'
import { WorkLine } from '@/components/chain/panels/work/work-line'
import { chainWork } from '@/components/chain/panels/work/chain-work'
import { daylight } from '@/components/plot/palette'
import { paintSvg } from '@/components/plot/paint-svg'
import {
  buildSheet,
  computeChain,
  noiseBudget,
  toleranceFrequencies,
  toleranceResult,
  toleranceShard,
  type ChainSpec,
  type ProofResult,
} from '@/dsp'
import type { ChainVersionSummary } from '@/lib/chains/types'
import { deckChain, deckSpec } from './chain-fixture'

const nothing = () => undefined
const plain = (text: string) => text.replace(/\u2009/g, ' ')

/** The deck's chain with a sensor of this name: the one text of a chain that a user types. */
const named = (name: string): ChainSpec => ({
  ...deckSpec,
  stages: deckSpec.stages.map((stage) => (stage.kind === 'sensor' ? { ...stage, name } : stage)),
})

const formula = '=HYPERLINK("x"),2'

describe('plots of the drawer', () => {
  it('paint every view of the response without a hole, limits of the sheet included', () => {
    const curves = responseCurves(deckChain)
    for (const { value } of responseViews) {
      const plan = responsePlan(value, curves, responseSpan(deckChain), [0.5, 90], deckSpec.sheet)
      for (const width of [358, 900]) {
        const svg = paintSvg(linesScene(plan, linesFrame(width, plan)), daylight, plan.title)
        expect(svg).not.toMatch(/NaN|Infinity/)
      }
    }
    const delay = responsePlan('delay', curves, responseSpan(deckChain), [0.5, 90], deckSpec.sheet)
    expect(delay.limits?.map(({ at }) => at)).toEqual([0.08])
  })

  it('removes the delay that leaves the least phase in the kept band', () => {
    const { frequenciesHz, departureDegrees, phaseDegrees, removedDelaySeconds } = responseCurves(deckChain)
    const squares = (extraSeconds: number) =>
      frequenciesHz.reduce((sum, hz, n) => {
        if (hz < 0.5 || hz > 90) return sum
        const width = (frequenciesHz[n + 1] ?? hz) - (frequenciesHz[n - 1] ?? hz)
        return sum + width * ((phaseDegrees[n] ?? 0) + 360 * hz * (removedDelaySeconds + extraSeconds)) ** 2
      }, 0)
    expect(departureDegrees[100]).toBeCloseTo(
      (phaseDegrees[100] ?? 0) + 360 * (frequenciesHz[100] ?? 0) * removedDelaySeconds,
      9,
    )
    for (const extra of [-2e-4, -5e-5, 5e-5, 2e-4]) expect(squares(extra)).toBeGreaterThan(squares(0))
  })

  it('read between points, and nowhere else', () => {
    const curve = { x: Float64Array.of(1, 2, 4), y: Float64Array.of(10, 20, 40) }
    expect(curveAt(curve, 1)).toBe(10)
    expect(curveAt(curve, 3)).toBe(30)
    expect(curveAt(curve, 4)).toBe(40)
    expect(curveAt(curve, 5)).toBeNaN()
    expect(spanOf([Float64Array.of(Number.NEGATIVE_INFINITY, 1, 3)], 1)).toEqual([1 - 0.12, 3 + 0.12])
  })

  it('have a slider to read by keys, named after the plot', () => {
    const plan = responsePlan('magnitude', responseCurves(deckChain), responseSpan(deckChain), [0.5, 90], [])
    const html = renderToStaticMarkup(<LinesPlot plan={plan} writeValue={String} />)
    expect(html).toContain('role="slider"')
    expect(html).toContain('aria-label="Crosshair on Magnitude, sensor to stored sample"')
    expect(html).toContain('aria-valuetext="not set"')
  })

  it('has rows with units for readers of the table', () => {
    const rows = responseRows(responseCurves(deckChain))
    expect(rows.length).toBeGreaterThan(50)
    expect(plain(rows.at(-1)?.[0] ?? '')).toBe('125 Hz')
    expect(plain(rows[0]?.[1] ?? '')).toMatch(/dB$/)
  })
})

describe('where the delay is spent', () => {
  it('is told stage by stage, and adds up', () => {
    const shares = delayShares(deckChain)
    expect(shares.map(({ name }) => name)).toEqual([
      'Sensor, accelerometer',
      'Analog, Butterworth 4',
      'Converter, 16 bits',
      'Down by 4, Kaiser 31 taps',
      'Down by 2, Kaiser 47 taps',
    ])
    // Linear phase: half the length less one, at the rate the filter runs at.
    expect(shares[3]?.amount).toBeCloseTo(15 / 2000, 9)
    expect(shares[4]?.amount).toBeCloseTo(23 / 500, 9)
    const html = renderToStaticMarkup(<ShareBar label="Delay by stage" shares={shares} />)
    const percents = [...html.matchAll(/width:([\d.]+)%/g)].map(([, percent]) => Number(percent))
    expect(percents.reduce((sum, percent) => sum + percent, 0)).toBeCloseTo(100, 6)
    expect(renderToStaticMarkup(<ShareBar label="none" shares={[]} />)).toBe('')
  })
})

describe('the noise budget', () => {
  it('names each part in the sensor’s unit, and the whole is their root of squares', () => {
    const budget = noiseBudget(deckChain)
    const rows = noiseRows(deckChain, budget)
    expect(rows).toHaveLength(budget.parts.length + 1)
    expect(rows[0]?.cells[0]).toBe('Converter, 16 bits')
    expect(plain(rows.at(-1)?.cells.at(-1) ?? '')).toMatch(/ [mµn]?g$/)
    const squares = budget.parts.reduce((sum, { rms }) => sum + rms * rms, 0)
    expect(Math.sqrt(squares)).toBeCloseTo(budget.rms, 12)
  })
})

describe('a tolerance run', () => {
  const frequenciesHz = toleranceFrequencies(deckChain)
  const result = toleranceResult(deckChain, frequenciesHz, [toleranceShard(deckChain, frequenciesHz, 0, 200)])

  it('is the same in two halves as in one', async () => {
    const told: number[] = []
    const tell = (progress: number) => told.push(progress)
    const halves = await Promise.all([
      chainWork.channels(deckSpec, 0, 70, tell),
      chainWork.channels(deckSpec, 70, 200, tell),
    ])
    const shards = halves.flatMap((half) => ('value' in half ? half.value : []))
    const together = await chainWork.spread(deckSpec, shards)
    expect(together).toEqual({ value: result })
    expect(told.every((progress) => progress >= 0 && progress <= 1)).toBe(true)
  })

  it('answers with the refusal’s sentence where there is no chain', async () => {
    const broken = { ...deckSpec, kept: { fromHz: 0.5, toHz: 400 } }
    const answer = await chainWork.channels(broken, 0, 100, nothing)
    expect(answer).toHaveProperty('refused')
    expect('refused' in answer && answer.refused).toMatch(/\.$/)
  })

  it('is drawn in every view, with the sheet’s limit', () => {
    for (const { value } of toleranceViews) {
      const plan = tolerancePlan(value, result, deckSpec, false)
      expect(paintSvg(linesScene(plan, linesFrame(800, plan)), daylight, plan.title)).not.toMatch(/NaN|Infinity/)
      const limits = { 'phase-match': [0.5], 'gain-match': [0.05], phase: [], magnitude: [] }[value]
      expect((plan.limits ?? []).map(({ at }) => at)).toEqual(limits)
    }
    expect(plain(tolerancePlan('phase-match', result, deckSpec, false).title)).toBe(
      'Phase between channels, 200 channels at 1 % parts, seed 7: median, 95 % and most',
    )
    expect(plain(settingsWords({ ...deckSpec.tolerance, spread: { of: 'sections', f0Percent: 1, qPercent: 2 } }))).toBe(
      '200 channels at f0 within 1 %, Q within 2 %, seed 7',
    )
  })

  it('is held against each channel-match line at the 95th percentile', () => {
    const [verdict] = matchVerdicts(result, deckSpec)
    const within = (values: Float64Array) =>
      Math.max(...values.filter((_, n) => (frequenciesHz[n] ?? Number.POSITIVE_INFINITY) <= 50))
    const isMet = within(result.phaseMatchDegrees.p95) <= 0.5 && within(result.gainMatchDb.p95) <= 0.05
    expect(verdict?.met).toBe(isMet)
    const strict = {
      ...deckSpec,
      sheet: [{ kind: 'channel-match', toHz: 50, withinDegrees: 1e-4, withinDb: 1 }],
    } as const
    expect(matchVerdicts(result, strict)[0]?.met).toBe(false)
    expect(matchVerdicts(result, { ...deckSpec, sheet: [] })).toEqual([])
  })

  it('says when it is of an older chain, and stays when only the sheet changes', () => {
    const held = { spec: deckSpec, result }
    expect(isOlder(held, deckSpec)).toBe(false)
    expect(isOlder(held, { ...deckSpec, sheet: [] })).toBe(false)
    expect(isOlder(held, { ...deckSpec, tolerance: { ...deckSpec.tolerance, seed: 8 } })).toBe(true)
    expect(isOlder(held, { ...deckSpec, kept: { fromHz: 0.5, toHz: 80 } })).toBe(true)
  })

  it('is handed out as CSV: every frequency, bare numbers, guarded names', () => {
    const lines = toleranceCsv(result, named(formula)).split('\r\n')
    expect(lines[0]).toBe(`sensor,"'=HYPERLINK(""x""),2"`)
    const heading = lines.findIndex((line) => line.startsWith('frequency in Hz,'))
    const rows = lines.slice(heading + 1, -1)
    expect(rows).toHaveLength(frequenciesHz.length)
    for (const row of rows) {
      const cells = row.split(',').map(Number)
      expect(cells).toHaveLength(13)
      expect(cells.every(Number.isFinite)).toBe(true)
    }
    expect(toleranceRows(result)[0]).toHaveLength(toleranceColumns(result).length)
  })
})

describe('the build sheet', () => {
  const sections = buildSheet(deckChain, { series: 'E96' })

  it('names sections and parts with their values', () => {
    expect(sections).toHaveLength(3)
    expect(sections.map((section) => sectionName(deckChain, section, sections))).toEqual([
      // The input's coupling is a high-pass of first order.
      'Sensor, accelerometer',
      'Analog, Butterworth 4, section 1',
      'Analog, Butterworth 4, section 2',
    ])
    expect(plain(sectionWords(sections[1]!))).toMatch(/^second order low-pass, f0 160 Hz, Q (0\.5412|1\.307)$/)
    const part = sections[1]!.circuits[0]!.parts[0]!
    expect(plain(partWords({ ...part, ohms: 12_100 }))).toBe(`${part.name} 12.1 kΩ, ${part.place}`)
    expect(plain(errorWords(0.123))).toBe('+0.12 %')
    expect(plain(errorWords(-0.4))).toBe('−0.40 %')
    expect(errorWords(null)).toBe('—')
  })

  it('is handed out as CSV, a part a row, with its warning and guarded text', () => {
    const lines = buildCsv(computeChain(named(formula)), sections).split('\r\n')
    expect(lines[0]).toContain("'=HYPERLINK")
    expect(lines[1]).toBe('to be confirmed by a circuit designer')
    const parts = sections.flatMap(({ circuits }) => circuits.flatMap((circuit) => circuit.parts))
    const without = sections.filter(({ circuits }) => circuits.length === 0)
    expect(parts.length).toBeGreaterThan(0)
    expect(lines.slice(3, -1)).toHaveLength(parts.length + without.length)
    expect(lines.slice(3, -1).every((line) => !/^[=+@-]/.test(line))).toBe(true)
  })

  it('gives the reason where no circuit is known', () => {
    const [first] = sections
    const without = [{ ...first!, circuits: [], reason: 'Its Q is above 10.' }]
    expect(buildCsv(deckChain, without)).toContain('none,,,,,,,,,Its Q is above 10.')
  })
})

describe('the advisor', () => {
  it('offers orders with their rates, the best marked, each with a chain that can be taken', async () => {
    const told: number[] = []
    const answer = await chainWork.rates(deckSpec, (progress) => told.push(progress))
    const options = 'value' in answer ? answer.value : []
    expect(options.length).toBeGreaterThan(3)
    for (const option of options) {
      expect(rateCells(option)).toHaveLength(rateColumns.length)
      expect(computeChain(option.spec).converterRateHz).toBe(option.converterRateHz)
    }
    expect(told.every((progress) => progress >= 0 && progress <= 1)).toBe(true)
    expect(bestWords(options)).toContain(options.some(({ missed }) => missed.length === 0) ? 'meets' : 'here')
    const plan = ratesPlan(options, false)!
    expect(plan.curves.map(({ name, x }) => [name, x.length])).toEqual([
      ['every order', options.length],
      ['best', options.filter(({ isBest }) => isBest).length],
    ])
    expect(paintSvg(linesScene(plan, linesFrame(600, plan)), daylight, plan.title)).not.toMatch(/NaN|Infinity/)
    expect(ratesPlan(options.slice(0, 1), false)).toBeNull()
  })

  it('counts only what meets the whole sheet, and says of the others what they miss', () => {
    const requirement = { kind: 'phase', fromHz: 1, toHz: 90, withinDegrees: 5 } as const
    const phase = { requirement, value: 46, limit: 5, unit: '°', margin: -41, met: false, worstHz: 90 } as const
    const floor = { kind: 'alias-floor', toHz: 90, atLeastDb: 80 } as const
    const flat = { kind: 'flatness', fromHz: 1, toHz: 90, withinDb: 0.1 } as const
    const spec = { ...deckSpec, sheet: [flat, floor, requirement] }
    const meeting = { missed: [], assumed: [], spec }
    const missing = { missed: [phase], assumed: [], spec }
    const current = {
      ...meeting,
      meets: false,
      missed: [{ ...phase, requirement: floor, unit: 'dB', margin: -2.5 }],
    } as const
    expect(missWords(meeting)).toBeNull()
    expect(missWords(missing)).toBe('misses phase linearity by 41°')
    expect(plain(missWords(current) ?? '')).toBe('misses alias floor by 2.5 dB')
    expect(standingWords([missing, missing], 'order')).toBe(
      'none of 2 orders meets the whole sheet; all keep flatness and alias floor',
    )
    expect(standingWords([missing, current], 'plan')).toBe(
      'none of 2 plans meets the whole sheet; 1 keeps flatness and alias floor',
    )
    expect(standingWords([meeting, missing, missing], 'plan')).toBe(
      '1 of 3 plans meets the sheet; all keep flatness and alias floor',
    )
    expect(standingWords([meeting, meeting], 'plan')).toBe('all 2 plans meet the sheet')
    const open = { ...meeting, spec: deckSpec, assumed: ['±0.5 dB'] }
    expect(standingWords([open, open], 'plan')).toBe(
      'all 2 plans meet the sheet as far as it can be judged; assumed beside it: ±0.5 dB over the kept band',
    )
    const bare = { ...meeting, spec: { ...deckSpec, sheet: [] }, assumed: ['±0.5 dB', 'images 80 dB down'] }
    expect(standingWords([bare, { ...bare, meets: false }], 'plan')).toBe(
      'the sheet asks for nothing; 1 of 2 plans keeps what was assumed: ±0.5 dB and images 80 dB down over the kept band',
    )
    expect(missWords({ ...bare, meets: false })).toBe('misses what was assumed: ±0.5 dB and images 80 dB down')
    expect(standingWords([], 'plan')).toBe('no plan was found')
  })

  it('offers plans by name, and answers for the chain asked about and for what is taken from it', () => {
    const option = {
      factors: [4, 2],
      filters: ['cic', 'half-band'],
      multipliesPerStoredSample: 15,
      words: 40,
      aliasDb: 81.25,
      rippleDb: 0.1,
      delaySeconds: 0.04,
      isCurrent: true,
      meets: false,
      missed: [],
      assumed: [],
      notes: ['one', 'two'],
      spec: deckSpec,
    }
    expect(planCells(option).map(plain)).toEqual([
      '4 × 2',
      'Integrator–comb (CIC), Half-band',
      '15.0',
      '40',
      '81.3 dB down',
      '±0.100 dB',
      '40 ms',
    ])
    expect(planCells(option)).toHaveLength(planColumns.length)
    expect(notesOf([option, option])).toEqual(['one', 'two'])
    const taken = { ...deckSpec, stages: deckSpec.stages.slice(0, -1) }
    expect(answersFor(deckSpec, [], deckSpec)).toBe(true)
    expect(answersFor(deckSpec, [], taken)).toBe(false)
    expect(answersFor(deckSpec, [{ spec: taken }], { ...taken, interferers: [] })).toBe(true)
    expect(answersFor(deckSpec, [{ spec: taken }], { ...taken, sheet: [] })).toBe(false)
    expect(standsAs({ spec: taken }, deckSpec)).toBe(false)
  })
})

describe('the proof', () => {
  const result: ProofResult = {
    inputRateHz: 16_000,
    samplesIn: 65_536,
    samplesStored: 1024,
    lines: [
      {
        what: 'wanted',
        inputHz: 35,
        landsHz: 35,
        computedDb: -0.012,
        measuredDb: -0.013,
        boundDb: 0.02,
        comparison: 'within',
        agrees: true,
      },
    ],
    delay: { computedSeconds: 0.06, measuredSeconds: 0.06001, boundSeconds: 1e-4, agrees: true },
    spectrum: {
      frequenciesHz: Float64Array.of(0, 62.5, 125),
      measuredDensityDb: Float64Array.of(-100, -101, -99),
      computedDensityDb: Float64Array.of(-100, -100, Number.NEGATIVE_INFINITY),
    },
    notes: [],
    agrees: true,
  }

  it('puts lines and delay side by side with their bounds, and ends in a sentence', () => {
    expect(proofCells(result.lines[0]!).map(plain)).toEqual([
      'wanted',
      '35 Hz',
      '35 Hz',
      '−0.012 dB',
      '−0.013 dB',
      '−0.001 dB',
      '±0.020 dB',
      'agrees',
    ])
    expect(proofColumns).toHaveLength(8)
    expect(plain(delayWords(result))).toBe('Delay: computed 60 ms, measured 60.01 ms, bound ±100 µs: agrees.')
    expect(proofVerdict(result)).toMatch(/1024 stored: 1 line agrees with what is computed, within its bound/)
    const wrong = { ...result, agrees: false, lines: [{ ...result.lines[0]!, agrees: false }] }
    expect(proofVerdict(wrong)).toContain('1 of 1 lines lies outside the bound. Don’t rely on')
    const late = { ...result, agrees: false, delay: { ...result.delay, agrees: false } }
    expect(proofVerdict(late)).toContain('the delay lies outside its bound. Don’t rely on')
  })

  it('counts what lies in the noise apart, and does not call it agreement', () => {
    const [wanted] = result.lines
    const deep = {
      ...wanted!,
      what: 'image from the 8th strip',
      computedDb: -300,
      measuredDb: -160,
      boundDb: 155,
      comparison: 'not above',
    } as const
    expect(proofCells(deep).map(plain).slice(3)).toEqual([
      'below −300 dB',
      '−160.000 dB',
      '—',
      'up to −145.000 dB',
      'below what can be measured',
    ])
    expect(proofCells({ ...deep, agrees: false }).at(-1)).toBe('does not agree')
    const lines = [...Array.from({ length: 23 }, () => wanted!), ...Array.from({ length: 8 }, () => deep)]
    expect(proofVerdict({ ...result, lines })).toMatch(
      /: 23 lines agree; 8 lie below the noise of the converter and prove nothing more than that they are not above it\. No image could be measured\.$/,
    )
    const seen = { ...wanted!, what: 'image from the 2nd strip' }
    expect(proofVerdict({ ...result, lines: [wanted!, seen, deep] })).toMatch(
      /: 2 lines agree; 1 lies below the noise of the converter and proves nothing more than that it is not above it\.$/,
    )
    expect(proofVerdict({ ...result, agrees: false })).toContain('nothing stood out of the noise')
  })

  it('draws what was measured and computed, exact zeros left out', () => {
    const plan = spectrumPlan(result, false)
    expect(plan.curves.map(({ name }) => name)).toEqual(['measured', 'computed'])
    expect(paintSvg(linesScene(plan, linesFrame(600, plan)), daylight, plan.title)).not.toMatch(/NaN|Infinity/)
    expect(spectrumRows(result)).toHaveLength(3)
    // Of many points the highest of each stretch is drawn, where it stands: no line gets lost.
    const x = Float64Array.from({ length: 1000 }, (_, n) => n)
    const y = Float64Array.from(x, (n) => (n === 501 ? 5 : -n / 1000))
    const drawn = highest(x, y)
    expect(drawn.x.length).toBe(250)
    expect(drawn.x[125]).toBe(501)
    expect(Math.max(...drawn.y)).toBe(5)
  })
})

describe('heavy work', () => {
  const idle = { question: null, state: 'idle', progress: 0, value: null, refusal: null, seconds: 0 } as const
  const line = (work: Parameters<typeof WorkLine>[0]['work']) =>
    renderToStaticMarkup(
      <WorkLine
        work={work}
        what="The run"
        startWords="Run"
        againWords="Run again"
        stopWords="Stop"
        onStart={nothing}
        onStop={nothing}
      />,
    )

  it('is started, stopped and told of', () => {
    expect(line(idle)).toContain('>Run</button>')
    const working = line({ ...idle, state: 'working', progress: 0.42 })
    expect(working).toContain('>Stop</button>')
    expect(working).toMatch(/<progress[^>]*aria-label="The run, done so far"[^>]*value="42"/)
    expect(line({ ...idle, state: 'stopped' })).toContain('Stopped; nothing was kept.')
    expect(line({ ...idle, state: 'refused', refusal: 'Too wide.' })).toMatch(/role="alert"[^>]*>Too wide\./)
    expect(line({ ...idle, state: 'failed' })).toContain('The run broke off in this browser')
  })
})

describe('the versions of a chain', () => {
  const version = (number: number): ChainVersionSummary => ({
    number,
    note: `note ${number} <b>`,
    savedAt: '2026-12-01T09:42:00.000Z',
    savedBy: 'demo designer',
    state: 'draft',
    parentNumber: number === 1 ? null : number - 1,
    engineVersion: '1',
    checksum: 'ab'.repeat(32),
    spec: number === 2 ? deckSpec : { ...deckSpec, sheet: [] },
    figures: {
      outputRateHz: 250,
      delaySeconds: 0.0612,
      worstAliasDb: -61.4,
      effectiveBits: 14.6,
      multipliesPerStoredSample: 109,
      met: 4,
      missed: 1,
      unjudged: 0,
      match: [],
    },
  })
  const history = (versions: readonly ChainVersionSummary[], readOnly = false) =>
    renderToStaticMarkup(
      <HistoryPanel chainId="c1" versions={versions} spec={deckSpec} propose={() => true} readOnly={readOnly} />,
    )

  it('are listed with note, author and figures, and can be compared, brought back and handed over', () => {
    const html = history([version(2), version(1)])
    expect(html).toContain('note 2 &lt;b&gt;')
    expect(plain(html)).toContain('14.6')
    expect(html).toContain('4 of 5 met')
    expect(html).toContain('The draft equals it')
    expect(html.match(/Bring back into the draft/g)).toHaveLength(1)
    expect(html).toContain('href="/chains/c1/compare?left=1&amp;right=2"')
    expect(html).toContain('href="/chains/c1/versions/2"')
    expect(compareAddress('c1', 5, 3)).toBe('/chains/c1/compare?left=3&right=5')
  })

  it('can only be looked at by readers, and say what comes first when there are none', () => {
    expect(history([version(2), version(1)], true)).not.toContain('Bring back')
    expect(history([])).toContain('No version yet')
  })
})
