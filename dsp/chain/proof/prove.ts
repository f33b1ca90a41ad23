import type { ChainSpec } from '../spec'
import type { ComputedChain } from '../chain'
import { computeChain } from '../compute'
import { foldChart } from '../folding'
import { noiseBudget } from '../noise'
import { chainResponse, stageMagnitudeDb } from '../response'
import { stripsOver } from '../strips'
import { chainUnits } from '../units'
import { splineGain, splineImage } from './analog-run'
import { averagingGain } from './convert'
import { floorOf, linesOf, slopeOf, type PhasePoint } from './lines'
import { planTones, runSize, stripOf, type PlannedTone, type RunSize, type ToneUse } from './plan'
import type { ProofLine, ProofResult } from './report'
import {
  analogOfChain,
  averagingOrderOf,
  converterOf,
  runAhead,
  runBehind,
  runConverter,
  sensitivityOf,
} from './run-chain'
import { synthesise } from './synthesis'

/*
 * The proof on a signal: tones run through the stages, and their levels in the stored samples against the computed ones. What is measured uses
 * roots, sections and taps alone, what is computed responses alone; they meet in the report.
 */

/** Deviation of the whole input at the converter, in parts of full scale: a sum of many tones then hardly ever reaches the end. */
const DRIVE = 0.22
/** Of the power, what the named tones take. */
const NAMED_SHARE = 0.7
/** Amplitudes at the converter: the weak fold is what the proof is about, and the other images lie deeper than what is wanted. */
const SHARE: Readonly<Partial<Record<ToneUse, number>>> = { wanted: 1, delay: 1, image: 2, 'weak fold': 6 }
/** Of the weak fold in a run made longer for it. */
const LONG_SHARE = 24
/** An image is driven harder by what the analog stages hold back, up to here; what only fills the lines less so. */
const MOST_LIFT = 1e7
const MOST_BACKGROUND_LIFT = 1e4
const HIGHEST = 0.98
/** Noise stays below so many deviations but once in 10⁷ (a Rayleigh amplitude: e^{−16}). */
const DEVIATIONS = 4
/** Rounding of a million additions and of the transform, in parts of the largest amplitude. */
const ROUNDING = 1e-12
/** Rounding of what is lifted, in parts of the largest input: it is white, and spread over all lines. */
const ROUNDING_OF_INPUT = 1e-15
/** Where computed levels end: nothing in doubles is told apart below. */
const LEAST_DB = -300

/** Magnitude ahead of the converter, from the responses. */
function aheadOf(chain: ComputedChain, hertz: Float64Array): Float64Array {
  const level = new Float64Array(hertz.length)
  for (let index = 0; index <= chain.converterIndex; index++) {
    stageMagnitudeDb(chain, index, hertz).forEach((value, n) => (level[n]! += value))
  }
  return level.map((decibels) => 10 ** (decibels / 20))
}

/** Amplitudes in the sensor's unit: interferers as stated unless they alone would fill the converter, the rest shared out below full scale. */
function drive(
  chain: ComputedChain,
  tones: readonly PlannedTone[],
  isLong: boolean,
): { amplitudes: Float64Array; isTakenDown: boolean } {
  const ahead = aheadOf(
    chain,
    Float64Array.from(tones, ({ inputHz }) => inputHz),
  )
  const range = converterOf(chain).fullScaleVolts / sensitivityOf(chain)
  const target = DRIVE * range
  const power = (use: (tone: PlannedTone) => boolean): number =>
    tones.reduce((sum, tone, n) => (use(tone) ? sum + (tone.amplitude * ahead[n]!) ** 2 / 2 : sum), 0)
  const there = Math.sqrt(power(({ use }) => use === 'interferer'))
  const isTakenDown = there > 0.8 * target
  const down = isTakenDown ? (0.8 * target) / there : 1
  const rest = target ** 2 - (there * down) ** 2
  const shares = tones.map(({ use }) => (isLong && use === 'weak fold' ? LONG_SHARE : (SHARE[use] ?? 0)))
  const named = shares.reduce((sum, share) => sum + share * share, 0)
  const others = tones.filter(({ use }) => use === 'background').length
  const ofNamed = Math.sqrt((2 * (others > 0 ? NAMED_SHARE : 1) * rest) / Math.max(named, 1))
  const ofOthers = Math.sqrt((2 * (1 - NAMED_SHARE) * rest) / Math.max(others, 1))
  const amplitudes = Float64Array.from(tones, (tone, n) => {
    if (tone.use === 'interferer') return tone.amplitude * down
    const isBackground = tone.use === 'background'
    const lift = Math.min(1 / ahead[n]!, isBackground ? MOST_BACKGROUND_LIFT : MOST_LIFT)
    return (isBackground ? ofOthers : shares[n]! * ofNamed) * lift
  })
  return { amplitudes, isTakenDown }
}

