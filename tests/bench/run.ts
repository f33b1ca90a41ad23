/*
 * Prints the speeds that the engine is held to, as ratios in one run. `npm run bench`; nothing here fails a build, since wall time is
 * the machine's business as much as ours.
 */
import {
  departure,
  designAnalog,
  discretize,
  frequencyResponse,
  groupDelay,
  magnitudeDb,
  phaseResponse,
  rateSweep,
  runFilter,
  seededNoise,
  trustedBand,
  type AnalogSpec,
  type Method,
  type Section,
} from '@/dsp'
import { benchCandidates } from './candidates'
import { benchChains } from './chains'
import { format, least, median, times } from './measure'
import { timePython } from './python'
import { benchTolerance } from './tolerance'

const SAMPLES = 10_000_000
const POINTS = 65_536
const ROUNDS = 7

const spec: AnalogSpec = { family: 'butterworth', response: 'lowpass', order: 8, edgesHz: [120] }
const bilinear: Method = { method: 'bilinear', hold: 'edges' }
const methods: readonly Method[] = [
  bilinear,
  { method: 'impulse-invariant' },
  { method: 'matched-z' },
  { method: 'step-invariant' },
]
const say = (line: string) => console.log(line)

/** What one writes first: section loop inside sample loop, state in arrays. */
function plainLoop(sections: readonly Section[], input: Float64Array, output: Float64Array): void {
  const s1 = new Float64Array(sections.length)
  const s2 = new Float64Array(sections.length)
  for (let n = 0; n < input.length; n++) {
    let x = input[n]!
    for (let k = 0; k < sections.length; k++) {
      const section = sections[k]!
      const y = section.b0 * x + s1[k]!
      s1[k] = section.b1 * x - section.a1 * y + s2[k]!
      s2[k] = section.b2 * x - section.a2 * y
      x = y
    }
    output[n] = x
  }
}

function against(name: string, ours: readonly number[], theirs: readonly number[] | undefined, target: string): void {
  const figures = `${name}: ${format(median(ours))} (best ${format(least(ours))})`
  if (theirs === undefined) {
    say(`${figures}; scipy is not installed here`)
    return
  }
  const ratio = (least(ours) / least(theirs)).toFixed(2)
  say(
    `${figures}; scipy.signal ${format(median(theirs))} (best ${format(least(theirs))}); ratio of the best ${ratio} (${target})`,
  )
}

const filter = discretize(spec, 1200, bilinear)
const next = seededNoise(1)
const samples = Float64Array.from({ length: SAMPLES }, next)
const output = new Float64Array(SAMPLES)
const frequencies = Float64Array.from({ length: POINTS }, (_, n) => (600 * n) / POINTS)
const re = filter.sections.map(({ b0, b1, b2, a1, a2 }) => [b0, b1, b2, 1, a1, a2])
const python = timePython({ sos: re, samples: SAMPLES, points: POINTS, rounds: ROUNDS })
if (python !== null) say(`scipy ${python.version}`)

const run = times(ROUNDS, 2, () => void runFilter(filter.sections, samples, { mode: 'causal', into: output }))
against('cascade, order 8, 10 million samples', run, python?.sosfilt, 'asked: at most 1')
const plain = times(3, 1, () => plainLoop(filter.sections, samples, output))
say(`  against a plain loop of sections in samples: ratio ${(least(run) / least(plain)).toFixed(2)}`)
const both = times(3, 1, () => void runFilter(filter.sections, samples, { mode: 'zero-phase', into: output }))
say(`  forward and backward: ${format(median(both))}`)

const response = times(ROUNDS, 2, () => void frequencyResponse(filter, frequencies))
against('response, order 8, 65,536 points', response, python?.sosfreqz, 'asked: at most 1')

const grid = Float64Array.from({ length: 1024 }, (_, n) => 1 * 600 ** (n / 1023))
let edge = 120
/** One edit: the corner moves, and everything that is drawn of it is computed anew. */
function derive(shown: readonly Method[]): void {
  edge = edge > 130 ? 110 : edge + 0.1
  const edited = { ...spec, edgesHz: [edge] }
  const analog = designAnalog(edited)
  for (const trace of [analog, ...shown.map((how) => discretize(edited, 1200, how))]) {
    magnitudeDb(trace, grid)
    phaseResponse(trace, grid)
    groupDelay(trace, grid)
    if (trace.domain === 'z') {
      departure(analog, trace, grid, { removeDelayOver: [0, edge] })
      trustedBand(analog, trace, { magnitudeDb: 0.1, phaseDegrees: 2, removeDelay: true })
    }
  }
}
const edits = (name: string, shown: readonly Method[]) => {
  const took = times(60, 20, () => derive(shown))
  say(`edit to curves, 1,024 points, ${name}: median ${format(median(took))} (asked: under 8 ms to the painted frame)`)
}
edits('5 traces (analog and all four methods)', methods)
edits('5 traces (analog, bilinear and matched-z twice)', [
  bilinear,
  { method: 'matched-z' },
  { method: 'bilinear', hold: 'none' },
  { method: 'matched-z' },
])

const ratesHz = Array.from({ length: 120 }, (_, n) => 300 * 400 ** (n / 119))
const sweep = times(9, 3, () => void rateSweep({ analog: spec, methods, ratesHz, upToHz: 120, removeDelay: true }))
say(`rate sweep, 4 methods × 120 rates, order 8: median ${format(median(sweep))} (asked: under 100 ms)`)

for (const { spend, offered, refused, firstSeconds, seconds } of benchCandidates()) {
  const figures = `${seconds.toFixed(2)} s, ratio to 2 s ${(seconds / 2).toFixed(2)} (the first time ${firstSeconds.toFixed(2)} s)`
  say(`candidates for a usual sheet, ${spend}: ${figures}; ${offered} offered, ${refused} refused (asked: under 2 s)`)
}

const tolerance = benchTolerance()
say(
  `tolerance run, ${tolerance.channels} channels × ${tolerance.points} points: ${tolerance.twoCores.toFixed(2)} s halved between two cores, ratio to ${tolerance.askedSeconds} s ${tolerance.ratio.toFixed(2)} (asked: under ${tolerance.askedSeconds} s); ${tolerance.oneCore.toFixed(2)} s on one`,
)

for (const { edit, milliseconds } of benchChains()) {
  const ratio = (milliseconds / 30).toFixed(2)
  say(`chain of 6 stages, ${edit} edited: median ${format(milliseconds)}, ratio to 30 ms ${ratio} (asked: at most 1)`)
}
