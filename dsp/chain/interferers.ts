import type { ComputedChain, InterfererLanding } from './chain'
import { addMagnitudeDb } from './part-response'
import { integral } from './quadrature'
import type { Interferer } from './spec'
import { keptForPath } from './same-path'
import { inputOf, outputOf } from './strips'
import { chainUnits } from './units'

type Tone = Extract<Interferer, { kind: 'tone' }>
type Band = Extract<Interferer, { kind: 'band' }>

/** How often the samples were integrated, and the factor from the sensor's unit in SI to the chain's. */
interface Integration {
  readonly times: number
  readonly factor: number
}

function integrationOf(chain: ComputedChain): Integration {
  const parts = chain.stages.flatMap((stage) => stage.parts)
  const times = parts.reduce((sum, part) => sum + (part.kind === 'integration' ? part.times : 0), 0)
  const from = chain.stages[0]!.unit
  return { times, factor: chainUnits[from].si / chainUnits[chain.unit].si }
}

interface Levels {
  /** Against the ideal integral at the output frequency, as fold paths are. */
  readonly levelDb: Float64Array
  /** Factor from the sensor's unit at the input to the chain's unit in the samples. */
  readonly gain: Float64Array
}

/**
 * Levels at input frequencies themselves: every part evaluated there, a digital one repeating itself. The integrator stands against the ideal
 * integral at the frequency that it sees, 1/(2π·f)^n of which is the level in the samples.
 */
function levelsAt(chain: ComputedChain, inputHz: Float64Array): Levels {
  const levelDb = new Float64Array(inputHz.length)
  const scratch = new Float64Array(inputHz.length)
  const seen = new Float64Array(inputHz.length)
  const { times, factor } = integrationOf(chain)
  for (const { parts, inRateHz } of chain.stages) {
    for (const part of parts) {
      addMagnitudeDb(part, inputHz, levelDb, scratch)
      if (part.kind !== 'integration' || inRateHz === null) continue
      inputHz.forEach((hertz, n) => {
        const at = outputOf(hertz, inRateHz).landsHz
        const lands = outputOf(hertz, chain.outputRateHz).landsHz
        seen[n] = lands
        if (at > 0) levelDb[n] = levelDb[n]! + 20 * part.times * Math.log10(lands / at)
      })
    }
  }
  const gain = levelDb.map((level, n) => {
    // At 0 Hz the high-pass of the integrator lets nothing through.
    if (level === -Infinity) return 0
    return (factor * 10 ** (level / 20)) / (times === 0 ? 1 : (2 * Math.PI * seen[n]!) ** times)
  })
  return { levelDb, gain }
}

const isKept = ({ spec: { kept } }: ComputedChain, hertz: number): boolean => hertz >= kept.fromHz && hertz <= kept.toHz

function landingOfTone(chain: ComputedChain, { name, hz, level }: Tone): InterfererLanding {
  const { strip, landsHz } = outputOf(hz, chain.outputRateHz)
  const { levelDb, gain } = levelsAt(chain, Float64Array.of(hz))
  return {
    name,
    inputHz: hz,
    landsHz,
    strip,
    levelDb: levelDb[0]!,
    level: level * gain[0]!,
    inKeptBand: isKept(chain, landsHz),
    keptShare: isKept(chain, landsHz) ? 1 : 0,
  }
}

const POINTS_A_STRIP = 16
const MOST_POINTS = 4096
/** Of the power, which is a thousandth of a decibel. */
const BAND_TOLERANCE = 1e-4

/** A stretch of input frequencies, and how many like it it stands for. */
interface Span {
  readonly fromHz: number
  readonly toHz: number
  readonly count: number
}

/** Strips that are looked at one by one, and so many again chosen evenly from those above. */
const MOST_SPANS = 128

