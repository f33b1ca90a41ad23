import { show } from '../check'
import { modulus } from '../numeric/complex'
import { analogSections, plainGain, type AnalogSection } from './analog-sections'
import {
  chooseMultipleFeedback,
  chooseRc,
  chooseSallenKeyHighPass,
  chooseSallenKeyLowPass,
  type Chosen,
  type Stock,
} from './build-sheet-search'
import { seriesBetween, type ESeries } from './e-series'
import type { ComputedChain } from './chain'

export interface BuildPart {
  readonly name: string
  /** From where to where. */
  readonly place: string
  readonly ohms?: number
  readonly farads?: number
}

/** A circuit of standard values, and what they come to. */
export interface BuildCircuit {
  readonly circuit: 'sallen-key' | 'multiple-feedback' | 'rc'
  readonly parts: readonly BuildPart[]
  readonly f0Hz: number
  readonly q: number | null
  /** Of the chosen values against the wanted ones; signed. */
  readonly f0ErrorPercent: number
  readonly qErrorPercent: number | null
  readonly note?: string
}

export interface BuildSection extends AnalogSection {
  readonly circuits: readonly BuildCircuit[]
  /** Why there is no circuit for it. */
  readonly reason?: string
}

export interface BuildOptions {
  /** Of the resistors. */
  readonly series: 'E24' | 'E96'
  /** Of the capacitors, E12 when left out. */
  readonly capacitors?: 'E12' | 'E24'
}

/** Above this a single amplifier is too sensitive to its parts: S of Q to the parts of a section grows with Q or with the capacitors' ratio. */
const MOST_Q = 10
const OHMS = [1e3, 1e6] as const
const FARADS = [100e-12, 1e-6] as const

const CONFIRM =
  'To be confirmed by a circuit designer: amplifier bandwidth, bias currents and stray capacitance are not considered.'

const places = {
  'sallen-key low-pass': [
    ['input to node', 'node to amplifier input'],
    ['node to output', 'amplifier input to ground'],
  ],
  'sallen-key high-pass': [
    ['node to output', 'amplifier input to ground'],
    ['input to node', 'node to amplifier input'],
  ],
  'multiple-feedback': [
    ['input to node', 'output to node', 'node to inverting input'],
    ['node to ground', 'output to inverting input'],
  ],
  'rc low-pass': [['input to output'], ['output to ground']],
  'rc high-pass': [['output to ground'], ['input to output']],
} as const

type Wiring = keyof typeof places

function partsOf(wiring: Wiring, ohms: readonly number[], farads: readonly number[]): readonly BuildPart[] {
  const [ofResistors, ofCapacitors] = places[wiring]
  const name = (letter: string, index: number, count: number) => (count === 1 ? letter : `${letter}${index + 1}`)
  return [
    ...ofResistors.map((place, k) => ({ name: name('R', k, ofResistors.length), place, ohms: ohms[k]! })),
    ...ofCapacitors.map((place, k) => ({ name: name('C', k, ofCapacitors.length), place, farads: farads[k]! })),
  ]
}

/** The filter's level that no circuit of gain 1 makes; only a stage's first section can have one. */
function levelNote(section: AnalogSection): string {
  const level = Math.abs(section.gain / plainGain(section))
  if (Math.abs(level - 1) < 1e-9) return ''
  return ` The design has a factor of ${show(level)} here, which these parts leave at 1: count it in the sensitivity.`
}

function circuitOf(section: AnalogSection, wiring: Wiring, chosen: Chosen): BuildCircuit {
  const isInverting = wiring === 'multiple-feedback'
  const ohms = isInverting ? [chosen.ohms[0]!, ...chosen.ohms] : chosen.ohms
  const own = isInverting ? ' Inverts the sign.' : wiring.startsWith('rc') ? ' Followed by a buffer.' : ''
  const percent = (value: number, wanted: number) => 100 * (value / wanted - 1)
  return {
    circuit: isInverting ? 'multiple-feedback' : section.order === 1 ? 'rc' : 'sallen-key',
    parts: partsOf(wiring, ohms, chosen.farads),
    f0Hz: chosen.f0Hz,
    q: chosen.q,
    f0ErrorPercent: percent(chosen.f0Hz, section.f0Hz),
    qErrorPercent: chosen.q === null || section.q === null ? null : percent(chosen.q, section.q),
    note: `${CONFIRM}${own}${levelNote(section)}`,
  }
}

function reasonAgainst({ response, q, zeros }: AnalogSection): string | null {
  if (response === 'band-pass') {
    return 'A band-pass section; the sheet knows circuits of low-pass and high-pass sections alone.'
  }
  if (response !== 'low-pass' && response !== 'high-pass') {
    const zeroHz = Math.max(...zeros.map(modulus)) / (2 * Math.PI)
    return `Its zeros at ${show(zeroHz)} Hz take a circuit with more parts than a Sallen–Key or multiple-feedback stage has.`
  }
  if (q !== null && q > MOST_Q) {
    return `Q = ${show(q)} is above ${MOST_Q}: with a single amplifier every part would have to be far better than 1 %.`
  }
  return null
}

function circuitsOf(section: AnalogSection, stock: Stock): readonly BuildCircuit[] {
  const { f0Hz, q } = section
  const isLow = section.response === 'low-pass'
  const found: (readonly [Wiring, Chosen | null])[] =
    q === null
      ? [[isLow ? 'rc low-pass' : 'rc high-pass', chooseRc(stock, f0Hz)]]
      : isLow
        ? [
            ['sallen-key low-pass', chooseSallenKeyLowPass(stock, { f0Hz, q })],
            ['multiple-feedback', chooseMultipleFeedback(stock, { f0Hz, q })],
          ]
        : [['sallen-key high-pass', chooseSallenKeyHighPass(stock, { f0Hz, q })]]
  return found.flatMap(([wiring, chosen]) => (chosen === null ? [] : [circuitOf(section, wiring, chosen)]))
}

/**
 * Each analog section of a chain with parts to build it of: unity-gain Sallen–Key and multiple-feedback stages for low-pass sections, the
 * Sallen–Key dual for high-pass ones, R and C for those of first order. Values are standard ones (IEC 60063) of 1 kΩ … 1 MΩ and
 * 100 pF … 1 µF; f0, Q and their errors are those of the values chosen. A proposal, to be confirmed by a circuit designer.
 *
 * @param options series of the resistors, and of the capacitors
 * @returns in signal order; a section without a circuit says why
 */
export function buildSheet(chain: Pick<ComputedChain, 'stages'>, options: BuildOptions): readonly BuildSection[] {
  const between = (series: ESeries, [from, to]: readonly [number, number]) => seriesBetween(series, from, to)
  const stock = { ohms: between(options.series, OHMS), farads: between(options.capacitors ?? 'E12', FARADS) }
  return analogSections(chain).map((section) => {
    const reason = reasonAgainst(section)
    if (reason !== null) return { ...section, circuits: [], reason }
    const circuits = circuitsOf(section, stock)
    if (circuits.length > 0) return { ...section, circuits }
    return {
      ...section,
      circuits,
      reason: `${show(section.f0Hz)} Hz is out of reach of resistors from 1 kΩ to 1 MΩ with capacitors from 100 pF to 1 µF.`,
    }
  })
}
