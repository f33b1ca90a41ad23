import { DesignError } from '../errors'
import { isFir, type AnyDigital, type Filter } from '../forms/filter'
import { createTapsRunner } from '../fir/run-taps'
import { matrixExponential } from '../numeric/matrix-exponential'
import { createRunner } from '../signal/run'
import type { AnyFilter } from './factors'
import type { StateSpace } from './state-space'
import { realise } from './state-space'

/** Where a response in time is wanted. A digital filter has its own instants n/fs, and only `count` matters to it. */
export interface TimeGrid {
  readonly count: number
  /** Analog: seconds between values; or give `sampleRateHz`, whose inverse it is. */
  readonly stepSeconds?: number
  readonly sampleRateHz?: number
  /** Analog: time of the first value, 0 by default; before 0 the response is 0. */
  readonly startSeconds?: number
}

export interface TimeResponse {
  readonly timesSeconds: Float64Array
  readonly values: Float64Array
  /** Unit of the values for a dimensionless filter: an analog impulse response is a density in time. */
  readonly unit: '1/s' | '1'
  /** Area of the Dirac impulse at t = 0 that an analog filter with as many zeros as poles passes straight through; else 0. */
  readonly impulseArea: number
}

function checkGrid(grid: TimeGrid): number {
  if (!Number.isInteger(grid.count) || grid.count < 1) {
    throw new DesignError('count', 'count', 'At least one value must be asked for.', 1)
  }
  const step = grid.stepSeconds ?? (grid.sampleRateHz === undefined ? undefined : 1 / grid.sampleRateHz)
  if (step === undefined || !(step > 0) || !Number.isFinite(step)) {
    throw new DesignError('not-positive', 'stepSeconds', 'The time between values must be above 0 s.')
  }
  return step
}

/** A system that walks along in equal steps; `x` holds its state, to which a constant input of 1 may be appended. */
interface Walk {
  readonly size: number
  readonly system: Float64Array
  readonly output: Float64Array
  readonly rate: number
  x: Float64Array
}

function startWalk(space: StateSpace, kind: 'impulse' | 'step'): Walk {
  const { order, a, b, c, d, radiansPerSecond } = space
  if (kind === 'impulse') return { size: order, system: a, output: c, rate: radiansPerSecond, x: b.slice() }
  // [A B; 0 0] has the input among its states, so that its exponential gives the exact response to a held input (Van Loan 1978).
  const size = order + 1
  const system = new Float64Array(size * size)
  for (let i = 0; i < order; i++) {
    system.set(a.subarray(i * order, (i + 1) * order), i * size)
    system[i * size + order] = b[i]!
  }
  const x = new Float64Array(size)
  x[order] = 1
  return { size, system, output: Float64Array.from([...c, d]), rate: radiansPerSecond, x }
}

const transition = (walk: Walk, seconds: number): Float64Array =>
  matrixExponential(
    walk.size,
    walk.system.map((value) => value * walk.rate * seconds),
  )

function advance(walk: Walk, matrix: Float64Array, spare: Float64Array): Float64Array {
  const { size, x } = walk
  for (let i = 0; i < size; i++) {
    let sum = 0
    for (let j = 0; j < size; j++) sum += matrix[i * size + j]! * x[j]!
    spare[i] = sum
  }
  walk.x = spare
  return x
}

function read(walk: Walk): number {
  let sum = 0
  for (let j = 0; j < walk.size; j++) sum += walk.output[j]! * walk.x[j]!
  return sum
}

function analogResponse(filter: Filter<'s'>, grid: TimeGrid, kind: 'impulse' | 'step'): TimeResponse {
  const step = checkGrid(grid)
  const start = grid.startSeconds ?? 0
  if (!Number.isFinite(start))
    throw new DesignError('not-finite', 'startSeconds', 'The first time must be a finite number.')
  const space = realise(filter)
  const walk = startWalk(space, kind)
  const scale = kind === 'impulse' ? space.radiansPerSecond : 1
  const timesSeconds = Float64Array.from({ length: grid.count }, (_, n) => start + n * step)
  const values = new Float64Array(grid.count)
  const impulseArea = kind === 'impulse' ? space.d : 0
  const unit = kind === 'impulse' ? '1/s' : '1'
  const first = timesSeconds.findIndex((time) => time >= 0)
  if (first >= 0) {
    let spare: Float64Array = new Float64Array(walk.size)
    const offset = timesSeconds[first]!
    if (offset > 0) spare = advance(walk, transition(walk, offset), spare)
    const matrix = transition(walk, step)
    for (let n = first; n < grid.count; n++) {
      values[n] = read(walk) * scale
      spare = advance(walk, matrix, spare)
    }
  }
  return { timesSeconds, values, unit, impulseArea }
}

function digitalResponse(filter: AnyDigital, grid: TimeGrid, kind: 'impulse' | 'step'): TimeResponse {
  checkGrid({ count: grid.count, sampleRateHz: filter.sampleRateHz })
  const input = new Float64Array(grid.count)
  if (kind === 'impulse') input[0] = 1
  else input.fill(1)
  const values = new Float64Array(grid.count)
  const runner = isFir(filter) ? createTapsRunner(filter.taps) : createRunner(filter.sections)
  runner.process(input, values)
  const timesSeconds = Float64Array.from({ length: grid.count }, (_, n) => n / filter.sampleRateHz)
  return { timesSeconds, values, unit: '1', impulseArea: 0 }
}

/**
 * Impulse response.
 *
 * Analog: h(t) in 1/s at equally spaced times, from the exact matrix exponential of a cascade of sections over one step, which
 * repeated poles don't upset; h(0) is the value just after the impulse. Where the filter isn't strictly proper, the impulse that it
 * passes straight through is not among the values but in `impulseArea`.
 * Digital: h[n], the output for one sample of 1. A digital version of an analog filter has h[n] ≈ h(n/fs)/fs.
 *
 * @param grid see {@link TimeGrid}
 * @returns `count` times in seconds and values
 * @throws DesignError `improper`, `count`, `not-positive`
 * Source: C. F. Van Loan, Computing integrals involving the matrix exponential, IEEE Trans. Automat. Contr. 23(3), 1978.
 */
export function impulseResponse(filter: AnyFilter, grid: TimeGrid): TimeResponse {
  return filter.domain === 's' ? analogResponse(filter, grid, 'impulse') : digitalResponse(filter, grid, 'impulse')
}

/**
 * Response to a unit step at t = 0 (analog) or n = 0 (digital); dimensionless in both.
 * @see impulseResponse
 */
export function stepResponse(filter: AnyFilter, grid: TimeGrid): TimeResponse {
  return filter.domain === 's' ? analogResponse(filter, grid, 'step') : digitalResponse(filter, grid, 'step')
}
