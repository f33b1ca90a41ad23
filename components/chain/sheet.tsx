'use client'

import { EllipsisVertical } from 'lucide-react'
import { useEffect, useRef, useState } from 'react'
import { MOST_CHAIN_REQUIREMENTS, type ChainRequirementKind, type ChainRequirementResult, type ChainSpec } from '@/dsp'
import { ActionMenu } from '@/components/ui/action-menu'
import { Button, buttonClass } from '@/components/ui/button'
import { chainFieldOf, hertzText } from '@/lib/chains/fields'
import { sheetTone, sheetWords } from '@/lib/chains/sheet-words'
import {
  chainLineParts,
  chainLineText,
  chainMarginWords,
  chainQuantity,
  chainRequirementKindWords,
} from '@/lib/chains/words'
import { classNames } from '@/lib/format/class-names'
import type { ChainDesk } from './chain-desk'
import { ChainNumber } from './desk-fields'
import type { ChainJudgements } from './judge'

const kinds = Object.entries(chainRequirementKindWords) as [ChainRequirementKind, string][]

/** What the decibels of images are counted against. */
const against = 'Images are counted down from the same level at the sensor'
const lineMeans: Readonly<Partial<Record<ChainRequirementKind, string>>> = {
  'alias-floor': against,
  'usable-band': against,
}

interface SheetProps {
  readonly spec: ChainSpec
  readonly judgements: ChainJudgements
  readonly desk: ChainDesk
  readonly readOnly: boolean
  /** Takes the trace of the fold chart to where a line is nearest to its limit. */
  onTrace(hz: number): void
  /** Opens the drawer where the run is that a channel match waits for. */
  onRunTolerance(): void
}

/** What the chain must meet, line by line, with what it comes to and by how much that is met. */
export function ChainSheet({ spec, judgements, desk, readOnly, onTrace, onRunTolerance }: SheetProps) {
  const { sheet } = spec
  const [problem, setProblem] = useState<string | null>(null)
  const section = useRef<HTMLElement>(null)
  // A line that was added takes the focus once it is there.
  const awaited = useRef<number | null>(null)
  useEffect(() => {
    if (awaited.current === null || sheet.length <= awaited.current) return
    section.current?.querySelector<HTMLElement>(`[data-line="${awaited.current}"] input`)?.focus()
    awaited.current = null
  }, [sheet])
  const focus = (selector: string) => section.current?.querySelector<HTMLElement>(selector)?.focus()

  function move(index: number, by: 1 | -1) {
    if (index + by < 0 || index + by >= sheet.length) return
    setProblem(desk.moveLine(index, by))
    requestAnimationFrame(() => focus(`[data-line="${index + by}"] [data-tool="line"]`))
  }
  function remove(index: number) {
    setProblem(desk.removeLine(index))
    requestAnimationFrame(() =>
      focus(sheet.length === 1 ? '[data-tool="add"]' : `[data-line="${Math.max(index - 1, 0)}"] [data-tool="line"]`),
    )
  }

  return (
    <section ref={section} aria-labelledby="chain-sheet-heading">
      <div className="flex flex-wrap items-baseline justify-between gap-x-3">
        <h2 id="chain-sheet-heading" className="font-text text-[13px] font-semibold text-pencil">
          Requirement sheet
        </h2>
        {sheet.length > 0 ? <Summary spec={spec} judgements={judgements} /> : null}
      </div>
      {sheet.length > 0 ? (
        <ol className="border-t border-graph-strong">
          {sheet.map((line, index) => (
            <Line
              key={index}
              spec={spec}
              index={index}
              result={judgements.get(line) ?? null}
              desk={desk}
              readOnly={readOnly}
              onTrace={onTrace}
              onRunTolerance={onRunTolerance}
              onMove={(by) => move(index, by)}
              onRemove={() => remove(index)}
            />
          ))}
        </ol>
      ) : (
        <p className="border-t border-graph-strong pt-1.5 text-[14px] leading-6">
          Nothing is required of this chain yet.
          {readOnly ? '' : ' Say what the samples must be good for, one line each; every line then shows its margin.'}
        </p>
      )}
      {problem ? (
        <p role="alert" className="mt-1 border-l-2 border-vermilion pl-2 text-[13px] text-vermilion">
          {problem}
        </p>
      ) : null}
      {readOnly ? null : (
        <div className="mt-1.5">
          <AddLine
            isFull={sheet.length >= MOST_CHAIN_REQUIREMENTS}
            onAdd={(kind) => {
              awaited.current = sheet.length
              setProblem(desk.addLine(kind))
            }}
          />
        </div>
      )}
    </section>
  )
}

