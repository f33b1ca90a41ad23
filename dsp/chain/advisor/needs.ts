import { show } from '../../check'
import { DesignError } from '../../errors'
import type { ComputedChain } from '../chain'
import { largest } from '../../requirements/extremes'
import { chainGrid } from '../band-grid'
import { worstAlias } from '../folding'
import { stageMagnitudeDb } from '../response'
import type { ChainSpec } from '../spec'
import { departureOf } from '../usable-band'

/** A line of the sheet that the advisor works to; `index` is null for one that it takes because the sheet has none. */
interface Line {
  readonly index: number | null
}

export interface FlatLine extends Line {
  readonly fromHz: number
  readonly toHz: number
  readonly withinDb: number
}

export interface AliasLine extends Line {
  readonly toHz: number
  readonly atLeastDb: number
}

export interface Needs {
  readonly flat: readonly FlatLine[]
  readonly alias: readonly AliasLine[]
  /** What was taken because the sheet doesn't say. */
  readonly notes: readonly string[]
  /** Highest frequency that is to be flat. */
  readonly passHz: number
  /** Highest frequency that is to be free of images. */
  readonly cleanHz: number
  readonly aliasDb: number
}

const USUAL_RIPPLE_DB = 0.5
const MOST_USUAL_ALIAS_DB = 80

/** Full-scale sine over the noise of the converter up to half its rate, dB: 6.02·B + 1.76 for B bits. */
function converterFloorDb({ stages }: ChainSpec): number {
  const converter = stages.find((stage) => stage.kind === 'converter')
  if (converter === undefined) return MOST_USUAL_ALIAS_DB
  const { resolution, fullScaleVolts, sampleRateHz } = converter
  if (resolution.by === 'bits') return 20 * Math.log10(2) * resolution.bits + 10 * Math.log10(1.5)
  const noise = resolution.voltsPerRootHz * Math.sqrt(sampleRateHz / 2)
  return 20 * Math.log10(fullScaleVolts / Math.SQRT2 / noise)
}

/** What the sheet asks of flatness and images, with usual values where it asks nothing. */
export function needsOf(spec: ChainSpec): Needs {
  const { kept, sheet } = spec
  const flat: FlatLine[] = []
  const alias: AliasLine[] = []
  sheet.forEach((line, index) => {
    if (line.kind === 'flatness') flat.push({ index, fromHz: line.fromHz, toHz: line.toHz, withinDb: line.withinDb })
    if (line.kind === 'alias-floor') alias.push({ index, toHz: line.toHz, atLeastDb: line.atLeastDb })
    if (line.kind !== 'usable-band') return
    flat.push({ index, fromHz: kept.fromHz, toHz: line.toHz, withinDb: line.rippleDb })
    alias.push({ index, toHz: line.toHz, atLeastDb: line.aliasDb })
  })
  const notes: string[] = []
  if (flat.length === 0) {
    flat.push({ index: null, fromHz: kept.fromHz, toHz: kept.toHz, withinDb: USUAL_RIPPLE_DB })
    notes.push(`The sheet asks for no flatness; ±${USUAL_RIPPLE_DB} dB over the kept band was taken.`)
  }
  if (alias.length === 0) {
    const floor = Math.min(MOST_USUAL_ALIAS_DB, Math.max(6, Math.floor(converterFloorDb(spec))))
    alias.push({ index: null, toHz: kept.toHz, atLeastDb: floor })
    const why = floor === MOST_USUAL_ALIAS_DB ? 'as is usual' : 'where the noise of the converter lies'
    notes.push(`The sheet asks for no alias floor; ${floor} dB over the kept band was taken, ${why}.`)
  }
  return {
    flat,
    alias,
    notes,
    passHz: Math.max(...flat.map(({ toHz }) => toHz)),
    cleanHz: Math.max(...alias.map(({ toHz }) => toHz)),
    aliasDb: Math.max(...alias.map(({ atLeastDb }) => atLeastDb)),
  }
}

const POINTS = 129

/** Even points over a line's band, both ends included. */
export const gridOf = ({ fromHz, toHz }: Pick<FlatLine, 'fromHz' | 'toHz'>): Float64Array =>
  Float64Array.from({ length: POINTS }, (_, n) => fromHz + ((toHz - fromHz) * n) / (POINTS - 1))

export interface Figures {
  /** Largest departure from unity over the flat lines. */
  readonly rippleDb: number
  /** How far down the worst image is below `cleanHz`; positive. */
  readonly aliasDb: number
  /** Room left, in dB: of the flat line and of the alias line that have least of it. Negative when missed. */
  readonly flatRoomDb: number
  readonly aliasRoomDb: number
  readonly meets: boolean
}

/** How a computed chain stands to the needs. */
export function figuresFor(chain: ComputedChain, { flat, alias }: Needs): Figures {
  let rippleDb = 0
  let flatRoomDb = Infinity
  for (const line of flat) {
    const most = largest(departureOf(chain), chainGrid(chain, line.fromHz, line.toHz)).value
    rippleDb = Math.max(rippleDb, most)
    flatRoomDb = Math.min(flatRoomDb, line.withinDb - most)
  }
  let aliasDb = Infinity
  let aliasRoomDb = Infinity
  for (const { toHz, atLeastDb } of alias) {
    const down = -worstAlias(chain, toHz).levelDb
    aliasDb = Math.min(aliasDb, down)
    aliasRoomDb = Math.min(aliasRoomDb, down - atLeastDb)
  }
  return { rippleDb, aliasDb, flatRoomDb, aliasRoomDb, meets: flatRoomDb >= 0 && aliasRoomDb >= 0 }
}

/** Level of some stages together, dB. */
export function levelOf(chain: ComputedChain, stages: readonly number[], hertz: Float64Array): Float64Array {
  const level = new Float64Array(hertz.length)
  for (const index of stages) stageMagnitudeDb(chain, index, hertz).forEach((value, n) => (level[n]! += value))
  return level
}

/** A refusal that names the line that stops the advisor. */
export function stoppedBy(line: FlatLine | AliasLine, why: string, nearestDb?: number): DesignError {
  const isFlat = 'withinDb' in line
  const asked = isFlat
    ? `±${show(line.withinDb)} dB from ${show(line.fromHz)} Hz to ${show(line.toHz)} Hz`
    : `images ${show(line.atLeastDb)} dB down to ${show(line.toHz)} Hz`
  const field = line.index === null ? 'sheet' : `sheet.${line.index}`
  const name = line.index === null ? 'What is usual' : `Line ${line.index + 1} of the sheet`
  const message = `${name} (${asked}) can’t be met: ${why}`
  return new DesignError(isFlat ? 'flatness-out-of-reach' : 'alias-out-of-reach', field, message, nearestDb)
}
