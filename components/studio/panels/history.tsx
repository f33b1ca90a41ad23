'use client'

import Link from 'next/link'
import { useState, type ReactNode } from 'react'
import type { DesignSpec } from '@/dsp'
import { Button, buttonClass } from '@/components/ui/button'
import { changedParts } from '@/lib/designs/statement-changes'
import type { VersionSummary } from '@/lib/designs/types'
import { stateWords } from '@/lib/designs/words'
import { formatInstant } from '@/lib/format/quantity'
import { MarkedStatement } from '../compare/marked-statement'
import { inSentence, MOST_SIDES, sideLabel, type SideId } from '../compare/sides'

/** The versions of a design, newest first, each with the words that changed since the version it was made from. */
export function History({
  versions,
  current,
  onRestore,
  compareHref,
  handOverHref,
  mayEdit = true,
}: {
  versions: readonly VersionSummary[]
  current: DesignSpec
  onRestore(spec: DesignSpec, fromNumber: number): void
  compareHref(sides: readonly SideId[]): string
  handOverHref(number: number): string
  /** Without it versions can be looked at and compared, but not brought back. */
  mayEdit?: boolean
}) {
  const [ticked, setTicked] = useState<readonly SideId[]>([])
  if (versions.length === 0)
    return (
      <p className="max-w-prose py-4 text-[14px] text-pencil">
        No version yet. Save one with a note when the draft is worth keeping; from then on each change is marked here
        and can be compared, brought back and handed over.
      </p>
    )
  const tick = (id: SideId) => ({
    id,
    isTicked: ticked.includes(id),
    isFull: ticked.length >= MOST_SIDES,
    onTick: () => setTicked((ids) => (ids.includes(id) ? ids.filter((one) => one !== id) : [...ids, id])),
  })
  // From old to new, so that differences are what came since; the draft is the newest.
  const order = (id: SideId) => (typeof id === 'number' ? id : Number.POSITIVE_INFINITY)
  const sides = [...ticked].sort((one, other) => order(one) - order(other))
  return (
    <>
      <div className="flex min-h-10 flex-wrap items-center gap-x-5 gap-y-1 pb-2 text-[13px]">
        <Tick {...tick('draft')}>Draft</Tick>
        {sides.length > 1 ? (
          <Link className={buttonClass('primary', true)} href={compareHref(sides)}>
            Compare {sides.length}
          </Link>
        ) : null}
        <p role="status" className="text-pencil">
          {sides.length === 0
            ? `Tick up to ${MOST_SIDES} to compare.`
            : sides.length === 1
              ? 'Tick another to compare it with.'
              : sides.length === MOST_SIDES
                ? 'Four are the most.'
                : ''}
        </p>
      </div>
      <ol reversed aria-label="Versions, newest first" className="border-t border-graph-strong">
        {versions.map((version) => (
          <Entry
            key={version.number}
            version={version}
            tick={tick(version.number)}
            parent={versions.find(({ number }) => number === version.parentNumber) ?? null}
            isDraft={changedParts(version.spec, current).length === 0}
            mayEdit={mayEdit}
            onRestore={onRestore}
            compareHref={compareHref}
            handOverHref={handOverHref}
          />
        ))}
      </ol>
    </>
  )
}

interface TickProps {
  readonly id: SideId
  readonly isTicked: boolean
  readonly isFull: boolean
  onTick(): void
}

/** A box that takes a side into the comparison. */
function Tick({ id, isTicked, isFull, onTick, children }: TickProps & { children: ReactNode }) {
  return (
    <label className="inline-flex min-h-6 min-w-6 items-center gap-1.5">
      <input
        type="checkbox"
        className="size-4 accent-spruce"
        aria-label={`Compare ${inSentence(sideLabel(id))}`}
        checked={isTicked}
        disabled={isFull && !isTicked}
        onChange={onTick}
      />
      {children}
    </label>
  )
}

function Entry({
  version,
  tick,
  parent,
  isDraft,
  mayEdit,
  onRestore,
  compareHref,
  handOverHref,
}: {
  version: VersionSummary
  tick: TickProps
  parent: VersionSummary | null
  isDraft: boolean
  mayEdit: boolean
  onRestore(spec: DesignSpec, fromNumber: number): void
  compareHref(sides: readonly SideId[]): string
  handOverHref(number: number): string
}) {
  const { number, note, savedAt, savedBy, state, checksum, spec } = version
  const changed = parent ? changedParts(parent.spec, spec) : []
  const heading = `version-${number}-heading`
  return (
    <li
      aria-labelledby={heading}
      className="grid gap-x-6 gap-y-1 border-b border-graph py-3 lg:grid-cols-[minmax(0,1fr)_auto]"
    >
      <div className="min-w-0">
        <div className="flex items-baseline gap-2">
          <Tick {...tick}>{null}</Tick>
          <h3 id={heading} className="min-w-0 font-text text-[14px] font-semibold wrap-anywhere">
            <span className="numeric">{number}</span> · {note}
          </h3>
        </div>
        <p className="mt-0.5 font-heading text-[16px] leading-snug">
          <MarkedStatement before={parent?.spec ?? null} after={spec} />
        </p>
        <p className="mt-1 flex flex-wrap gap-x-4 text-[13px] text-pencil">
          <span>
            Saved <time dateTime={savedAt}>{formatInstant(savedAt)}</time> by {savedBy}
          </span>
          <span>{stateWords[state]}</span>
          <span className="numeric" title={`SHA-256 of the coefficients: ${checksum}`}>
            {checksum.slice(0, 4)}…{checksum.slice(-4)}
          </span>
          {parent ? (
            <span>
              {changed.length === 0 ? 'Same design as' : `Changed since`} version {parent.number}
              {changed.length > 0 ? `: ${changed.join(', ')}` : ''}
            </span>
          ) : null}
        </p>
      </div>
      <div className="flex flex-wrap items-start gap-2">
        {isDraft ? (
          <span className="self-center text-[13px] text-moss">The draft equals it</span>
        ) : (
          <>
            <Link className={buttonClass('plain', true)} href={compareHref([number, 'draft'])}>
              Compare with draft<span className="sr-only">: version {number}</span>
            </Link>
            {mayEdit ? (
              <Button small onClick={() => onRestore(spec, number)}>
                Bring back into the draft<span className="sr-only">: version {number}</span>
              </Button>
            ) : null}
          </>
        )}
        {parent ? (
          <Link className={buttonClass('quiet', true)} href={compareHref([parent.number, number])}>
            Compare with {parent.number}
            <span className="sr-only">: version {number}</span>
          </Link>
        ) : null}
        <Link className={buttonClass('plain', true)} href={handOverHref(number)}>
          Hand over<span className="sr-only">: version {number}</span>
        </Link>
      </div>
    </li>
  )
}
