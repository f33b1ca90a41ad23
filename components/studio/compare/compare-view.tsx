'use client'

import Link from 'next/link'
import { useMemo, useSyncExternalStore } from 'react'
import type { DesignSpec } from '@/dsp'
import { buttonClass } from '@/components/ui/button'
import { Notice } from '@/components/ui/notice'
import { TitleBlock } from '@/components/ui/title-block'
import type { DesignRecord, VersionSummary } from '@/lib/designs/types'
import { useOnPage } from '@/components/ui/use-on-page'
import { Chooser } from './chooser'
import { CompareSides } from './compare-specs'
import { keptText, readCandidates } from './kept-candidates'
import { gatherSides, type GatheredSide } from './gather'
import { Statements } from './statements'
import { candidateId, compareAddress, inSentence, listed, sideLabel, MOST_SIDES, type SideId } from './sides'

const never = () => () => undefined

/** Up to four of a design's versions, its draft and candidates beside each other; the choice is in the address, so that a link keeps it. */
export function CompareView({
  design,
  versions,
  draft,
  sides: asked,
  missing,
  leftOut,
}: {
  design: DesignRecord
  versions: readonly VersionSummary[]
  draft: DesignSpec | null
  sides: readonly SideId[]
  missing: readonly SideId[]
  leftOut: readonly SideId[]
}) {
  const isOnPage = useOnPage()
  const kept = useSyncExternalStore(
    never,
    () => keptText(design.id),
    () => null,
  )
  const candidates = useMemo(() => readCandidates(kept), [kept])
  const { sides, lost } = useMemo(
    () => gatherSides(asked, { versions, draft, candidates }),
    [asked, versions, draft, candidates],
  )
  const choices = candidates.flatMap((candidate, index) =>
    candidate ? [{ id: candidateId(index), label: candidate.label }] : [],
  )
  const labels = sides.map(({ label }) => label)
  const [first = 'Nothing to compare', ...rest] = labels
  const links =
    sides.length > 1
      ? { actions: (place: number) => <SideLinks designId={design.id} sides={sides} place={place} /> }
      : {}
  return (
    <main className="mx-auto max-w-[1680px] px-4 pt-5 pb-10 sm:px-6">
      <div className="flex flex-wrap items-end justify-between gap-x-6 gap-y-3">
        <h1 className="text-[22px]">{rest.length > 0 ? `${first} beside ${listed(rest.map(inSentence))}` : first}</h1>
        <Chooser
          // The lists begin anew with what the address says.
          key={`${asked.join(',')} ${kept === null}`}
          designId={design.id}
          chosen={sides.map(({ id }) => id)}
          versions={versions}
          hasDraft={draft !== null}
          candidates={choices}
        />
      </div>
      <div className="mt-4 flex flex-col gap-2 empty:hidden">
        {missing.length > 0 ? (
          <Notice kind="caution">
            {listed(missing.map(sideLabel))} {missing.length === 1 ? 'isn’t' : 'aren’t'} there; choose from the lists.
          </Notice>
        ) : null}
        {leftOut.length > 0 ? (
          <Notice kind="note">
            Up to {MOST_SIDES} sides stand beside each other; left out: {listed(leftOut.map(sideLabel).map(inSentence))}
            .
          </Notice>
        ) : null}
        {isOnPage
          ? lost.map(({ id, why }) => (
              <Notice key={id} kind="caution">
                {why}
              </Notice>
            ))
          : null}
        {isOnPage && sides.length === 1 ? (
          <Notice kind="note">Choose a second side to hold beside {inSentence(first)}.</Notice>
        ) : null}
      </div>
      {sides.length > 0 ? (
        <>
          <div className="mt-5">
            {/* Filters are computed on the page alone: a server would be held up for everybody. */}
            {isOnPage ? <CompareSides sides={sides} {...links} /> : <Statements sides={sides} {...links} />}
          </div>
          <div className="mt-6 ml-auto max-w-lg">
            <TitleBlock
              label="Title block"
              cells={[
                { label: 'Drawing', value: design.drawingNumber, span: 6 },
                ...sides.flatMap(
                  ({ label, drawn, checksum }, place) =>
                    [
                      { label: place === 0 ? 'Base' : `Side ${place + 1}`, value: label, span: 2 },
                      { label: `Drawn, ${inSentence(label)}`, value: drawn, span: 2 },
                      { label: `Coefficients, ${inSentence(label)}`, value: checksum, span: 2 },
                    ] as const,
                ),
              ]}
            />
          </div>
        </>
      ) : null}
    </main>
  )
}

/** What can be done with a side: differences are taken from it instead, or it is left out. */
function SideLinks({ designId, sides, place }: { designId: string; sides: readonly GatheredSide[]; place: number }) {
  const ids = sides.map(({ id }) => id)
  const others = ids.filter((_, at) => at !== place)
  const id = ids[place]
  const label = inSentence(sides[place]?.label ?? '')
  if (id === undefined) return null
  return (
    <>
      {place > 0 ? (
        <Link className={buttonClass('plain', true)} href={compareAddress(designId, [id, ...others])}>
          Make it the base<span className="sr-only">: {label}</span>
        </Link>
      ) : null}
      {sides.length > 2 ? (
        <Link className={buttonClass('quiet', true)} href={compareAddress(designId, others)}>
          Leave out<span className="sr-only">: {label}</span>
        </Link>
      ) : null}
    </>
  )
}
