import type { StoredChainPart, StoredDigitalStage } from '@/lib/chains/stored-numbers'
import { isStoredTaps, type StoredCoefficients } from '@/lib/designs/stored-coefficients'
import { runCascade } from './reference-run'

/*
 * The digital part of a chain, run from rest on its kept numbers alone: what firmware that is built from them must store. It knows no
 * response; a CIC filter is run by the taps that it comes to, so that firmware's integrators and combs are held to another arithmetic.
 */

/** Volts that the converter read, at its rate → stored samples in the chain's unit. */
export function runDigitalPart(
  stages: readonly StoredDigitalStage[],
  volts: Float64Array,
  voltsPerUnit: number,
): Float64Array {
  return stages.reduce(
    runStage,
    volts.map((value) => value / voltsPerUnit),
  )
}

function runStage(input: Float64Array, stage: StoredDigitalStage): Float64Array {
  switch (stage.kind) {
    case 'shape':
      return runFilter(stage.coefficients, input, 1)
    case 'integrate': {
      let signal = runFilter(stage.highPass, input, 1)
      for (let pass = 0; pass < stage.times; pass++) signal = integrate(signal, stage.rateHz)
      return signal.map((value) => value * stage.scale)
    }
    case 'decimate': {
      const cicAt = stage.parts.findIndex(({ kind }) => kind === 'cic')
      const lowersAt = cicAt >= 0 ? cicAt : stage.parts.length - 1
      return stage.parts.reduce((signal, part, at) => runPart(part, signal, at === lowersAt ? stage.factor : 1), input)
    }
  }
}

const runPart = (part: StoredChainPart, input: Float64Array, factor: number): Float64Array =>
  part.kind === 'cic' ? keptTaps(cicTaps(part), input, factor) : runFilter(part.coefficients, input, factor)

function runFilter(kept: StoredCoefficients, input: Float64Array, factor: number): Float64Array {
  if (isStoredTaps(kept)) return keptTaps(kept.taps, input, factor)
  return runCascade(kept.sections, input, 'double').filter((_, n) => n % factor === 0)
}

/** Outputs 0, factor, 2·factor … of taps. */
function keptTaps(taps: ArrayLike<number>, input: Float64Array, factor: number): Float64Array {
  return Float64Array.from({ length: Math.ceil(input.length / factor) }, (_, m) => {
    const n = m * factor
    let sum = 0
    for (let k = Math.min(taps.length - 1, n); k >= 0; k--) sum += (taps[k] ?? 0) * (input[n - k] ?? 0)
    return sum
  })
}

/** So many running means, one behind the other (Hogenauer 1981, equation 3), as taps. */
function cicTaps({ order, combDelay, factor }: Extract<StoredChainPart, { kind: 'cic' }>): Float64Array {
  const span = factor * combDelay
  let taps = Float64Array.of(1)
  for (let pass = 0; pass < order; pass++) {
    const before = taps
    taps = Float64Array.from({ length: before.length + span - 1 }, (_, n) => {
      let sum = 0
      for (let k = Math.max(0, n - span + 1); k <= Math.min(n, before.length - 1); k++) sum += before[k] ?? 0
      return sum / span
    })
  }
  return taps
}

/** The trapezoidal rule, from rest. */
function integrate(input: Float64Array, rateHz: number): Float64Array {
  let sum = 0
  let before = 0
  return input.map((value) => {
    sum += (value + before) / (2 * rateHz)
    before = value
    return sum
  })
}

/** Input samples that finite responses of the stages reach back over, at the converter's rate. */
export function reachOf(stages: readonly StoredDigitalStage[]): number {
  let step = 1
  let reach = 0
  const filterReach = (kept: StoredCoefficients) =>
    isStoredTaps(kept) ? kept.taps.length - 1 : 2 * kept.sections.length
  for (const stage of stages) {
    if (stage.kind !== 'decimate') {
      reach += step * filterReach(stage.kind === 'shape' ? stage.coefficients : stage.highPass)
      continue
    }
    const lowered = step * stage.factor
    for (const [at, part] of stage.parts.entries()) {
      if (part.kind === 'cic') reach += step * part.order * (part.factor * part.combDelay - 1)
      else reach += (at === 0 ? step : lowered) * filterReach(part.coefficients)
    }
    step = lowered
  }
  return reach
}
