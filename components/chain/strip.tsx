'use client'

import { useEffect, useMemo, useRef, useState, type KeyboardEvent, type PointerEvent } from 'react'
import { chainSketch, noiseBudget, type ChainSpec, type ChainStage, type ComputedChain } from '@/dsp'
import { useOnPage } from '@/components/ui/use-on-page'
import { Button } from '@/components/ui/button'
import { withStageMoved } from '@/lib/chains/edits'
import { linkOf, outdatedLinks } from '@/lib/chains/links'
import { linkText } from '@/lib/chains/statement'
import type { LinkableDesign } from '@/lib/chains/types'
import { stageLabel, stageName } from '@/lib/chains/words'
import { classNames } from '@/lib/format/class-names'
import { formatHz, formatNumber, formatSeconds } from '@/lib/format/quantity'
import type { ChainDesk } from './chain-desk'
import { StageSketch, stageLevels, storedLevels } from './sketch'
import { stageFacts } from './stage-facts'
import { useSaid } from './use-said'

/** The pointer has to go so far before a press becomes a drag. */
const DRAG_PIXELS = 6

interface Drag {
  readonly stageId: string
  readonly startX: number
  /** Null until the pointer has gone far enough. */
  readonly to: number | null
  /** Whether the stage may stand there. */
  readonly isAllowed: boolean
}

