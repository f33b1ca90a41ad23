'use client'

import type { TraceId } from '@/components/plot/trace-style'
import { classNames } from '@/lib/format/class-names'
import { TraceSample } from '../../stack/trace-sample'

/** Above the plot: each version with its sample, name and value at the crosshair. Pressing one hides it. */
export function VersionKeys({
  versions,
  hidden,
  valueWidth,
  valueOf,
  onToggle,
}: {
  versions: readonly { readonly id: TraceId; readonly label: string; readonly stated: boolean }[]
  hidden: readonly TraceId[]
  /** Class that holds the room of a value. */
  valueWidth: string
  valueOf(id: TraceId): string | null
  onToggle(id: TraceId): void
}) {
  return (
    <div role="group" aria-label="Versions shown" className="flex flex-wrap items-center gap-x-3 text-[12px] leading-6">
      {versions.map(({ id, label, stated }) => {
        const isHidden = hidden.includes(id)
        const value = isHidden ? null : valueOf(id)
        return (
          <button
            key={id}
            type="button"
            aria-pressed={!isHidden}
            title={isHidden ? `Show ${label}` : `Hide ${label}`}
            onClick={() => onToggle(id)}
            className="inline-flex min-h-[24px] items-center gap-1.5 rounded hover:text-ink"
          >
            <span className={isHidden ? 'opacity-40' : undefined}>
              <TraceSample id={id} />
            </span>
            <span className={classNames('text-pencil', stated && 'font-semibold', isHidden && 'line-through')}>
              {label}
            </span>
            {isHidden ? null : (
              // As wide without a value as with one, so that reading moves nothing.
              <span className={classNames('numeric text-left whitespace-nowrap text-ink', valueWidth)}>{value}</span>
            )}
          </button>
        )
      })}
    </div>
  )
}
