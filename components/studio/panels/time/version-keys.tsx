'use client'

import type { TraceId } from '@/components/plot/trace-style'
import { classNames } from '@/lib/format/class-names'
import { TraceSample } from '../../stack/trace-sample'

/** Above the plot: where the crosshair is, and each version with its sample, name and value there. Pressing one hides it. */
export function VersionKeys({
  versions,
  hidden,
  at,
  valueOf,
  onToggle,
}: {
  versions: readonly { readonly id: TraceId; readonly label: string; readonly stated: boolean }[]
  hidden: readonly TraceId[]
  at: string | null
  valueOf(id: TraceId): string | null
  onToggle(id: TraceId): void
}) {
  return (
    <div role="group" aria-label="Versions shown" className="flex flex-wrap items-center gap-x-3 text-[12px] leading-6">
      <span className="min-w-[23ch] font-mono whitespace-nowrap tabular-nums">
        {at === null ? <span className="text-pencil">move over the plot to read</span> : <>at {at}</>}
      </span>
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
            className="inline-flex min-h-6 items-center gap-1.5 rounded hover:text-ink"
          >
            <span className={isHidden ? 'opacity-40' : undefined}>
              <TraceSample id={id} />
            </span>
            <span className={classNames('text-pencil', stated && 'font-semibold', isHidden && 'line-through')}>
              {label}
            </span>
            {value === null ? null : <span className="numeric whitespace-nowrap text-ink">{value}</span>}
          </button>
        )
      })}
    </div>
  )
}