/** The stages in signal order, from the sensor to what is stored: chosen by a press, moved by pulling or with Alt and an arrow key. */
export function Strip({
  spec,
  chain,
  chosen,
  desk,
  linkable = [],
  readOnly,
  onChoose,
}: {
  spec: ChainSpec
  /** Null before the page is taken over, and where the spec makes no chain. */
  chain: ComputedChain | null
  chosen: string | null
  desk: ChainDesk
  /** The designs of the project: a stage tied to an older version of one is marked. */
  linkable?: readonly LinkableDesign[]
  readOnly: boolean
  onChoose(stageId: string | null): void
}) {
  const [drag, setDrag] = useState<Drag | null>(null)
  const [said, setSaid] = useSaid<{ readonly words: string; readonly isRefusal: boolean }>(desk)
  const outdated = useMemo(() => outdatedLinks(spec, linkable), [spec, linkable])
  const row = useRef<HTMLOListElement>(null)
  const hasDragged = useRef(false)
  // A cell that was moved takes the focus along: the browser lets go of it when it changes its place.
  const awaited = useRef<string | null>(null)
  useEffect(() => {
    if (awaited.current === null) return
    row.current?.querySelector<HTMLElement>(`[data-stage="${awaited.current}"]`)?.focus()
    awaited.current = null
  }, [spec.stages])
  // The button that brought another stage onto the desk, Remove or Duplicate, has gone with the old one: that stage's cell takes its focus.
  const bereft = useRef<string | null>(null)
  useEffect(() => {
    if (document.activeElement === document.body) bereft.current = chosen
  }, [chosen])
  useEffect(() => {
    if (bereft.current === null) return
    const cell = row.current?.querySelector<HTMLElement>(`[data-stage="${bereft.current}"]`)
    // A stage that was just made comes into the strip a moment later.
    if (!cell) return
    bereft.current = null
    if (document.activeElement === document.body) cell.focus()
  }, [chosen, spec.stages])

  function move(from: number, to: number) {
    const stage = spec.stages[from]
    if (!stage || from === to) return
    const refusal = desk.editStages((now) => withStageMoved(now, from, to))
    if (refusal === null) awaited.current = stage.id
    const place = `${stageName(stage)} is stage ${to + 1} of ${spec.stages.length} now.`
    setSaid({ words: refusal ?? place, isRefusal: refusal !== null })
  }

  /** Where a stage would come to stand if it were let go here. */
  function placeAt(clientX: number, stageId: string): number {
    const others = [...(row.current?.querySelectorAll<HTMLElement>('[data-stage]') ?? [])].filter(
      (cell) => cell.dataset['stage'] !== stageId,
    )
    return others.filter((cell) => {
      const { left, width } = cell.getBoundingClientRect()
      return left + width / 2 < clientX
    }).length
  }

  function onPointerMove(event: PointerEvent) {
    if (!drag) return
    if (drag.to === null && Math.abs(event.clientX - drag.startX) < DRAG_PIXELS) return
    if (drag.to === null) event.currentTarget.setPointerCapture(event.pointerId)
    const to = placeAt(event.clientX, drag.stageId)
    if (to === drag.to) return
    const from = spec.stages.findIndex(({ id }) => id === drag.stageId)
    setDrag({ ...drag, to, isAllowed: desk.wouldTake((now) => withStageMoved(now, from, to)) })
  }

  function letGo(isMeant: boolean) {
    if (drag && drag.to !== null) {
      hasDragged.current = true
      const from = spec.stages.findIndex(({ id }) => id === drag.stageId)
      if (isMeant && from >= 0) move(from, drag.to)
    }
    setDrag(null)
  }

  function onKeyDown(event: KeyboardEvent, index: number) {
    if (event.key === 'Escape') {
      if (drag) letGo(false)
      else if (chosen !== null) onChoose(null)
      return
    }
    if (event.key !== 'ArrowLeft' && event.key !== 'ArrowRight') return
    event.preventDefault()
    const to = index + (event.key === 'ArrowLeft' ? -1 : 1)
    if (event.altKey) {
      if (!readOnly) move(index, to)
    } else {
      const id = spec.stages[to]?.id
      if (id) row.current?.querySelector<HTMLElement>(`[data-stage="${id}"]`)?.focus()
    }
  }

  return (
    <section aria-label="Stages in signal order">
      <ol ref={row} className="flex overflow-x-auto border border-graph-strong bg-sheet">
        {spec.stages.map((stage, index) => (
          <li
            key={stage.id}
            className={classNames(
              'relative flex min-w-36 flex-1 border-r border-graph-strong',
              drag?.stageId === stage.id && drag.to !== null && 'opacity-50',
            )}
          >
            {drag && drag.to === index && drag.stageId !== stage.id ? (
              <span
                aria-hidden
                className={classNames(
                  'absolute inset-y-0 w-[3px]',
                  drag.isAllowed ? 'bg-spruce' : 'bg-vermilion',
                  spec.stages.findIndex(({ id }) => id === drag.stageId) < index ? 'right-0' : 'left-0',
                )}
              />
            ) : null}
            <button
              type="button"
              data-stage={stage.id}
              aria-pressed={stage.id === chosen}
              aria-keyshortcuts={readOnly ? undefined : 'Alt+ArrowLeft Alt+ArrowRight'}
              className={classNames(
                'flex w-full touch-pan-x flex-col border-b-[3px] px-2.5 pt-1.5 pb-1 text-left -outline-offset-2 select-none',
                stage.id === chosen ? 'border-spruce bg-spruce-wash' : 'border-transparent hover:bg-spruce-wash',
              )}
              onClick={() => {
                if (hasDragged.current) hasDragged.current = false
                else onChoose(stage.id === chosen ? null : stage.id)
              }}
              onKeyDown={(event) => onKeyDown(event, index)}
              onPointerDown={(event) => {
                hasDragged.current = false
                if (!readOnly && event.pointerType !== 'touch' && event.button === 0)
                  setDrag({ stageId: stage.id, startX: event.clientX, to: null, isAllowed: true })
              }}
              onPointerMove={onPointerMove}
              onPointerUp={() => letGo(true)}
              onPointerCancel={() => letGo(false)}
            >
              <StageCell
                spec={spec}
                stage={stage}
                index={index}
                chain={chain}
                isOutdated={outdated.some(({ stageId }) => stageId === stage.id)}
              />
            </button>
          </li>
        ))}
        <StoredCell spec={spec} chain={chain} />
      </ol>
      <p
        role={said?.isRefusal ? 'alert' : 'status'}
        className={said?.isRefusal ? 'mt-1 border-l-2 border-vermilion pl-2 text-[13px] text-vermilion' : 'sr-only'}
      >
        {said?.words}
      </p>
      {outdated.length > 0 ? (
        <ul className="mt-1 text-[13px]">
          {outdated.map(({ stageId, stageIndex, link, newest }) => (
            <li key={stageId} className="flex flex-wrap items-center gap-x-2 border-l-2 border-ochre pl-2">
              Stage {stageIndex + 1} is tied to {linkText(link)}; version {newest.version} is newer.
              {stageId === chosen ? null : (
                <Button small onClick={() => onChoose(stageId)}>
                  Open stage {stageIndex + 1}
                </Button>
              )}
            </li>
          ))}
        </ul>
      ) : null}
    </section>
  )
}

