import type { ResponseKind } from '../spec'
import type { Outline } from './outline'

/*
 * Where the edges of a recursive filter may lie: from the edges of what is kept to the edges of what is lost. They slide together by one
 * number Ω, the frequency of the low-pass prototype (1 at the pass edges), on the axis on which the filter will be designed: warped for
 * the bilinear transform with its edges held, plain for the others. That is the slide of the published order formulas.
 */

export interface Slide {
  readonly response: ResponseKind
  /** Ω at the narrow end and the wide end. */
  readonly narrow: number
  readonly wide: number
  readonly edgesAt: (omega: number) => readonly number[]
}

/** A tone alone has no width; a pass or stop band about it gets this part of the way to its neighbours, on a log scale. */
const TONE_WIDTH = 0.02
/** Up to half the power the edge of a filter may lie outside the band it keeps. */
const HALF_POWER_DB = 3.0102
/** How far beyond its band an edge may go, in Ω. */
const BEYOND = 8

interface Edges {
  readonly pass: readonly number[]
  readonly stop: readonly number[]
}

/** Innermost edges, band tones widened. */
function edgesOf({ stretches, response }: Outline): Edges {
  const [first, second, third] = stretches
  if (first === undefined || second === undefined) return { pass: [], stop: [] }
  if (response === 'lowpass') return { pass: [first.toHz], stop: [second.fromHz] }
  if (response === 'highpass') return { pass: [second.fromHz], stop: [first.toHz] }
  if (third === undefined) return { pass: [], stop: [] }
  const outer = [first.toHz, third.fromHz]
  let inner = [second.fromHz, second.toHz]
  if (second.fromHz === second.toHz) {
    const room = Math.min(second.fromHz / first.toHz, third.fromHz / second.toHz) ** TONE_WIDTH
    inner = [second.fromHz / room, second.toHz * room]
  }
  return response === 'bandpass' ? { pass: inner, stop: outer } : { pass: outer, stop: inner }
}

/** The pass edges of a band-stop about a lone tone, moved in so that the tone is their geometric mean. */
function centred(pass: readonly number[], centre: number): readonly number[] {
  const [low = 0, high = 0] = pass
  const ratio = Math.min(high / centre, centre / low)
  return [centre / ratio, centre * ratio]
}

/** The slide of an outline of two or three stretches. */
export function slideOf(outline: Outline, isWarped: boolean): Slide | null {
  const { response, stretches, sampleRateHz } = outline
  if (response === 'multiband') return null
  const forward = (hz: number) => (isWarped ? Math.tan((Math.PI * hz) / sampleRateHz) : hz)
  const back = (x: number) => (isWarped ? (Math.atan(x) * sampleRateHz) / Math.PI : x)
  const edges = edgesOf(outline)
  const stop = edges.stop.map(forward)
  let pass = edges.pass.map(forward)
  const middle = stretches[1]
  if (stretches.length === 3 && middle !== undefined && middle.fromHz === middle.toHz && response === 'bandstop') {
    pass = [...centred(pass, forward(middle.fromHz))]
  }
  const [p1 = 0, p2 = 0] = pass
  const square = p1 * p2
  const ratio = (x: number): number => {
    if (response === 'lowpass') return x / p1
    if (response === 'highpass') return p1 / x
    const band = Math.abs(x * x - square) / ((p2 - p1) * x)
    return response === 'bandpass' ? band : 1 / band
  }
  const tightest = Math.min(...stop.map(ratio))
  const kept = stretches.filter(({ isKept }) => isKept)
  const lost = stretches.filter(({ isKept }) => !isKept)
  const isMild = Math.max(...kept.map(({ mildestDb }) => mildestDb)) > HALF_POWER_DB
  const isShallow = Math.min(...lost.map(({ mildestDb }) => mildestDb)) < HALF_POWER_DB
  if (!(tightest > 1)) return null
  return {
    response,
    narrow: isMild ? 1 / BEYOND : 1,
    wide: isShallow ? tightest * BEYOND : tightest,
    edgesAt: (omega) => {
      if (response === 'lowpass') return [back(omega * p1)]
      if (response === 'highpass') return [back(p1 / omega)]
      const width = response === 'bandpass' ? omega * (p2 - p1) : (p2 - p1) / omega
      const high = (width + Math.sqrt(width * width + 4 * square)) / 2
      return [back(square / high), back(high)]
    },
  }
}
