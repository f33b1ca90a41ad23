import { bestDelay, chainResponse, type ChainResponse, type ComputedChain } from '@/dsp'
import type { Span } from '@/components/plot/scale'

/* From sensor to stored sample over frequency, as the drawer draws it. */

const POINTS = 512

/** A logarithmic axis up to half the output rate, from a decade under what is kept; three decades at least, five at most. */
export function responseSpan({ spec, outputRateHz }: ComputedChain): Span {
  const to = outputRateHz / 2
  const wished = spec.kept.fromHz > 0 ? spec.kept.fromHz / 2 : to / 1000
  return [Math.min(to / 100, Math.max(to / 1e5, wished)), to]
}

function responseFrequencies(chain: ComputedChain): Float64Array {
  const [from, to] = responseSpan(chain)
  return Float64Array.from({ length: POINTS }, (_, k) =>
    k === POINTS - 1 ? to : from * (to / from) ** (k / (POINTS - 1)),
  )
}

export interface ResponseCurves extends ChainResponse {
  readonly phaseDegrees: Float64Array
  /** From the straight line whose constant delay best explains the phase in the kept band. */
  readonly departureDegrees: Float64Array
  readonly removedDelaySeconds: number
}

export function responseCurves(chain: ComputedChain): ResponseCurves {
  const response = chainResponse(chain, responseFrequencies(chain))
  const { frequenciesHz, phaseRadians } = response
  const { fromHz, toHz } = chain.spec.kept
  const isKept = Uint8Array.from(frequenciesHz, (hz) => (hz >= fromHz && hz <= toHz ? 1 : 0))
  const removedDelaySeconds = bestDelay(frequenciesHz, phaseRadians, isKept)
  const degrees = (radians: number) => (radians * 180) / Math.PI
  return {
    ...response,
    phaseDegrees: phaseRadians.map(degrees),
    departureDegrees: phaseRadians.map((radians, n) =>
      degrees(radians + 2 * Math.PI * (frequenciesHz[n] ?? 0) * removedDelaySeconds),
    ),
    removedDelaySeconds,
  }
}
