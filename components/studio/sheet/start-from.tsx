import { useId, useState } from 'react'
import { DesignError, requirementTemplates, type RequirementSheet, type RequirementTemplate } from '@/dsp'
import { Button } from '@/components/ui/button'
import { parseCount } from '@/lib/units/parse'
import { orRefusal } from '../or-refusal'
import { InlineQuantity } from '../shell/inline-quantity'

const FEWEST_BITS = 4
const MOST_BITS = 32
const lines = (count: number): string => `${count} ${count === 1 ? 'line' : 'lines'}`

/** Sheets for usual jobs, each with where its numbers come from. One that would replace lines says how many, and asks once more. */
export function StartFrom({
  sampleRateHz,
  lineCount,
  onStart,
}: {
  sampleRateHz: number
  lineCount: number
  onStart(sheet: RequirementSheet): void
}) {
  const [bits, setBits] = useState(16)
  const [asked, setAsked] = useState<string | null>(null)
  const headingId = useId()
  return (
    <section aria-labelledby={headingId} className="mt-2 border-l border-graph-strong pl-3">
      <h3 id={headingId} className="text-[13px] font-semibold text-pencil">
        Start from
      </h3>
      <ul>
        {requirementTemplates.map((template) => (
          <li key={template.id} className="border-b border-graph py-1.5 text-[13px] leading-5 last:border-b-0">
            <Template
              template={template}
              sheet={orRefusal(() => template.sheet({ sampleRateHz, bits }))}
              lineCount={lineCount}
              isAsked={asked === template.id}
              onAsk={setAsked}
              onStart={onStart}
            >
              {template.id === 'anti-alias' ? (
                <p>
                  Converter of{' '}
                  <InlineQuantity
                    label="Bits of the converter"
                    text={`${bits} bits`}
                    parse={parseCount}
                    onValue={(value) => {
                      if (value < FEWEST_BITS || value > MOST_BITS) {
                        const nearest = value > MOST_BITS ? MOST_BITS : FEWEST_BITS
                        const message = `A converter has ${FEWEST_BITS} to ${MOST_BITS} bits here.`
                        return { message, nearest, nearestText: `${nearest} bits` }
                      }
                      setBits(value)
                      return null
                    }}
                  />
                </p>
              ) : null}
            </Template>
          </li>
        ))}
      </ul>
    </section>
  )
}

function Template({
  template,
  sheet,
  lineCount,
  isAsked,
  onAsk,
  onStart,
  children,
}: {
  template: RequirementTemplate
  sheet: RequirementSheet | DesignError
  lineCount: number
  isAsked: boolean
  onAsk(id: string | null): void
  onStart(sheet: RequirementSheet): void
  children: React.ReactNode
}) {
  const { id, title, source, note } = template
  const sourceId = useId()
  return (
    <>
      <p className="text-[14px] font-semibold">{title}</p>
      {children}
      <p id={sourceId} className="text-pencil">
        Source: {source}
      </p>
      {note ? <p className="text-pencil">{note}</p> : null}
      {sheet instanceof DesignError ? (
        <p className="text-vermilion">{sheet.message}</p>
      ) : isAsked ? (
        <p role="alert" className="mt-1 flex flex-wrap items-center gap-2">
          <span>
            {lines(lineCount)} {lineCount === 1 ? 'goes' : 'go'}, {lines(sheet.length)} come. Undo brings the old ones
            back.
          </span>
          <Button small kind="destructive" autoFocus onClick={() => onStart(sheet)}>
            Replace {lines(lineCount)}
          </Button>
          <Button small onClick={() => onAsk(null)}>
            Keep the sheet
          </Button>
        </p>
      ) : (
        <Button
          small
          className="mt-1"
          aria-label={`Start from ${title}`}
          aria-describedby={sourceId}
          onClick={() => (lineCount === 0 ? onStart(sheet) : onAsk(id))}
        >
          Start from this, {lines(sheet.length)}
        </Button>
      )}
    </>
  )
}
