import { Fragment } from 'react'
import type { Requirement } from '@/dsp'
import { lineOptions } from '@/lib/designs/sheet-edits'
import { fieldWords, requirementParts, type LinePart, type LineUnit } from '@/lib/designs/requirement-words'
import {
  parseCount,
  parseDecibels,
  parseDegrees,
  parseFrequency,
  parsePercent,
  parseSeconds,
  type Parsed,
} from '@/lib/units/parse'
import { InlineQuantity } from '../shell/inline-quantity'
import { stepped } from '../statement/apply'
import { ChoiceWord } from '../statement/choice-word'
import type { LineDesk } from './line-desk'

/** One line of the sheet as a sentence, each number and each word that can be otherwise editable where it stands. */
export function LineWords({
  line,
  index,
  foldHz,
  desk,
  readOnly,
}: {
  line: Requirement
  index: number
  foldHz: number
  desk: LineDesk
  readOnly: boolean
}) {
  return requirementParts(line).map((part, at) => (
    <Fragment key={part.kind === 'text' ? `text-${at}` : part.kind === 'quantity' ? part.field : part.key}>
      <Part part={part} line={line} index={index} foldHz={foldHz} desk={desk} readOnly={readOnly} />
    </Fragment>
  ))
}

function Part({
  part,
  line,
  index,
  foldHz,
  desk,
  readOnly,
}: {
  part: LinePart
  line: Requirement
  index: number
  foldHz: number
  desk: LineDesk
  readOnly: boolean
}) {
  if (part.kind === 'text') return part.text
  if (part.kind === 'choice') {
    if (readOnly) return part.text
    const { current, options } = lineOptions(line, part.key, foldHz)
    return (
      <ChoiceWord
        label={`Line ${index + 1}`}
        text={part.text}
        current={current}
        options={options}
        refusal={null}
        readOnly={false}
        onPick={(picked) => desk.setLine(index, picked.line)}
      />
    )
  }
  if (readOnly) return <span className="numeric text-[13px]">{part.text}</span>
  return (
    <InlineQuantity
      label={`Line ${index + 1}, ${fieldWords[part.field]}`}
      text={part.text}
      parse={(text) => parsed(part.unit, text, foldHz)}
      onValue={(value) => desk.setField(index, part.field, value)}
      onStep={(direction) => desk.step(index, part.field, (value) => nextValue(part.unit, value, direction))}
      onStepped={() => desk.stepped()}
    />
  )
}

function parsed(unit: LineUnit, text: string, nyquistHz: number): Parsed | Promise<Parsed> {
  switch (unit) {
    case 'Hz':
      return parseFrequency(text, { nyquistHz })
    case 'dB':
      return parseDecibels(text)
    case '°':
      return parseDegrees(text)
    case 's':
      return parseSeconds(text)
    case '%':
      return parsePercent(text)
    case 'bits':
    case 'multiplies':
      return parseCount(text)
  }
}

/** One press of an arrow key: 1 for a count, else one unit of the third digit. */
const nextValue = (unit: LineUnit, value: number, direction: 1 | -1): number =>
  unit === 'bits' || unit === 'multiplies' ? value + direction : stepped('Hz', value, direction, 'usual')