/** What the input is to be given so that the method's own, known, gains come to 1. */
function emphasis(chain: ComputedChain, inputHz: number, { inputRateHz }: RunSize): number {
  const turns = inputHz / inputRateHz
  const spline = analogOfChain(chain) === null ? 1 : splineGain(turns)
  return 1 / (spline * averagingGain(turns) ** averagingOrderOf(chain))
}

/** Integrals that the chain takes, and the factor between its two units. */
function integralsOf(chain: ComputedChain): { readonly times: number; readonly factor: number } {
  const times = chain.stages.reduce(
    (sum, { parts }) => sum + parts.reduce((n, part) => n + (part.kind === 'integration' ? part.times : 0), 0),
    0,
  )
  return { times, factor: chainUnits[chain.stages[0]!.unit].si / chainUnits[chain.unit].si }
}

/** A tone so far above what the noise may come to asks for no longer run, one below `HOPELESS` is not helped by it, one above `SURELY` must be seen. */
const CLEARLY = 4
const HOPELESS = 0.5
const SURELY = 8

/**
 * The largest level that tones of a use come to in the stored samples, over what the converter's noise comes to on a line at most, by the noise
 * budget's density in the middle of the kept band; Infinity where there is no such tone.
 */
function clearOf(
  chain: ComputedChain,
  { tones, amplitudes, size }: { tones: readonly PlannedTone[]; amplitudes: Float64Array; size: RunSize },
  density: number,
  use: ToneUse,
): number {
  const of = tones.flatMap((tone, n) => (tone.use === use ? [{ tone, amplitude: amplitudes[n]! }] : []))
  if (of.length === 0) return Infinity
  const onLine = DEVIATIONS * density * Math.sqrt((2 * chain.outputRateHz) / size.stored)
  return Math.max(
    ...of.map(({ tone: { landsHz, cycles }, amplitude }) => {
      const [levelDb = 0] = stripsOver(chain, Float64Array.of(landsHz)).levelDb(stripOf(cycles, size.stored))
      return (amplitude * 10 ** (levelDb / 20)) / onLine
    }),
  )
}

const decibels = (amplitude: number): number => Math.max(20 * Math.log10(amplitude), LEAST_DB)

/** A level against what was computed: within the bound where it is clear of the noise, else not above. */
function judged(
  tone: Pick<PlannedTone, 'what' | 'inputHz' | 'landsHz'>,
  computedDb: number,
  measured: number,
  part: number,
): ProofLine {
  const measuredDb = decibels(measured)
  const isClear = part < 0.5
  const boundDb = isClear ? -20 * Math.log10(1 - part) : 20 * Math.log10(1 + part)
  const above = measuredDb - computedDb
  const { what, inputHz, landsHz } = tone
  const agrees = above <= boundDb && (!isClear || above >= -boundDb)
  return {
    what,
    inputHz,
    landsHz,
    computedDb,
    measuredDb,
    boundDb,
    comparison: isClear ? 'within' : 'not above',
    agrees,
  }
}

export interface ProofOptions {
  readonly seed: number
}

/**
 * Runs one chain and holds it against what was computed for another, usually the same: a test hands in two that differ.
 * @see proofSteps
 */
