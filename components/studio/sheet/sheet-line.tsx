import { ArrowDown, ArrowUp, X } from 'lucide-react'
import type { KeyboardEvent } from 'react'
import type { Requirement, RequirementResult } from '@/dsp'
import { Button } from '@/components/ui/button'
import { classNames } from '@/lib/format/class-names'
import { marginWords, requirementText, resultQuantity, worstWords } from '@/lib/designs/requirement-words'
import type { LineDesk } from './line-desk'
import { LineWords } from './line-words'

/** One line: what is asked, what the design comes to, by how much that is met or missed, and where it is worst. */
export function SheetLine({
  line,
  index,
  count,
  result,
  sampleRateHz,
  desk,
  readOnly,
  onRemoved,
  onMoved,
}: {
  line: Requirement
  index: number
  count: number
  result: RequirementResult | null
  sampleRateHz: number
  desk: LineDesk
  readOnly: boolean
  onRemoved(index: number): void
  onMoved(index: number, by: 1 | -1): void
}) {
  const worst = result && worstWords(result.worstHz, sampleRateHz)
  const name = `line ${index + 1}: ${requirementText(line)}`

  function move(by: 1 | -1) {
    if (index + by < 0 || index + by >= count) return
    desk.move(index, by)
    onMoved(index, by)
  }
  function onMoveKey(event: KeyboardEvent) {
    if (event.key !== 'ArrowUp' && event.key !== 'ArrowDown') return
    event.preventDefault()
    move(event.key === 'ArrowUp' ? -1 : 1)
  }

  return (
    <li data-line={index} className="border-b border-graph py-1 text-[14px] leading-6">
      <div className="flex items-baseline gap-x-3">
        <p className="min-w-0 flex-1">
          <span aria-hidden className="numeric mr-1.5 text-[12px] text-pencil">
            {index + 1}
          </span>
          <LineWords line={line} index={index} foldHz={sampleRateHz / 2} desk={desk} readOnly={readOnly} />
        </p>
        <Verdict result={result} />
      </div>
      <div className="flex min-h-6 flex-wrap items-center gap-x-2 pl-4 text-[13px] leading-5 text-pencil">
        {result && worst ? (
          <button
            type="button"
            className="min-h-6 rounded border-b border-dotted border-pencil hover:bg-spruce-wash hover:text-ink"
            aria-label={`Line ${index + 1}, ${worst}: put the crosshair there`}
            onClick={() => desk.lookAt(result)}
          >
            {worst}
          </button>
        ) : null}
        {result?.reason ? <span className="min-w-0 flex-1">{result.reason}</span> : null}
        {readOnly ? null : (
          <span className="ml-auto inline-flex" role="group" aria-label={`Line ${index + 1}`}>
            <Tool
              label={`Move up ${name}`}
              mark="up"
              inert={index === 0}
              onPress={() => move(-1)}
              onKeyDown={onMoveKey}
            >
              <ArrowUp aria-hidden size={14} />
            </Tool>
            <Tool
              label={`Move down ${name}`}
              mark="down"
              inert={index === count - 1}
              onPress={() => move(1)}
              onKeyDown={onMoveKey}
            >
              <ArrowDown aria-hidden size={14} />
            </Tool>
            <Tool
              label={`Remove ${name}`}
              mark="remove"
              onPress={() => {
                desk.remove(index)
                onRemoved(index)
              }}
            >
              <X aria-hidden size={14} />
            </Tool>
          </span>
        )}
      </div>
    </li>
  )
}

function Verdict({ result }: { result: RequirementResult | null }) {
  if (!result) return <span className="numeric shrink-0 text-right text-[13px] text-pencil">…</span>
  return (
    <span className="numeric flex shrink-0 flex-col text-right text-[13px] leading-5">
      <span>
        {Number.isNaN(result.value) || (result.reason && !Number.isFinite(result.value))
          ? '—'
          : resultQuantity(result.value, result)}
      </span>
      <span className={classNames('text-[12px]', result.met ? 'text-moss' : 'text-vermilion')}>
        {marginWords(result)}
      </span>
    </span>
  )
}

/** Stays reachable at the end of its way, so that the focus isn't lost there. */
function Tool({
  label,
  mark,
  inert = false,
  onPress,
  onKeyDown,
  children,
}: {
  label: string
  mark: 'up' | 'down' | 'remove'
  inert?: boolean
  onPress(): void
  onKeyDown?(event: KeyboardEvent): void
  children: React.ReactNode
}) {
  return (
    <Button
      kind="quiet"
      small
      className={classNames('min-w-6 px-1', inert && 'opacity-40')}
      aria-label={label}
      title={mark === 'remove' ? 'Remove this line' : mark === 'up' ? 'Move up (arrow keys)' : 'Move down (arrow keys)'}
      aria-disabled={inert || undefined}
      data-tool={mark}
      onClick={onPress}
      onKeyDown={onKeyDown}
    >
      {children}
    </Button>
  )
}
