import * as fc from 'fast-check'
import { renderToStaticMarkup } from 'react-dom/server'
import { describe, expect, it } from 'vitest'
import {
  aliasFloors,
  drawnStrips,
  endsHz,
  floorDbOf,
  foldFrame,
  gatheredStrips,
  inputOf,
  topDbOf,
} from '@/components/chain/fold-chart/layout'
import { foldFrequencies } from '@/components/chain/fold-chart/fold-chart'
import { foldExport, foldScene } from '@/components/chain/fold-chart/picture'
import { stripRows } from '@/components/chain/fold-chart/tables'
import { TraceGround, TracePicture } from '@/components/chain/fold-chart/trace-ground'
import { tracedAt, tracedByKey, traceRows } from '@/components/chain/fold-chart/trace'
import {
  boundWords,
  downWords,
  foldMaker,
  ordinal,
  spokenTrace,
  stageNameOf,
  stripWords,
  traceWords,
  weakFoldSentence,
} from '@/components/chain/fold-chart/words'
import { daylight } from '@/components/plot/palette'
import { paintSvg } from '@/components/plot/paint-svg'
import type { Mark, Scene } from '@/components/plot/scene'
import { foldChart, foldPaths, type FoldChart, type FoldStrip } from '@/dsp'
import { deckChain, deckSpec } from './chain-fixture'

const outputHz = foldFrequencies(deckChain.outputRateHz)
const deckChart = foldChart(deckChain, outputHz)
const floors = aliasFloors(deckSpec)

function deckFrame(width: number) {
  const drawn = drawnStrips(deckChart, 8)
  return foldFrame(width, deckChain.outputRateHz, drawn, {
    topDb: topDbOf(drawn),
    floorDb: floorDbOf(deckChart, floors),
  })
}

/** A strip with one level all over the kept band. */
const strip = (number: number, levelDb: number): FoldStrip => ({
  strip: number,
  fromHz: number * 100,
  toHz: (number + 1) * 100,
  mirrored: number % 2 === 1,
  foldsAtStageId: number === 0 ? null : 'adc',
  levelDb: Float64Array.of(levelDb, levelDb),
  worst: number === 0 ? null : { levelDb, outputHz: 50, inputHz: number * 100 + 50 },
})

function chartOf(levels: readonly number[]): FoldChart {
  const strips = [0, ...levels].map((levelDb, number) => strip(number, levelDb))
  const weakStrip = 1 + levels.indexOf(Math.max(...levels))
  return { outputHz: Float64Array.of(0, 100), strips, weakStrip, lookedUpToHz: 1e4, beyondAtMostDb: -200 }
}

const texts = ({ marks }: Scene): readonly string[] =>
  marks.flatMap((mark: Mark) => (mark.kind === 'text' ? [mark.text.replace(/\u2009/g, ' ')] : []))

describe('the folded axis on the page', () => {
  it('runs every other strip backwards, so that one x is one output frequency in all of them', () => {
    const { rows, x, left, right } = deckFrame(900)
    for (const row of rows) {
      const { leftHz, rightHz } = endsHz(row.strip)
      expect([leftHz, rightHz].sort((a, b) => a - b)).toEqual([row.strip.fromHz, row.strip.toHz])
      expect(inputOf(row.strip, x.toValue(left))).toBeCloseTo(leftHz, 9)
      expect(inputOf(row.strip, x.toValue(right))).toBeCloseTo(rightHz, 9)
    }
    // 35 Hz: the images of a 250 Hz rate are 250k ± 35.
    expect(rows.map((row) => inputOf(row.strip, 35))).toEqual([35, 215, 285, 465, 535, 715, 785, 965])
  })

  it('joins neighbours where they meet: each fold ends one strip and begins the next on the same side', () => {
    const { rows } = deckFrame(900)
    rows.slice(1).forEach((row, index) => {
      const above = rows[index]!
      expect(row.top).toBeGreaterThan(above.bottom)
      const side = above.strip.mirrored ? 'leftHz' : 'rightHz'
      expect(endsHz(row.strip)[side]).toBeCloseTo(endsHz(above.strip)[side], 9)
    })
  })

  it('agrees with the paths: every image of any output frequency lies where its strip says', () => {
    fc.assert(
      fc.property(fc.double({ min: 0.5, max: 124.5, noNaN: true }), (hz) => {
        for (const path of foldPaths(deckChain, hz, 2000)) {
          const own = deckChart.strips[path.strip]!
          expect(path.inputHz).toBeCloseTo(inputOf(own, hz), 6)
          expect(path.mirrored).toBe(own.mirrored)
        }
      }),
      { numRuns: 20 },
    )
  })

  it('names the stage that folds: the first in signal order whose half rate is met', () => {
    expect([125, 250, 375, 500, 1000].map((hz) => foldMaker(deckChain, hz))).toEqual([
      'Down by 2',
      'Down by 4',
      'Down by 2',
      'Down by 4',
      'Converter',
    ])
    expect(foldMaker(deckChain, 130)).toBeNull()
  })

  it('fits any width: nothing is drawn outside, and narrow pages name the stage inside the strip', () => {
    for (const width of [358, 640, 1200]) {
      const frame = deckFrame(width)
      expect(frame.left).toBeGreaterThan(0)
      expect(frame.right).toBeLessThan(width)
      const words = texts(foldScene({ chain: deckChain, chart: deckChart, floors }, frame))
      expect(words).toContain(width < 600 ? '125 Hz · Down by 2' : 'Down by 2')
      expect(words).toContain(width < 600 ? '125 Hz' : 'folds at')
    }
  })
})

