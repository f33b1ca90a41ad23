'use client'

import { useEffect, useMemo, useRef, useState } from 'react'
import { contradictions, type DesignSpec } from '@/dsp'
import { Button } from '@/components/ui/button'
import { classNames } from '@/lib/format/class-names'
import { sheetSummary } from '@/lib/designs/requirement-words'
import { hasRoomForLine, sheetOf } from '@/lib/designs/sheet-edits'
import type { StudioStore } from '../store'
import { AddLine } from './add-line'
import { useJudgements, type Judgements } from './judge'
import { lineDesk, type LineDesk } from './line-desk'
import { SheetLine } from './sheet-line'
import { StartFrom } from './start-from'

/** The requirement sheet at the pace of words: what the design must meet, line by line, and by how much it does. */
export function SheetPanel({ store, spec, readOnly }: { store: StudioStore; spec: DesignSpec; readOnly: boolean }) {
  const judgements = useJudgements(spec)
  const desk = useMemo(() => lineDesk(store), [store])
  return <SheetView spec={spec} judgements={judgements} desk={desk} readOnly={readOnly} />
}

export function SheetView({
  spec,
  judgements,
  desk,
  readOnly,
}: {
  spec: DesignSpec
  judgements: Judgements
  desk: LineDesk
  readOnly: boolean
}) {
  const sheet = sheetOf(spec)
  const clashes = useMemo(() => contradictions(sheet, spec.sampleRateHz), [sheet, spec.sampleRateHz])
  const [choosing, setChoosing] = useState(false)
  const section = useRef<HTMLElement>(null)
  // A line that was added takes the focus once it is there.
  const awaited = useRef<number | null>(null)
  useEffect(() => {
    if (awaited.current === null || sheet.length <= awaited.current) return
    // Whoever has gone on to something else meanwhile isn't called back.
    const at = document.activeElement
    if (at === null || at === document.body || at.closest('[role="menu"], [data-tool="add"]') !== null)
      section.current?.querySelector<HTMLElement>(`[data-line="${awaited.current}"] input`)?.focus()
    awaited.current = null
  }, [sheet])

  const focus = (selector: string) => section.current?.querySelector<HTMLElement>(selector)?.focus()

  return (
    <section ref={section} aria-labelledby="sheet-heading">
      <h2 id="sheet-heading" className="font-text text-[13px] font-semibold text-pencil">
        Requirement sheet
      </h2>
      {sheet.length > 0 ? (
        <>
          <Summary spec={spec} judgements={judgements} />
          <ol className="border-t border-graph-strong">
            {sheet.map((line, index) => (
              <SheetLine
                key={index}
                line={line}
                index={index}
                count={sheet.length}
                result={judgements.get(line) ?? null}
                sampleRateHz={spec.sampleRateHz}
                desk={desk}
                readOnly={readOnly}
                onMoved={(from, by) => focus(`[data-line="${from + by}"] [data-tool="${by < 0 ? 'up' : 'down'}"]`)}
                onRemoved={(gone) => {
                  if (sheet.length === 1) focus('[data-tool="add"]')
                  else if (gone === sheet.length - 1) focus(`[data-line="${gone - 1}"] [data-tool="remove"]`)
                }}
              />
            ))}
          </ol>
          {clashes.length > 0 ? (
            <ul aria-label="Contradictions" className="mt-1.5 border-l-2 border-vermilion pl-2 text-[13px] leading-5">
              {clashes.map(({ first, second, reason }) => (
                <li key={`${first}-${second}`}>{reason}</li>
              ))}
            </ul>
          ) : null}
        </>
      ) : (
        <p className="mt-1 border-t border-graph-strong pt-1.5 text-[14px] leading-6">
          {readOnly
            ? 'Nothing is required of this design yet.'
            : 'Nothing is required of this design yet. Say what it must keep and what it must lose, one line each; every line then shows its margin.'}
        </p>
      )}
      {readOnly ? null : (
        <div className="mt-2 flex flex-wrap gap-2">
          <AddLine
            primary={sheet.length === 0}
            full={!hasRoomForLine(sheet)}
            onOpen={() => {
              awaited.current = null
            }}
            onAdd={(kind) => {
              awaited.current = sheet.length
              desk.add(kind)
            }}
          />
          <Button small aria-expanded={choosing} onClick={() => setChoosing((open) => !open)}>
            Start from a usual job…
          </Button>
        </div>
      )}
      {choosing && !readOnly ? (
        <StartFrom
          sampleRateHz={spec.sampleRateHz}
          lineCount={sheet.length}
          onStart={(lines) => {
            awaited.current = 0
            setChoosing(false)
            desk.replace(lines)
          }}
        />
      ) : null}
    </section>
  )
}

function Summary({ spec, judgements }: { spec: DesignSpec; judgements: Judgements }) {
  const results = sheetOf(spec).flatMap((line) => judgements.get(line) ?? [])
  const isWhole = results.length === sheetOf(spec).length
  const isMet = results.every(({ met }) => met)
  return (
    <p
      role="status"
      className={classNames(
        'mt-0.5 mb-1 text-[14px]',
        !isWhole ? 'text-pencil' : isMet ? 'text-moss' : 'text-vermilion',
      )}
    >
      {isWhole ? sheetSummary(results) : 'Working it out…'}
    </p>
  )
}
