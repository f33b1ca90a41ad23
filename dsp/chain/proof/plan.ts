import { seededUniform } from '../../numeric/random'
import type { ComputedChain, FoldChart } from '../chain'
import type { CoherentTone } from './synthesis'

/*
 * Which tones a run is made of. The record is a whole number of periods of every tone, and each falls on a line of the stored samples that no
 * other falls on, so that every level is read without leakage from its own line.
 */

/** What a tone is there for. Only named ones become lines of the report; the others make the input broad. */
export type ToneUse = 'wanted' | 'delay' | 'weak fold' | 'image' | 'interferer' | 'background'

export interface PlannedTone extends CoherentTone {
  readonly use: ToneUse
  readonly what: string
  readonly inputHz: number
  /** Number of the line of the stored samples that it lands on. */
  readonly line: number
  readonly landsHz: number
}

export interface RunSize {
  /** Samples stored in a period, a power of two. */
  readonly stored: number
  /** Samples that the chain takes for one it stores. */
  readonly factor: number
  /** Input samples for one of the converter. */
  readonly steps: number
  readonly inputRateHz: number
  /** Input samples in a period. */
  readonly length: number
}

/** Tones above this part of the input rate are left out: the run would take them too coarsely. */
const MOST_PART_OF_INPUT_RATE = 0.25
const MOST_LENGTH = 2 ** 20
const MOST_STORED = 2048
const LEAST_STORED = 64
const ENOUGH_STORED = 256

/** A longer run: noise falls by 3 dB with each doubling of the samples stored. */
const LONGER_STORED = 4
const LONGER_LENGTH = 2

/**
 * How long a run is, and at which rate: as many stored samples as a million of input allow, at a rate that reaches the highest interferer.
 *
 * @param isLong averages over up to four times as many stored samples, for an image that lies near the noise
 */
export function runSize(chain: ComputedChain, isLong = false): RunSize {
  const { converterRateHz, outputRateHz, spec } = chain
  const factor = Math.round(converterRateHz / outputRateHz)
  const storedFor = (steps: number): number => {
    let stored = isLong ? LONGER_STORED * MOST_STORED : MOST_STORED
    const most = isLong ? LONGER_LENGTH * MOST_LENGTH : MOST_LENGTH
    while (stored > LEAST_STORED && stored * factor * steps > most) stored /= 2
    return stored
  }
  const highest = spec.interferers.reduce((most, one) => Math.max(most, one.kind === 'tone' ? one.hz : one.toHz), 0)
  let steps = storedFor(16) >= 2 * ENOUGH_STORED ? 16 : 8
  while (highest > MOST_PART_OF_INPUT_RATE * steps * converterRateHz && steps < 256) {
    if (storedFor(2 * steps) < ENOUGH_STORED) break
    steps *= 2
  }
  const stored = storedFor(steps)
  return { stored, factor, steps, inputRateHz: steps * converterRateHz, length: stored * factor * steps }
}

/** The line that `cycles` in the record lands on among `stored` samples. */
function landing(cycles: number, stored: number): number {
  const rest = cycles % stored
  return rest <= stored / 2 ? rest : stored - rest
}

/** The strip that a tone comes from: 0 is the base band. */
export const stripOf = (cycles: number, stored: number): number => Math.floor((2 * cycles) / stored)

/** Strips are counted as the fold chart counts them: the base band is the first. */
function ordinal(number: number): string {
  const lastTwo = number % 100
  const ending = lastTwo > 10 && lastTwo < 14 ? 'th' : (['th', 'st', 'nd', 'rd'][number % 10] ?? 'th')
  return `${number}${ending}`
}

const MOST_STRIPS = 8
const MOST_WANTED = 8
const TONES_OF_A_BAND = 8
/** Lines to either side that are tried when one is taken. */
const REACH = 24

/**
 * Plans the tones of a run.
 *
 * Steps: 1. a cluster about the middle of the kept band, its distances doubling, for the delay; 2. the interferers, a band as several tones;
 * 3. one image from each of the weakest strips, where it is worst; 4. wanted tones over the kept band; 5. on every line that is left a tone
 * from the base band or from a strip drawn at random. Phases are drawn at random; amplitudes are 1 but for interferers, which have theirs.
 *
 * @returns tones, and the names of interferers too high for the run
 */
