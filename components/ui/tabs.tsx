'use client'

import { useRef, type KeyboardEvent } from 'react'
import { classNames } from '@/lib/format/class-names'

export interface Tab<Id extends string> {
  readonly id: Id
  readonly label: string
}

/** A row of tabs by the ARIA pattern: arrows move, Home and End jump. The panel carries `id={panelId}`. */
export function Tabs<Id extends string>({
  tabs,
  active,
  onChange,
  label,
  panelId,
}: {
  tabs: readonly Tab<Id>[]
  active: Id
  onChange(id: Id): void
  label: string
  panelId: string
}) {
  const row = useRef<HTMLDivElement>(null)

  function onKeyDown(event: KeyboardEvent) {
    const at = tabs.findIndex((tab) => tab.id === active)
    const last = tabs.length - 1
    const next = { ArrowRight: at === last ? 0 : at + 1, ArrowLeft: at === 0 ? last : at - 1, Home: 0, End: last }[
      event.key
    ]
    const tab = next === undefined ? undefined : tabs[next]
    if (!tab) return
    event.preventDefault()
    onChange(tab.id)
    row.current?.querySelector<HTMLElement>(`[data-tab="${tab.id}"]`)?.focus()
  }

  return (
    <div ref={row} role="tablist" aria-label={label} onKeyDown={onKeyDown} className="flex gap-5 overflow-x-auto">
      {tabs.map((tab) => (
        <button
          key={tab.id}
          type="button"
          role="tab"
          data-tab={tab.id}
          id={`${panelId}-${tab.id}`}
          aria-selected={tab.id === active}
          aria-controls={panelId}
          tabIndex={tab.id === active ? 0 : -1}
          onClick={() => onChange(tab.id)}
          className={classNames(
            'min-h-8 shrink-0 border-b-2 py-1 text-[14px] -outline-offset-2',
            tab.id === active
              ? 'border-spruce font-semibold text-ink'
              : 'border-transparent text-pencil hover:text-ink',
          )}
        >
          {tab.label}
        </button>
      ))}
    </div>
  )
}