function StageCell({
  spec,
  stage,
  index,
  chain,
  isOutdated,
}: {
  spec: ChainSpec
  stage: ChainStage
  index: number
  chain: ComputedChain | null
  isOutdated: boolean
}) {
  const levels = useMemo(() => (chain?.stages[index] ? stageLevels(chain, index) : null), [chain, index])
  const computed = chain?.stages[index] ?? null
  const facts = stageFacts(spec, index, computed)
  const isDigital = stage.kind === 'decimate' || stage.kind === 'shape'
  return (
    <>
      <Words
        label={stageLabel(stage)}
        name={stageName(stage)}
        isBypassed={stage.bypassed}
        mark={isOutdated ? 'newer version' : null}
      />
      <span className="flex min-h-[3.375rem] w-full items-end justify-between gap-2">
        <Facts facts={facts} title={linkTitle(stage)} />
        {levels ? <StageSketch levels={levels} tone={isDigital ? 'digital' : 'analog'} /> : null}
      </span>
    </>
  )
}

const linkTitle = (stage: ChainStage): string | null => linkOf(stage)?.link.title ?? null

function Words({
  label,
  name,
  isBypassed = false,
  mark = null,
}: {
  label: string
  name: string
  isBypassed?: boolean
  mark?: string | null
}) {
  return (
    <>
      <span className="text-[11px] leading-4 tracking-wide text-pencil">
        {label}
        {isBypassed ? <span className="text-ochre"> · bypassed</span> : null}
        {mark === null ? null : <span className="text-ochre"> · {mark}</span>}
      </span>
      <span
        className={classNames(
          'w-full truncate text-[13px] leading-5 font-semibold',
          isBypassed && 'text-pencil line-through',
        )}
        title={name}
      >
        {name}
      </span>
    </>
  )
}

/** Figures are never cut: the sketch beside them gives way. The title of a design may be as long as it likes, and is. */
const Facts = ({ facts, title = null }: { facts: readonly string[]; title?: string | null }) => (
  <span className="numeric flex max-w-full shrink-0 flex-col self-start text-[11.5px] leading-[1.125rem] whitespace-nowrap text-ink">
    {facts.map((fact) => (
      <span key={fact} className={fact === title ? 'max-w-20 truncate' : undefined} title={title ?? undefined}>
        {fact}
      </span>
    ))}
  </span>
)

/** What comes of it all: the last cell, which can't be chosen. */
function StoredCell({ spec, chain }: { spec: ChainSpec; chain: ComputedChain | null }) {
  const onPage = useOnPage()
  const figures = useMemo(
    () =>
      chain && onPage
        ? {
            delay: chainSketch(chain).delaySeconds,
            bits: noiseBudget(chain).effectiveBits,
            levels: storedLevels(chain),
          }
        : null,
    [chain, onPage],
  )
  return (
    <li className="flex min-w-36 flex-1 flex-col px-2.5 pt-1.5 pb-1">
      <Words label="Stored" name={chain ? formatHz(chain.outputRateHz) : '—'} />
      <span className="flex min-h-[3.375rem] w-full items-end justify-between gap-2">
        <Facts
          facts={[
            `kept to ${formatHz(spec.kept.toHz, 4)}`,
            ...(figures ? [formatSeconds(figures.delay, 3), `${formatNumber(figures.bits, 3)} bits`] : []),
          ]}
        />
        {figures ? <StageSketch levels={figures.levels} tone="stored" /> : null}
      </span>
    </li>
  )
}