describe('which strips are drawn', () => {
  it('takes the first ones, and the weak one wherever it lies', () => {
    const near = chartOf([-90, -100, -110])
    expect(drawnStrips(near, 3).map(({ strip: number }) => number)).toEqual([0, 1, 2])
    const far = chartOf([-120, -130, -125, -140, -135, -70, -150])
    expect(drawnStrips(far, 3).map(({ strip: number }) => number)).toEqual([0, 1, 2, 6])
    const frame = foldFrame(900, 200, drawnStrips(far, 3), { topDb: 0, floorDb: -120 })
    expect(frame.rows.map(({ isJoined }) => isJoined)).toEqual([false, true, true, false])
    const words = texts(foldScene({ chain: deckChain, chart: far, floors: [] }, frame))
    expect(words).toContain('3 strips not drawn here')
    expect(words).toContain('7th strip: 70.0 dB down in the kept band, the weak fold')
  })

  it('gathers the rest: how many, from where to where, the worst of them', () => {
    const chart = chartOf([-120, -130, -125, -140, -135, -70, -150])
    const rest = gatheredStrips(chart, drawnStrips(chart, 3))!
    expect(rest.count).toBe(4)
    expect([rest.fromHz, rest.toHz]).toEqual([300, 800])
    expect(rest.worst?.strip).toBe(3)
    expect(gatheredStrips(chart, drawnStrips(chart, 20))).toBeNull()
  })

  it('together they are all strips, each once', () => {
    fc.assert(
      fc.property(
        fc.array(fc.integer({ min: -200, max: -10 }), { minLength: 1, maxLength: 60 }),
        fc.integer({ min: 1, max: 70 }),
        (levels, most) => {
          const chart = chartOf(levels)
          const drawn = drawnStrips(chart, most)
          expect(new Set(drawn).size).toBe(drawn.length)
          expect(drawn.length + (gatheredStrips(chart, drawn)?.count ?? 0)).toBe(chart.strips.length)
          expect(drawn).toContain(chart.strips[chart.weakStrip])
        },
      ),
      { numRuns: 60 },
    )
  })

  it('shows levels from unity to 30 dB under what is asked and found, in steps of 20', () => {
    expect(floorDbOf(chartOf([-83.6]), [{ toHz: 90, atLeastDb: 80 }])).toBe(-120)
    expect(floorDbOf(chartOf([-40]), [])).toBe(-100)
    expect(floorDbOf(chartOf([-400]), [{ toHz: 90, atLeastDb: 80 }])).toBe(-200)
    expect(topDbOf(chartOf([-83.6]).strips)).toBe(0)
    expect(topDbOf(chartOf([26.2]).strips)).toBe(30)
  })
})

describe('what the chart says', () => {
  it('counts strips and writes levels', () => {
    expect([1, 2, 3, 4, 11, 12, 13, 21, 102, 113].map(ordinal)).toEqual([
      '1st',
      '2nd',
      '3rd',
      '4th',
      '11th',
      '12th',
      '13th',
      '21st',
      '102nd',
      '113th',
    ])
    expect(downWords(-83.62)).toBe('83.6\u2009dB down')
    expect(downWords(4)).toBe('4.0\u2009dB up')
    expect(downWords(Number.NEGATIVE_INFINITY)).toBe('nothing')
    expect(boundWords(-150)).toBe('at least 150.0\u2009dB down')
    expect(stripWords(strip(1, -83.6), true)).toBe('2nd strip: 83.6\u2009dB down in the kept band, the weak fold')
    expect(stripWords(strip(2, -116.7), false)).toBe('3rd strip: 116.7\u2009dB down in the kept band')
  })

  it('says which inputs share an output', () => {
    const paths = foldPaths(deckChain, 35, 1000)
    expect(traceWords(35, paths)).toBe('35\u2009Hz also hears 215, 285, 465, 535, 715, 785 and 965\u2009Hz')
    expect(spokenTrace(35, paths)).toMatch(/; the loudest of them is \d+\u2009Hz, [\d.]+\u2009dB down$/)
    const many = foldPaths(deckChain, 35, 4000)
    expect(traceWords(35, many)).toMatch(/785, 965\u2009Hz and \d+ more$/)
    expect(traceWords(35, [])).toBe('35\u2009Hz hears itself alone')
  })

  it('names the weak fold with its place and its maker', () => {
    const weak = deckChart.strips[deckChart.weakStrip]!
    const sentence = weakFoldSentence(deckChain, deckChart)
    expect(sentence).toContain(downWords(weak.worst!.levelDb))
    expect(sentence).toContain('it folds at Down by 2')
  })

  it('has a table of strips and one of what lands on a frequency', () => {
    const rows = stripRows(deckChain, deckChart)
    expect(rows).toHaveLength(deckChart.strips.length)
    expect(rows[1]?.slice(0, 6)).toEqual([
      '2nd, weak',
      '125\u2009Hz',
      '250\u2009Hz',
      'backwards',
      'Down by 2',
      'Down by 2',
    ])
    const traced = traceRows(foldPaths(deckChain, 35, 1000), (id) => stageNameOf(deckChain, id))
    expect(traced).toHaveLength(8)
    expect(traced.map(([input]) => input)).toEqual([35, 215, 285, 465, 535, 715, 785, 965].map((hz) => `${hz}\u2009Hz`))
  })
})

