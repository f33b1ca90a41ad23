import type { ChainPart, ComputedChain } from './chain'

/*
 * What only depends on the filters of a chain is worked out once for all chains that have the same ones: an edit of a converter's bits, of a
 * name, of a line or of an interferer leaves the strips, the chart and the noise gain as they are.
 */

/** The chains that the last few edits led through. */
const MOST_PATHS = 12
/** Results of one path: its bands, lines and interferers, and those of a few edits before. */
const MOST_RESULTS = 160

const numbers = new WeakMap<object, number>()
let lastNumber = 0

/** Filters are kept by their statements, so that the same statement has the same number. */
function numberOf(filter: object): number {
  const known = numbers.get(filter)
  if (known !== undefined) return known
  lastNumber += 1
  numbers.set(filter, lastNumber)
  return lastNumber
}

const named = (part: ChainPart): unknown => ('filter' in part ? [part.kind, numberOf(part.filter)] : part)

const paths = new Map<string, Map<string, unknown>>()
const pathsOfChains = new WeakMap<ComputedChain, Map<string, unknown>>()

/** Asked for longest ago first. */
function recent<Value>(map: Map<string, Value>, key: string, value: Value, most: number): void {
  map.delete(key)
  map.set(key, value)
  if (map.size > most) map.delete(map.keys().next().value as string)
}

function resultsOf(chain: ComputedChain): Map<string, unknown> {
  const held = pathsOfChains.get(chain)
  if (held !== undefined) return held
  const { stages, converterIndex, converterRateHz, outputRateHz } = chain
  const key = JSON.stringify([
    converterIndex,
    converterRateHz,
    outputRateHz,
    stages.map(({ stage, inRateHz, outRateHz, unit, parts }) => [
      stage.id,
      inRateHz,
      outRateHz,
      unit,
      parts.map(named),
    ]),
  ])
  const results = paths.get(key) ?? new Map<string, unknown>()
  recent(paths, key, results, MOST_PATHS)
  pathsOfChains.set(chain, results)
  return results
}

/**
 * A result that depends on the stages' names, filters, rates and units, and on what the key says, and on nothing else of a chain.
 *
 * @param asked what the result is, with every value it depends on besides
 */
export function keptForPath<Result>(chain: ComputedChain, asked: readonly unknown[], make: () => Result): Result {
  const results = resultsOf(chain)
  const key = JSON.stringify(asked)
  const result = results.has(key) ? (results.get(key) as Result) : make()
  recent(results, key, result, MOST_RESULTS)
  return result
}