export function* proveChain(
  computed: ComputedChain,
  run: ComputedChain,
  { seed }: ProofOptions,
): Generator<number, ProofResult> {
  const outputHz = Float64Array.from({ length: 65 }, (_, k) => (k / 128) * computed.outputRateHz)
  const chart = foldChart(computed, outputHz)
  const noiseDensity = noiseBudget(computed).density
  const planned = (isLong: boolean) => {
    const size = runSize(computed, isLong)
    const plan = planTones(computed, chart, size, seed)
    return { size, ...plan, ...drive(computed, plan.tones, isLong) }
  }
  const short = planned(false)
  const clear = clearOf(computed, short, noiseDensity, 'weak fold')
  const plan = clear < CLEARLY && clear > HOPELESS ? planned(true) : short
  const { size, tones, tooHigh, amplitudes, isTakenDown } = plan
  const { stored, inputRateHz, length } = size
  const spacing = computed.outputRateHz / stored
  yield 0.05
  const given = tones.map((tone, n) => ({ ...tone, amplitude: amplitudes[n]! * emphasis(run, tone.inputHz, size) }))
  const input = yield* spread(synthesise(length, given), 0.05, 0.2, length / stored)
  const ahead = yield* spread(runAhead(run, input, inputRateHz), 0.2, 0.85, 2 * length)
  const lifted = input.reduce((most, value) => Math.max(most, Math.abs(value)), 0)
  const fullScale = converterOf(run).fullScaleVolts
  const peak = ahead.reduce((most, value) => Math.max(most, Math.abs(value)), 0)
  const down = peak > HIGHEST * fullScale ? (HIGHEST * fullScale) / peak : 1
  const converted = runConverter(run, down === 1 ? ahead : ahead.map((value) => value * down), seed)
  yield 0.87
  const samples = yield* spread(runBehind(run, converted.samples), 0.87, 0.93, run.stages.length)
  const floor = floorOf(linesOf(yield* spread(runBehind(run, converted.added), 0.93, 0.99, run.stages.length)))
  const lines = linesOf(samples)

  const { times, factor } = integralsOf(computed)
  const filter = analogOfChain(computed)
  const gain = (hertz: number): number => aheadOf(computed, Float64Array.of(hertz))[0]!
  const largest = lines.re.reduce((most, value, k) => Math.max(most, Math.hypot(value, lines.im[k]!)), 0)
  const found = tones.map((tone, n) => {
    // What level 1 at this line is in the stored samples.
    const unit = (amplitudes[n]! * down * factor) / (2 * Math.PI * tone.landsHz) ** times
    const computedDb = Math.max(
      stripsOver(computed, Float64Array.of(tone.landsHz)).levelDb(stripOf(tone.cycles, stored))[0]!,
      LEAST_DB,
    )
    const measured = Math.hypot(lines.re[tone.line]!, lines.im[tone.line]!) / unit
    const method = tone.use === 'background' || filter === null ? 0 : splineImage(gain, tone.inputHz, inputRateHz)
    const noise = (DEVIATIONS * floor[tone.line]! + ROUNDING * largest) / unit
    // Counted at the sensor, and so ahead of everything that holds the tone back.
    const rounding = (ROUNDING_OF_INPUT * lifted) / amplitudes[n]!
    return { tone, unit, computedDb, measured, method, noise: noise + rounding }
  })
  const named = found.filter(({ tone }) => tone.what !== '')
  const proofLines = named.map(({ tone, computedDb, measured, method, noise }) =>
    judged(tone, computedDb, measured, method + noise / 10 ** (computedDb / 20)),
  )

  const cluster = found
    .filter(({ tone }) => tone.use === 'delay')
    .sort((left, right) => left.tone.inputHz - right.tone.inputHz)
  const { phaseRadians } = chainResponse(
    computed,
    Float64Array.from(cluster, ({ tone }) => tone.inputHz),
  )
  const points = cluster.map(({ tone, measured, method, noise }, n): PhasePoint => {
    const angle = Math.atan2(lines.im[tone.line]!, lines.re[tone.line]!)
    return {
      hertz: tone.inputHz,
      // The ideal integral turns by a quarter each time.
      measured: angle - tone.phaseRadians + (times * Math.PI) / 2,
      computed: phaseRadians[n]!,
      method,
      deviation: noise / DEVIATIONS / measured,
    }
  })
  const slope = slopeOf(points, stored / computed.outputRateHz)
  const boundSeconds =
    slope.methodSeconds + DEVIATIONS * slope.deviationSeconds + ROUNDING * (stored / computed.outputRateHz)
  const delay = {
    computedSeconds: slope.computedSeconds,
    measuredSeconds: slope.measuredSeconds,
    boundSeconds,
    agrees: Math.abs(slope.measuredSeconds - slope.computedSeconds) <= boundSeconds,
  }

  const density = (amplitude: number): number => Math.max(10 * Math.log10(amplitude ** 2 / 2 / spacing), 2 * LEAST_DB)
  const expected = floor.map((value) => value ** 2)
  for (const { tone, unit, computedDb } of found) expected[tone.line]! += (unit * 10 ** (computedDb / 20)) ** 2
  const notes: string[] = []
  if (isTakenDown || (down < 1 && tones.some(({ use }) => use === 'interferer'))) {
    notes.push(
      'The interferers alone would nearly fill the converter; the run has all of them taken down by the same factor.',
    )
  }
  for (const name of tooHigh)
    notes.push(`“${name}” found no place in the run: too high for its rate, or every line near it is taken.`)
  const isMeasured = (use: ToneUse): boolean =>
    named.some(
      ({ tone }, n) =>
        proofLines[n]!.comparison === 'within' && (tone.use === use || (use === 'wanted' && tone.use === 'delay')),
    )
  const isMeasurable = down * clearOf(computed, plan, noiseDensity, 'weak fold') > SURELY
  yield 1
  return {
    inputRateHz,
    samplesIn: length,
    samplesStored: stored,
    lines: proofLines,
    delay,
    spectrum: {
      frequenciesHz: floor.map((_, k) => k * spacing),
      measuredDensityDb: lines.re.map((value, k) => density(Math.hypot(value, lines.im[k]!))),
      computedDensityDb: expected.map((square) => density(Math.sqrt(square))),
    },
    notes,
    agrees:
      delay.agrees &&
      proofLines.every(({ agrees }) => agrees) &&
      isMeasured('wanted') &&
      (isMeasured('image') || isMeasured('weak fold') || !isMeasurable),
  }
}