export function planTones(
  chain: ComputedChain,
  chart: FoldChart,
  size: RunSize,
  seed: number,
): { readonly tones: readonly PlannedTone[]; readonly tooHigh: readonly string[] } {
  const { stored, inputRateHz } = size
  const { kept, interferers } = chain.spec
  const spacing = chain.outputRateHz / stored
  const uniform = seededUniform(seed)
  const taken = new Set<number>([0, stored / 2])
  const tones: PlannedTone[] = []
  const most = Math.floor((MOST_PART_OF_INPUT_RATE * inputRateHz) / spacing)

  const put = (cycles: number, use: ToneUse, what: string, amplitude: number): void => {
    const line = landing(cycles, stored)
    taken.add(line)
    const phaseRadians = 2 * Math.PI * uniform()
    tones.push({ cycles, amplitude, phaseRadians, use, what, inputHz: cycles * spacing, line, landsHz: line * spacing })
  }
  /** Puts a tone on the nearest free line, of a strip if one is named; false when there is none near. */
  const place = (hertz: number, use: ToneUse, what: string, amplitude = 1, strip: number | null = null): boolean => {
    const near = Math.round(hertz / spacing)
    for (let step = 0; step <= 2 * REACH; step++) {
      const cycles = near + (step % 2 === 0 ? step / 2 : -(step + 1) / 2)
      if (cycles < 1 || cycles > most || taken.has(landing(cycles, stored))) continue
      if (strip !== null && stripOf(cycles, stored) !== strip) continue
      put(cycles, use, what, amplitude)
      return true
    }
    return false
  }

  const middle = Math.round((kept.fromHz + kept.toHz) / 2 / spacing)
  const quarter = (kept.toHz - kept.fromHz) / 4 / spacing
  for (const offset of [0, 1, 2, 4, 8, 16, 32, 64, 128]) {
    if (offset > 1 && offset > quarter) break
    for (const cycles of offset === 0 ? [middle] : [middle - offset, middle + offset]) {
      if (cycles >= 1 && cycles < stored / 2 && !taken.has(cycles)) put(cycles, 'delay', '', 1)
    }
  }
  const tooHigh: string[] = []
  for (const one of interferers) {
    const what = `interferer “${one.name}”`
    if (one.kind === 'tone') {
      if (!place(one.hz, 'interferer', what, one.level)) tooHigh.push(one.name)
      continue
    }
    const count = Math.min(TONES_OF_A_BAND, Math.max(1, Math.floor((one.toHz - one.fromHz) / spacing)))
    const amplitude = one.level * Math.sqrt(2 / count)
    let placed = 0
    for (let k = 0; k < count; k++) {
      const hertz = one.fromHz + ((k + uniform()) / count) * (one.toHz - one.fromHz)
      if (place(hertz, 'interferer', what, amplitude)) placed += 1
    }
    if (placed === 0) tooHigh.push(one.name)
  }
  const weak = chart.strips
    .filter(({ strip, worst }) => strip > 0 && worst !== null && worst.inputHz / spacing <= most)
    .sort((left, right) => right.worst!.levelDb - left.worst!.levelDb)
    .slice(0, MOST_STRIPS)
  const named = weak.some(({ strip }) => strip === chart.weakStrip)
    ? weak.toSorted((a, b) => Number(b.strip === chart.weakStrip) - Number(a.strip === chart.weakStrip))
    : weak
  for (const { strip, worst } of named) {
    const use = strip === chart.weakStrip ? 'weak fold' : 'image'
    const what = `image from the ${ordinal(strip + 1)} strip${strip === chart.weakStrip ? ', the weak fold' : ''}`
    place(worst!.inputHz, use, what, 1, strip)
  }
  for (let k = 0; k < MOST_WANTED; k++) {
    const hertz = kept.fromHz + ((k + 0.5) / MOST_WANTED) * (kept.toHz - kept.fromHz)
    const count = tones.length
    if (place(hertz, 'wanted', 'wanted') && tones[count]!.inputHz > kept.toHz) tones.pop()
  }
  // A kept band of few lines has them all in the cluster: its middle speaks for it.
  if (tones.every(({ use }) => use !== 'wanted') && tones[0]?.use === 'delay')
    tones[0] = { ...tones[0], what: 'wanted' }
  const strips = Math.floor((2 * most) / stored)
  for (let line = 1; line < stored / 2; line++) {
    if (taken.has(line)) continue
    const strip = uniform() < 0.5 ? 0 : Math.floor(uniform() * strips)
    const cycles = strip % 2 === 0 ? (strip / 2) * stored + line : ((strip + 1) / 2) * stored - line
    put(cycles <= most ? cycles : line, 'background', '', 1)
  }
  return { tones, tooHigh }
}
