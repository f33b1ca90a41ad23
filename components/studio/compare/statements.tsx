import type { ReactNode } from 'react'
import { changeWords } from './change-words'
import type { ComparedSpec } from './figures'
import { MarkedStatement } from './marked-statement'
import { SideSwatch } from './side-swatch'
import { inSentence, listed } from './sides'

/** The base in full, then each other side's statement with the words marked that the base doesn't have. */
export function Statements({
  sides,
  actions,
}: {
  sides: readonly ComparedSpec[]
  /** What can be done with a side, by its place. */
  actions?: (place: number) => ReactNode
}) {
  const [base] = sides
  if (!base) return null
  return (
    <ol aria-label="Statements" className="border-b border-graph">
      {sides.map((side, place) => (
        <li key={side.label} className="border-t border-graph py-2.5">
          <div className="flex flex-wrap items-center gap-x-3 gap-y-1">
            <SideSwatch place={place} />
            <h2 className="font-text text-[14px] font-semibold">{side.label}</h2>
            <p className="min-w-0 text-[13px] wrap-anywhere text-pencil">
              {[place === 0 && sides.length > 1 ? 'the base' : '', side.detail ?? ''].filter(Boolean).join(' · ')}
            </p>
            {actions ? <div className="ml-auto flex flex-wrap gap-2">{actions(place)}</div> : null}
          </div>
          <p className="mt-1 font-heading text-[19px] leading-snug wrap-anywhere">
            <MarkedStatement before={place === 0 ? null : base.spec} after={side.spec} />
          </p>
          {place === 0 ? null : <Changes base={base} side={side} />}
        </li>
      ))}
    </ol>
  )
}

function Changes({ base, side }: { base: ComparedSpec; side: ComparedSpec }) {
  const { otherKind, parts } = changeWords(base.spec, side.spec)
  const baseName = inSentence(base.label)
  return (
    <p className="mt-1 text-[13px] text-pencil">
      {otherKind ? (
        <>
          Of another kind than {baseName}: <strong className="text-ink">{otherKind}</strong>
          {parts.length > 0 ? (
            <>
              ; changed as well: <strong className="text-ink">{listed(parts)}</strong>
            </>
          ) : null}
        </>
      ) : parts.length === 0 ? (
        `States the same design as ${baseName}.`
      ) : (
        <>
          Changed from {baseName}: <strong className="text-ink">{listed(parts)}</strong>
        </>
      )}
    </p>
  )
}
