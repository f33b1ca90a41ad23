import type { ComputedChain, InterfererLanding } from './chain'
import { addMagnitudeDb } from './part-response'
import { integral } from './quadrature'
import type { Interferer } from './spec'
import { outputOf } from './strips'
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
  }
}

const POINTS_A_STRIP = 16
const MOST_POINTS = 4096
/** Of the power, which is a thousandth of a decibel. */
const BAND_TOLERANCE = 1e-4

/** Whether any of an input band lands in the kept band. */
function touchesKept(chain: ComputedChain, { fromHz, toHz }: Band): boolean {
  const { strip, landsHz } = outputOf(fromHz, chain.outputRateHz)
  const end = outputOf(toHz, chain.outputRateHz)
  if (end.strip > strip + 1) return true
  if (isKept(chain, landsHz) || isKept(chain, end.landsHz)) return true
  const half = chain.outputRateHz / 2
  const { kept } = chain.spec
  const turn = (strip + 1) % 2 === 0 ? 0 : half
  const spans =
    end.strip === strip
      ? [[landsHz, end.landsHz]]
      : [
          [landsHz, turn],
          [turn, end.landsHz],
        ]
  return spans.some(([a = 0, b = 0]) => Math.min(a, b) <= kept.toHz && Math.max(a, b) >= kept.fromHz)
}

function landingOfBand(chain: ComputedChain, band: Band): InterfererLanding {
  const { name, fromHz, toHz, level } = band
  const strips = (2 * (toHz - fromHz)) / chain.outputRateHz
  const points = Math.min(MOST_POINTS, Math.max(64, Math.ceil(POINTS_A_STRIP * strips)))
  const grid = Float64Array.from({ length: points + 1 }, (_, n) => fromHz + ((toHz - fromHz) * n) / points)
  const { gain } = levelsAt(chain, grid)
  const at = gain.reduce((best, value, n) => (value > gain[best]! ? n : best), 0)
  const inputHz = grid[at]!
  const power = integral(
    (hertz) => levelsAt(chain, hertz).gain.map((value) => value * value),
    fromHz,
    toHz,
    points / 4,
    BAND_TOLERANCE,
  )
  return {
    name,
    inputHz,
    ...outputOf(inputHz, chain.outputRateHz),
    levelDb: levelsAt(chain, Float64Array.of(inputHz)).levelDb[0]!,
    level: level * Math.sqrt(power / (toHz - fromHz)),
    inKeptBand: touchesKept(chain, band),
  }
}

/**
 * Where each interferer of the spec lands, and how big it is in the samples. Of a tone the level is its amplitude; of a band, evenly spread at
 * the sensor, the root mean square of all of it that reaches the samples, `inputHz` being where it comes through strongest and `inKeptBand` whether any
 * of it lands in the kept band. Behind an integrating stage levels are in the integrated unit, as the samples say it.
 *
 * @returns one landing for each interferer, in the spec's order
 */
export const interfererLandings = (chain: ComputedChain): readonly InterfererLanding[] =>
  chain.spec.interferers.map((one) => (one.kind === 'tone' ? landingOfTone(chain, one) : landingOfBand(chain, one)))