describe('tracing', () => {
  it('steps by keys on round values, and stays on the axis', () => {
    const by = (key: string, now: number | null, isLarge = false) => tracedByKey(key, isLarge, now, deckChain)
    expect(by('ArrowRight', 35)).toBe(35.5)
    expect(by('ArrowLeft', 35)).toBe(34.5)
    expect(by('ArrowRight', 35, true)).toBe(40)
    expect(by('PageUp', 35)).toBe(47.5)
    expect(by('PageDown', 5)).toBe(0)
    expect(by('Home', 35)).toBe(0)
    expect(by('End', 35)).toBe(125)
    expect(by('ArrowRight', 125)).toBe(125)
    expect(by('Escape', 35)).toBeNull()
    expect(by('Tab', 35)).toBeUndefined()
    // Where nothing is traced yet, any step begins in the middle of what is kept.
    expect(by('ArrowRight', null)).toBe(45)
  })

  it('rounds a place under the pointer into the axis', () => {
    fc.assert(
      fc.property(fc.double({ min: -50, max: 300, noNaN: true }), (hz) => {
        const traced = tracedAt(hz, 250)
        expect(traced).toBeGreaterThanOrEqual(0)
        expect(traced).toBeLessThanOrEqual(125)
        if (hz >= 0 && hz <= 125) expect(Math.abs(traced - hz)).toBeLessThanOrEqual(0.25 + 1e-9)
      }),
    )
  })

  it('is a slider with units in its value, and a picture of its own', () => {
    const frame = deckFrame(900)
    const paths = foldPaths(deckChain, 35, 1000)
    const nothing = () => undefined
    const slider = renderToStaticMarkup(
      <TraceGround
        frame={frame}
        chain={deckChain}
        hz={35}
        paths={paths}
        onPoint={nothing}
        onKeep={nothing}
        onLeave={nothing}
      />,
    )
    expect(slider).toContain('role="slider"')
    expect(slider).toContain('aria-valuenow="35"')
    expect(slider).toContain('aria-valuemax="125"')
    expect(slider).toMatch(/aria-valuetext="35.Hz also hears 215/)
    const picture = renderToStaticMarkup(<TracePicture frame={frame} hz={35} paths={paths} />)
    expect(picture.match(/<circle/g)).toHaveLength(frame.rows.length)
    expect(renderToStaticMarkup(<TracePicture frame={frame} hz={null} paths={paths} />)).toBe('')
  })
})

describe('the strips as a picture', () => {
  const plan = { chain: deckChain, chart: deckChart, floors }

  it('is made of chart and width alone: the same plan paints the same, whatever is traced', () => {
    const frame = deckFrame(900)
    expect(foldScene(plan, frame)).toEqual(foldScene(plan, frame))
    // Neither what is traced nor where the pointer is can be handed in.
    expect(Object.keys(plan).sort()).toEqual(['chain', 'chart', 'floors'])
    expect(foldScene.length).toBe(2)
  })

  it('draws the weak fold alone in vermilion, and the floor over the kept band in each image', () => {
    const { marks } = foldScene(plan, deckFrame(900))
    const curves = marks.flatMap((mark) =>
      mark.kind === 'clip' ? mark.marks.flatMap((inner) => (inner.kind === 'path' ? [inner.stroke] : [])) : [],
    )
    const solid = curves.filter(({ dash, widthPixels }) => !dash && widthPixels > 1)
    expect(solid.map(({ ink }) => ink)).toEqual(['moss', 'vermilion', 'ink', 'ink', 'ink', 'ink', 'ink', 'ink'])
    expect(curves.filter(({ dash }) => dash)).toHaveLength(7)
  })

  it('is handed out as an SVG with its words', () => {
    const scene = foldExport(plan, deckFrame(900), { heading: 'A & B', foot: '0 to −120 dB in each strip.' })
    const svg = paintSvg(scene, daylight, 'A & B')
    expect(svg).toContain('A &amp; B')
    expect(svg).toContain('the weak fold')
    expect(svg).not.toMatch(/NaN|undefined/)
  })
})
