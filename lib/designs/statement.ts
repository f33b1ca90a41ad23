import { isFamilyDesign, isFirDesign, type DesignSpec, type FamilyDesign, type OwnDesign } from '@/dsp'
import { firOpening } from './fir-statement'
import { choice, decibels, hertz, order, poles, text, type StatementPart } from './statement-parts'
import { familyWords, methodWords, ownWords, responseWords } from './words'

export type { QuantityUnit, StatementPart, WordKey } from './statement-parts'

/** The design as a sentence, in parts. */
export function statementParts(spec: DesignSpec): readonly StatementPart[] {
  const rate = [text(', run at '), hertz('sampleRateHz', spec.sampleRateHz)]
  if (isFirDesign(spec)) return [...firOpening(spec), ...rate, text('.')]
  const opening = isFamilyDesign(spec) ? [...familyOpening(spec), ...edgePhrase(spec)] : ownOpening(spec)
  return [...opening, ...rate, text(' by the '), ...methodPhrase(spec), text('.')]
}

/** The same sentence as one string. */
export function statementText(spec: DesignSpec): string {
  return statementParts(spec)
    .map((part) => part.text)
    .join('')
}

function familyOpening({ analog }: FamilyDesign): StatementPart[] {
  return [
    text('A '),
    choice('analog.response', responseWords[analog.response]),
    text(' '),
    choice('analog.family', familyWords[analog.family]),
    text(' of '),
    order('analog.order', analog.order),
  ]
}

function ownOpening({ own }: OwnDesign): StatementPart[] {
  return [text('The response “'), text(own.name), text('”, '), choice('own.given', ownWords[own.given])]
}

function edgePhrase({ analog }: FamilyDesign): StatementPart[] {
  const [first = 0, second] = analog.edgesHz
  const ripple = decibels('analog.rippleDb', analog.rippleDb ?? 0)
  const attenuation = decibels('analog.attenuationDb', analog.attenuationDb ?? 0)
  const low = hertz('analog.edgesHz.0', first)
  const both = second === undefined ? [low] : [low, text(' and '), hertz('analog.edgesHz.1', second)]
  const reach = passBandReach(analog.response, low, second)

  switch (analog.family) {
    case 'chebyshev1':
      return [text(', with '), ripple, text(' of ripple '), ...reach]
    case 'elliptic':
      return [
        text(', with '),
        ripple,
        text(' of ripple '),
        ...reach,
        text(' and '),
        attenuation,
        text(analog.response === 'bandstop' ? ' down between them' : ' down beyond'),
      ]
    case 'chebyshev2':
      return [text(', '), attenuation, text(` down from `), ...both]
    case 'bessel':
      return [
        text(', '),
        choice('analog.normalization', besselWords[analog.normalization ?? 'magnitude']),
        text(' '),
        ...both,
      ]
    default:
      return [text(', down 3\u2009dB at '), ...both]
  }
}

export const besselWords = {
  magnitude: 'down 3\u2009dB at',
  delay: 'delay-normalised at',
  phase: 'phase-matched at',
} as const

function passBandReach(
  response: FamilyDesign['analog']['response'],
  low: StatementPart,
  second?: number,
): StatementPart[] {
  const high = hertz('analog.edgesHz.1', second ?? 0)
  switch (response) {
    case 'lowpass':
      return [text('to '), low]
    case 'highpass':
      return [text('from '), low]
    case 'bandpass':
      return [text('from '), low, text(' to '), high]
    case 'bandstop':
      return [text('to '), low, text(' and from '), high]
  }
}

function methodPhrase(spec: FamilyDesign | OwnDesign): StatementPart[] {
  const { how } = spec
  const method = choice('how.method', methodWords[how.method])
  switch (how.method) {
    case 'bilinear': {
      if (how.hold === 'none') return [method, text(', '), choice('how.hold', 'not held')]
      if (how.hold === 'edges') {
        const several = isFamilyDesign(spec) && spec.analog.edgesHz.length > 1
        return [method, text(' '), choice('how.hold', several ? 'held at both edges' : 'held at its edge')]
      }
      return [method, text(' '), choice('how.hold', 'held at'), text(' '), hertz('how.holdHz', how.hold)]
    }
    case 'impulse-invariant':
      return [method, text(', '), choice('how.options', impulseWords(how))]
    case 'fitted':
      return [
        method,
        ...(how.order === undefined ? [] : [text(' with '), poles('how.order', how.order)]),
        text(' up to '),
        hertz('how.upToHz', how.upToHz),
        text(', '),
        choice('how.options', fittedWords(how)),
      ]
    default:
      return [method]
  }
}

export const fittedWords = ({ freeDelay }: { freeDelay?: boolean | undefined }): string =>
  freeDelay ? 'one delay free' : 'delay kept'

export function impulseWords(how: {
  halfFirstSample?: boolean | undefined
  restoreGain?: boolean | undefined
}): string {
  if (how.halfFirstSample && how.restoreGain) return 'first sample halved, gain restored'
  if (how.halfFirstSample) return 'first sample halved'
  if (how.restoreGain) return 'gain restored'
  return 'as sampled'
}