/** Progress of a part of the work, between two marks of the whole; a step without a count is one. */
function* spread<Result>(
  steps: Generator<number | void, Result>,
  from: number,
  to: number,
  count: number,
): Generator<number, Result> {
  let done = 0
  for (;;) {
    const next = steps.next()
    if (next.done === true) return next.value
    done += next.value ?? 1
    yield from + (to - from) * Math.min(done / count, 1)
  }
}

/**
 * The proof on a signal. A periodic input of hundreds of tones with random phases – over the kept band, on the worst images of the weakest
 * strips, at the interferers, and on every other line that the stored samples have – runs through the stages: the analog ones in continuous
 * time by their states, the averaging of the converter as a running mean, the converter by its steps, the digital ones by sections, taps and
 * whole-number integrators. Each tone is periodic in the record and falls on a line of its own, so that levels are read without leakage,
 * settled, and without a window. The weak fold is driven hardest, and where it would lie near the noise the run is made longer.
 *
 * Each level may differ from the computed one by what the method and the converter add: the images of the input's spline behind the analog
 * stages (relative), and four deviations of what the converter added, run through the same digital stages alone. Where that reaches half the
 * level, it is only held not to lie above: nothing more is proven of it. The whole agrees when every line does, something wanted was measured and, where the
 * weak fold stands out of the noise, an image too. Interferers stand on the nearest free line, at most half a per cent of the output rate away; levels
 * are relative, so that how hard a tone is driven doesn't matter.
 *
 * @param options.seed phases, and where tones stand that no one asked for
 * @returns a generator of progress from 0 to 1, and the report at its end
 * @throws DesignError as computeChain; `too-few-bits` where a step of the converter is larger than the signal
 * Sources: J. Schoukens & R. Pintelon, System Identification, 2nd ed., 2012, ch. 2 (periodic excitation); C. F. Van Loan 1978 (states).
 */
export function* proofSteps(spec: ChainSpec, options: ProofOptions): Generator<number, ProofResult> {
  const chain = computeChain(spec)
  yield 0.01
  return yield* proveChain(chain, chain, options)
}
