import { solveDamped } from './cholesky'

/** A sum of squares about one point: JᵀJ (row by row), Jᵀr, and |r|². */
export interface Linearised {
  readonly normal: Float64Array
  readonly gradient: Float64Array
  readonly cost: number
}

/** A least-squares problem whose unknowns live in a state of the caller's own; steps are taken in coordinates about that state. */
export interface SquaresProblem<State> {
  readonly cost: (state: State) => number
  readonly linearise: (state: State) => Linearised
  /** The state a step away. */
  readonly moved: (state: State, step: Float64Array) => State
}

const FIRST_DAMPING = 1e-3
const LEAST_DAMPING = 1e-13
const MOST_DAMPING = 1e8
/** A valley may be flat for a step or two before it falls again. */
const SLOW_STEPS = 3

/** What ends an iteration. */
export interface Stop {
  /** Upper limit of linearisations. */
  readonly steps: number
  /** Three steps in a row that each lower the cost by less than this part of it are the last. */
  readonly tolerance: number
  /** A cost that is low enough. */
  readonly cost: number
}

/**
 * Damped Gauss–Newton iteration (K. Levenberg 1944; D. W. Marquardt 1963; the damping follows the gain ratio as in H. B. Nielsen,
 * IMM-REP-1999-05). Deterministic; the cost never rises.
 *
 * @returns where it ended, and the linearisations it took
 */
export function levenbergMarquardt<State>(
  problem: SquaresProblem<State>,
  start: State,
  stop: Stop,
): { readonly state: State; readonly cost: number; readonly steps: number } {
  let state = start
  let cost = problem.cost(state)
  let damping = FIRST_DAMPING
  let growth = 2
  let steps = 0
  let slow = 0
  while (steps < stop.steps && cost > stop.cost) {
    const here = problem.linearise(state)
    steps += 1
    const downhill = here.gradient.map((value) => -value)
    let fall = 0
    while (damping <= MOST_DAMPING && fall === 0) {
      const step = solveDamped(here.normal, downhill, damping)
      const next = step === null ? state : problem.moved(state, step)
      const reached = step === null ? Infinity : problem.cost(next)
      if (step === null || !(reached < cost)) {
        damping *= growth
        growth *= 2
        continue
      }
      const promised = promisedFall(here, step)
      const ratio = promised > 0 ? (cost - reached) / promised : 1
      damping = Math.max(LEAST_DAMPING, damping * Math.max(1 / 10, 1 - (2 * ratio - 1) ** 3))
      growth = 2
      fall = (cost - reached) / cost
      state = next
      cost = reached
    }
    if (fall === 0) break
    slow = fall < stop.tolerance ? slow + 1 : 0
    if (slow >= SLOW_STEPS) break
  }
  return { state, cost, steps }
}

/** What the linear model says the cost falls by. */
function promisedFall({ normal, gradient }: Linearised, step: Float64Array): number {
  const n = step.length
  let fall = 0
  for (let i = 0; i < n; i++) {
    fall -= 2 * gradient[i]! * step[i]!
    for (let j = 0; j < n; j++) {
      const entry = j <= i ? normal[i * n + j]! : normal[j * n + i]!
      fall -= step[i]! * entry * step[j]!
    }
  }
  return fall
}
