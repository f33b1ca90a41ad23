import type { FirBand, FirDesign } from '@/dsp'
import { choice, decibels, factor, hertz, taps, text, type StatementPart, type WordKey } from './statement-parts'
import { firKindWords, firResponseWords, firWindowWords } from './words'

/** What a kind of FIR filter is called, with its window where it has one. */
export function firName({ kind, window }: Pick<FirDesign['fir'], 'kind' | 'window'>): string {
  if (window === undefined) return `${firKindWords[kind]} FIR`
  return kind === 'half-band'
    ? `${firWindowWords[window]}-windowed half-band FIR`
    : `${firWindowWords[window]}-windowed FIR`
}

/** "A low-pass equiripple FIR of 63 taps, passing to 120 Hz and stopping from 180 Hz". */
export function firOpening({ fir, sampleRateHz }: FirDesign): StatementPart[] {
  return [
    text('A '),
    choice('fir.response', firResponseWords[fir.response]),
    text(' '),
    choice('fir.kind', firName(fir)),
    text(' of '),
    taps('fir.taps', fir.taps),
    text(', '),
    ...joinedBands(fir, sampleRateHz / 2),
    ...(fir.attenuationDb === undefined
      ? []
      : [text(', side lobes '), decibels('fir.attenuationDb', fir.attenuationDb), text(' down')]),
    ...weightPhrase(fir.bands),
  ]
}

function joinedBands({ bands, response }: FirDesign['fir'], fold: number): StatementPart[] {
  return bands.flatMap((band, index) => {
    const between = index === 0 ? [] : [text(index === bands.length - 1 ? ' and ' : ', ')]
    return [...between, ...bandPhrase(band, index, response, fold)]
  })
}

/** An end at 0 Hz or at half the rate goes without saying. */
function bandPhrase(band: FirBand, index: number, response: FirDesign['fir']['response'], fold: number) {
  const from = hertz(`fir.bands.${index}.fromHz`, band.fromHz)
  const to = hertz(`fir.bands.${index}.toHz`, band.toHz)
  const span =
    band.fromHz === 0
      ? [text(' to '), to]
      : band.toHz === fold
        ? [text(' from '), from]
        : [text(' from '), from, text(' to '), to]
  if (response === 'differentiator')
    return [text('times '), factor(`fir.bands.${index}.gain`, band.gain), text(' per second'), ...span]
  if (response === 'multiband') return [text('gain '), factor(`fir.bands.${index}.gain`, band.gain), ...span]
  return [text(band.gain === 0 ? 'stopping' : 'passing'), ...span]
}

function weightPhrase(bands: readonly FirBand[]): StatementPart[] {
  if (bands.every(({ weight }) => weight === undefined)) return []
  return [
    text(', weighted '),
    ...bands.flatMap((band, index) => [
      ...(index === 0 ? [] : [text(' : ')]),
      factor(`fir.bands.${index}.weight` satisfies WordKey, band.weight ?? 1),
    ]),
  ]
}
