'use client'

import Link from 'next/link'
import { useState } from 'react'
import { Button, buttonClass } from '@/components/ui/button'
import { figureRows } from '@/lib/chains/figure-words'
import type { ChainVersionSummary } from '@/lib/chains/types'
import { sameValue } from '@/lib/designs/same-value'
import { stateWords } from '@/lib/designs/words'
import { formatInstant } from '@/lib/format/quantity'
import { FigureLine } from './chart/figures'
import type { ChainPanelProps } from './props'

export interface HistoryPanelProps extends Omit<ChainPanelProps, 'chain'> {
  readonly chainId: string
  /** Newest first. */
  readonly versions: readonly ChainVersionSummary[]
}

/** Two versions side by side, the older on the left. */
export const compareAddress = (chainId: string, one: number, other: number): string =>
  `/chains/${chainId}/compare?left=${Math.min(one, other)}&right=${Math.max(one, other)}`

/** The versions of a chain, newest first, with the figures each was saved with. */
export function HistoryPanel({ chainId, versions, spec, propose, readOnly }: HistoryPanelProps) {
  const [ticked, setTicked] = useState<readonly number[]>([])
  if (versions.length === 0)
    return (
      <p className="max-w-prose py-4 text-[14px] text-pencil">
        No version yet. Save one with a note when the draft is worth keeping; from then on each stands here with its
        figures, and can be compared, brought back and handed over.
      </p>
    )
  const [one, other] = ticked
  return (
    <>
      <div className="flex min-h-10 flex-wrap items-center gap-x-5 gap-y-1 pb-2 text-[13px]">
        {one !== undefined && other !== undefined ? (
          <Link className={buttonClass('primary', true)} href={compareAddress(chainId, one, other)}>
            Compare {Math.min(one, other)} and {Math.max(one, other)}
          </Link>
        ) : null}
        <p role="status" className="text-pencil">
          {['Tick two versions to compare.', 'Tick another to compare it with.'][ticked.length] ?? ''}
        </p>
      </div>
      <ol reversed aria-label="Versions, newest first" className="border-t border-graph-strong">
        {versions.map((version) => (
          <Entry
            key={version.number}
            chainId={chainId}
            version={version}
            isDraft={sameValue(version.spec, spec)}
            isTicked={ticked.includes(version.number)}
            isFull={ticked.length >= 2}
            onTick={() =>
              setTicked((numbers) =>
                numbers.includes(version.number)
                  ? numbers.filter((number) => number !== version.number)
                  : [...numbers, version.number],
              )
            }
            onRestore={readOnly ? null : () => propose(version.spec)}
          />
        ))}
      </ol>
    </>
  )
}

function Entry({
  chainId,
  version,
  isDraft,
  isTicked,
  isFull,
  onTick,
  onRestore,
}: {
  chainId: string
  version: ChainVersionSummary
  isDraft: boolean
  isTicked: boolean
  isFull: boolean
  onTick(): void
  onRestore: (() => void) | null
}) {
  const { number, note, savedAt, savedBy, state, checksum, parentNumber, figures } = version
  const heading = `chain-version-${number}-heading`
  return (
    <li
      aria-labelledby={heading}
      className="grid gap-x-6 gap-y-2 border-b border-graph py-3 lg:grid-cols-[minmax(0,1fr)_auto]"
    >
      <div className="flex min-w-0 flex-col gap-1.5">
        <div className="flex items-baseline gap-2">
          <label className="inline-flex min-h-6 min-w-6 items-center">
            <input
              type="checkbox"
              className="size-4 accent-spruce"
              aria-label={`Compare version ${number}`}
              checked={isTicked}
              disabled={isFull && !isTicked}
              onChange={onTick}
            />
          </label>
          <h3 id={heading} className="min-w-0 font-text text-[14px] font-semibold wrap-anywhere">
            <span className="numeric">{number}</span> · {note}
          </h3>
        </div>
        <FigureLine figures={figureRows(figures).map(({ name, text }) => ({ name, value: text }))} />
        <p className="flex flex-wrap gap-x-4 text-[13px] text-pencil">
          <span>
            Saved <time dateTime={savedAt}>{formatInstant(savedAt)}</time> by {savedBy}
          </span>
          <span>{stateWords[state]}</span>
          <span className="numeric" title={`SHA-256 of the chain and its figures: ${checksum}`}>
            {checksum.slice(0, 4)}…{checksum.slice(-4)}
          </span>
          {parentNumber === null ? null : <span>Made from version {parentNumber}</span>}
        </p>
      </div>
      <div className="flex flex-wrap items-start gap-2">
        {isDraft ? <span className="self-center text-[13px] text-moss">The draft equals it</span> : null}
        {!isDraft && onRestore ? (
          <Button small onClick={onRestore}>
            Bring back into the draft<span className="sr-only">: version {number}</span>
          </Button>
        ) : null}
        {parentNumber === null ? null : (
          <Link className={buttonClass('quiet', true)} href={compareAddress(chainId, parentNumber, number)}>
            Compare with {parentNumber}
            <span className="sr-only">: version {number}</span>
          </Link>
        )}
        <Link className={buttonClass('plain', true)} href={`/chains/${chainId}/versions/${number}`}>
          Hand over<span className="sr-only">: version {number}</span>
        </Link>
      </div>
    </li>
  )
}