/** What of an input band lands inside the kept band: a stretch in each strip that it reaches. */
function keptSpans(chain: ComputedChain, { fromHz, toHz }: Band): readonly Span[] {
  const { outputRateHz, spec } = chain
  const first = outputOf(fromHz, outputRateHz).strip
  const last = outputOf(toHz, outputRateHz).strip
  const more = Math.ceil(Math.max(last + 1 - first - MOST_SPANS, 0) / MOST_SPANS)
  // Odd, so that mirrored strips have their turn.
  const stride = more + 1 - (more % 2)
  const spans: Span[] = []
  for (let strip = first; strip <= last;) {
    const count = strip < first + MOST_SPANS ? 1 : Math.min(stride, last + 1 - strip)
    const ends = [inputOf(strip, spec.kept.fromHz, outputRateHz), inputOf(strip, spec.kept.toHz, outputRateHz)]
    const span = { fromHz: Math.max(Math.min(...ends), fromHz), toHz: Math.min(Math.max(...ends), toHz), count }
    if (span.fromHz < span.toHz) spans.push(span)
    strip += count
  }
  return spans
}

/** Of a band of level 1 and no name. */
function landingOfUnit(chain: ComputedChain, band: Band): InterfererLanding {
  const { fromHz, toHz } = band
  const inside = keptSpans(chain, band)
  const isInside = inside.length > 0
  const spans = isInside ? inside : [{ fromHz, toHz, count: 1 }]
  const strips = (2 * (toHz - fromHz)) / chain.outputRateHz
  const points = Math.min(MOST_POINTS, Math.max(64, Math.ceil(POINTS_A_STRIP * strips)))
  const panels = Math.max(4, Math.ceil(points / 4 / spans.length))
  const grid = Float64Array.from(
    spans.flatMap((span) =>
      Array.from({ length: 4 * panels + 1 }, (_, n) =>
        n === 4 * panels ? span.toHz : span.fromHz + ((span.toHz - span.fromHz) * n) / (4 * panels),
      ),
    ),
  )
  // The kept band is held against a floor in decibels; elsewhere what is biggest in the samples says most.
  const { levelDb, gain } = levelsAt(chain, grid)
  const sizes = isInside ? levelDb : gain
  const inputHz = grid[sizes.reduce((best, value, n) => (value > sizes[best]! ? n : best), 0)]!
  const power = spans.reduce((sum, span) => {
    const squares = (hertz: Float64Array) => levelsAt(chain, hertz).gain.map((value) => value * value)
    return sum + span.count * integral(squares, span.fromHz, span.toHz, panels, BAND_TOLERANCE)
  }, 0)
  const insideHz = inside.reduce((sum, span) => sum + span.count * (span.toHz - span.fromHz), 0)
  return {
    name: '',
    inputHz,
    ...outputOf(inputHz, chain.outputRateHz),
    levelDb: levelsAt(chain, Float64Array.of(inputHz)).levelDb[0]!,
    level: Math.sqrt(power / (toHz - fromHz)),
    inKeptBand: isInside,
    keptShare: Math.min(insideHz / (toHz - fromHz), 1),
  }
}

function landingOfBand(chain: ComputedChain, band: Band): InterfererLanding {
  const { fromHz, toHz } = band
  const { kept } = chain.spec
  const asked = ['band', fromHz, toHz, kept.fromHz, kept.toHz]
  const unit = keptForPath(chain, asked, () => landingOfUnit(chain, band))
  return { ...unit, name: band.name, level: band.level * unit.level }
}

/**
 * Where each interferer of the spec lands, and how big it is in the samples. Of a tone the level is its amplitude; of a band, evenly spread at
 * the sensor, the root mean square of what lands inside the kept band, `inputHz` being where that is least far down. Of a band of which nothing
 * lands there the level is that of all of it that reaches the samples, and `inputHz` where most does. Behind an integrating stage levels are in the integrated unit, as the samples say it.
 *
 * @returns one landing for each interferer, in the spec's order
 */
export const interfererLandings = (chain: ComputedChain): readonly InterfererLanding[] =>
  chain.spec.interferers.map((one) => (one.kind === 'tone' ? landingOfTone(chain, one) : landingOfBand(chain, one)))