function Line({
  spec,
  index,
  result,
  desk,
  readOnly,
  onTrace,
  onRunTolerance,
  onMove,
  onRemove,
}: Omit<SheetProps, 'judgements'> & {
  index: number
  result: ChainRequirementResult | null
  onMove(by: 1 | -1): void
  onRemove(): void
}) {
  const waits = result !== null && result.met === null && result.requirement.kind === 'channel-match'
  return (
    <li data-line={index} className="border-b border-graph py-0.5 text-[14px] leading-6">
      <div className="flex flex-wrap items-baseline justify-end gap-x-3">
        <p className="mr-auto min-w-0 grow basis-44" title={lineMeans[spec.sheet[index]?.kind ?? 'delay']}>
          {chainLineParts(spec, index).map((part, at) =>
            part.kind === 'text' ? (
              part.text
            ) : (
              <ChainNumber
                key={`${part.path}-${at}`}
                spec={spec}
                desk={desk}
                readOnly={readOnly}
                path={part.path}
                name={`Line ${index + 1}, ${chainFieldOf(part.path)?.label}`}
              />
            ),
          )}
        </p>
        <span className="flex items-baseline gap-x-2">
          <Verdict result={result} index={index} onTrace={onTrace} />
          {readOnly ? null : (
            <LineMenu
              name={`line ${index + 1}: ${chainLineText(spec, index)}`}
              isFirst={index === 0}
              isLast={index === spec.sheet.length - 1}
              onMove={onMove}
              onRemove={onRemove}
            />
          )}
        </span>
      </div>
      {waits ? (
        <p className="flex flex-wrap items-center gap-2 pb-1 text-[13px] leading-5 text-pencil">
          {result.reason}
          <Button small onClick={onRunTolerance}>
            To the tolerance run
          </Button>
        </p>
      ) : result?.reason ? (
        <p className="pb-0.5 text-[13px] leading-5 text-pencil">{result.reason}</p>
      ) : null}
    </li>
  )
}

/** What the chain comes to, by how much that is met, and on the press of the figure where it is nearest to its limit. */
function Verdict({
  result,
  index,
  onTrace,
}: {
  result: ChainRequirementResult | null
  index: number
  onTrace(hz: number): void
}) {
  if (!result) return <span className="numeric text-[13px] text-pencil">…</span>
  const tone = result.met === null ? 'text-pencil' : result.met ? 'text-moss' : 'text-vermilion'
  const value = chainQuantity(result.value, result.unit)
  const { worstHz } = result
  return (
    <>
      {worstHz === null ? (
        <span className="numeric text-[13px]">{value}</span>
      ) : (
        <button
          type="button"
          className="numeric min-h-6 border-b border-dotted border-pencil text-[13px] hover:bg-spruce-wash"
          title={`Worst at ${hertzText(worstHz, 3)}: trace it on the fold chart`}
          aria-label={`Line ${index + 1}, ${value}, worst at ${hertzText(worstHz, 3)}: trace it on the fold chart`}
          onClick={() => onTrace(worstHz)}
        >
          {value}
        </button>
      )}
      <span className={classNames('numeric min-w-26 text-right text-[12px]', tone)}>{chainMarginWords(result)}</span>
    </>
  )
}

function Summary({ spec, judgements }: { spec: ChainSpec; judgements: ChainJudgements }) {
  const results = spec.sheet.flatMap((line) => judgements.get(line) ?? [])
  const isWhole = results.length === spec.sheet.length
  const count = (met: boolean | null) => results.filter((result) => result.met === met).length
  const counts = { met: count(true), missed: count(false), unjudged: count(null) }
  const tone = { met: 'text-moss', missed: 'text-vermilion', open: 'text-pencil' }[sheetTone(counts)]
  return (
    <p role="status" className={classNames('text-[13px]', isWhole ? tone : 'text-pencil')}>
      {isWhole ? sheetWords(counts) : 'Working it out…'}
    </p>
  )
}

const AddLine = ({ isFull, onAdd }: { isFull: boolean; onAdd(kind: ChainRequirementKind): void }) => (
  <ActionMenu
    className={buttonClass('plain', true)}
    disabled={isFull}
    title={isFull ? `A sheet holds ${MOST_CHAIN_REQUIREMENTS} lines` : undefined}
    tool="add"
    focusMovesOn
    actions={kinds.map(([kind, label]) => ({ id: kind, label, run: () => onAdd(kind) }))}
  >
    Add a line
  </ActionMenu>
)

/** What can be done to a line as a whole. */
function LineMenu({
  name,
  isFirst,
  isLast,
  onMove,
  onRemove,
}: {
  name: string
  isFirst: boolean
  isLast: boolean
  onMove(by: 1 | -1): void
  onRemove(): void
}) {
  return (
    <ActionMenu
      align="end"
      className={classNames(buttonClass('quiet', true), 'min-w-6 self-center px-1')}
      label={`Change ${name}`}
      title="Move or remove this line"
      tool="line"
      focusMovesOn
      actions={[
        { id: 'up', label: 'Move up', isOut: isFirst, run: () => onMove(-1) },
        { id: 'down', label: 'Move down', isOut: isLast, run: () => onMove(1) },
        { id: 'remove', label: 'Remove', run: onRemove },
      ]}
    >
      <EllipsisVertical aria-hidden size={14} />
    </ActionMenu>
  )
}
