'use client'

import { useMemo, useState } from 'react'
import { isOffered, type CandidateRequest, type DesignSpec, type OfferedRow, type RefusedRow, type Spend } from '@/dsp'
import { ChoiceGroup } from '@/components/handover/choice-group'
import { Button, buttonClass } from '@/components/ui/button'
import { Notice } from '@/components/ui/notice'
import { sheetOf } from '@/lib/designs/sheet-edits'
import { formatFixed } from '@/lib/format/quantity'
import { rememberCandidates } from '../compare/kept-candidates'
import { useOnPage } from '@/components/ui/use-on-page'
import type { StudioStore } from '../store'
import { useStudio } from '../use-studio'
import { CandidatesTable } from './candidates-table'
import { isOfKind, kindFilters, nameOf, ranked, sizeOf, type KindFilter, type Ranking } from './columns'
import { useSearch, type SearchState } from './use-search'

const spends = [
  { value: 'narrower', label: 'a narrower band' },
  { value: 'flatter', label: 'flatness' },
  { value: 'less-delay', label: 'less delay' },
] as const satisfies readonly { value: Spend; label: string }[]

/** Beside the draft there is room for three. */
const MOST_PICKED = 3

/** From the requirement sheet to the filters that meet it: the least of each family, method and kind of FIR filter, ranked as the user likes. */
export function CandidatesPanel(props: { store: StudioStore; designId: string; spec: DesignSpec; mayEdit: boolean }) {
  return useOnPage() ? <Candidates {...props} /> : null
}

function Candidates({
  store,
  designId,
  spec,
  mayEdit,
}: {
  store: StudioStore
  designId: string
  spec: DesignSpec
  mayEdit: boolean
}) {
  const sheet = sheetOf(spec)
  const search = useSearch()
  const held = useStudio(store, (state) => state.held)
  const [spend, setSpend] = useState<Spend>('less-delay')
  const [filter, setFilter] = useState<KindFilter>('all')
  const [ranking, setRanking] = useState<Ranking>({ by: 'multiplies', bestFirst: true })
  const [heldId, setHeldId] = useState<string | null>(null)
  const [picked, setPicked] = useState<readonly string[]>([])

  const { request, rows, state, outcome } = search
  const shown = useMemo(() => rows.filter((row) => isOfKind(row, filter)), [rows, filter])
  const offered = useMemo(() => ranked(shown.filter(isOffered), ranking), [shown, ranking])
  const refused = shown.filter((row): row is RefusedRow => !isOffered(row))
  const isStale =
    request !== null && !isSameQuestion(request, { ...request, sheet, sampleRateHz: spec.sampleRateHz, spend })

  if (sheet.length === 0)
    return (
      <Notice kind="note">
        Candidates are found from the requirement sheet, which is still empty: add lines to it beside the plots, or
        start it from a usual job.
      </Notice>
    )

  const labelled = (row: OfferedRow) => ({ label: `${nameOf(row.parts)}, ${sizeOf(row)}`, spec: asDraft(row, spec) })

  return (
    <div className="flex min-w-0 flex-col gap-4">
      <div className="flex flex-wrap items-center gap-x-6 gap-y-2">
        {state === 'searching' ? (
          <Button onClick={search.stop}>Stop the search</Button>
        ) : (
          <Button
            kind="primary"
            onClick={() => {
              setPicked([])
              search.start({ sheet, sampleRateHz: spec.sampleRateHz, budget: spec.budget, spend })
            }}
          >
            {rows.length > 0 || state === 'done' ? 'Search again' : 'Search for candidates'}
          </Button>
        )}
        <ChoiceGroup legend="Spend room on" inline choices={spends} value={spend} onChange={(next) => setSpend(next)} />
        <ChoiceGroup legend="Show" inline choices={kindFilters} value={filter} onChange={(next) => setFilter(next)} />
        <p role="status" className="text-[13px] text-pencil">
          {progressWords(search)}
        </p>
      </div>

      {isStale && state !== 'searching' ? (
        <Notice kind="note">The sheet, the rate or the wish has changed since this search; search again.</Notice>
      ) : null}
      {outcome?.unclear ? <Notice kind="caution">{outcome.unclear}</Notice> : null}
      {outcome && outcome.contradictions.length > 0 ? (
        <Notice kind="caution">
          No filter can meet this sheet.
          <ul>
            {outcome.contradictions.map(({ first, second, reason }) => (
              <li key={`${first}-${second}`}>{reason}</li>
            ))}
          </ul>
        </Notice>
      ) : null}
      {state === 'failed' ? (
        <Notice kind="caution">The search broke off in this browser; reload the page to try again.</Notice>
      ) : null}

      {offered.length > 0 ? (
        <CandidatesTable
          rows={offered}
          ranking={ranking}
          onRank={setRanking}
          actions={{
            heldId: held ? heldId : null,
            pickedIds: picked,
            isFull: picked.length >= MOST_PICKED,
            mayEdit,
            onHold: (row) => {
              const isHeld = held !== null && heldId === row.id
              setHeldId(isHeld ? null : row.id)
              store.getState().hold(isHeld ? null : labelled(row))
            },
            onTake: (row) => {
              store.getState().hold(null)
              store.getState().propose(asDraft(row, store.getState().spec))
            },
            onPick: (row) =>
              setPicked((ids) => (ids.includes(row.id) ? ids.filter((id) => id !== row.id) : [...ids, row.id])),
          }}
        />
      ) : null}
      {picked.length > 0 ? (
        <p>
          <a
            className={buttonClass()}
            href={`/designs/${designId}/compare?sides=${['draft', ...picked.map((_, index) => `candidate-${index + 1}`)].join(',')}`}
            onClick={() => {
              const chosen = picked.flatMap((id) => offered.filter((row) => row.id === id))
              rememberCandidates(designId, chosen.map(labelled))
            }}
          >
            Compare the draft with {picked.length === 1 ? 'it' : `these ${picked.length}`}
          </a>
        </p>
      ) : null}
      {refused.length > 0 ? <RefusedList rows={refused} /> : null}
    </div>
  )
}

/** A candidate as the design would state it: with the budget and the sheet that the design has. */
const asDraft = (row: OfferedRow, { budget, sheet }: DesignSpec): DesignSpec => ({
  ...row.spec,
  budget,
  ...(sheet === undefined ? {} : { sheet }),
})

const isSameQuestion = (one: CandidateRequest, other: CandidateRequest): boolean =>
  JSON.stringify([one.sheet, one.sampleRateHz, one.spend]) ===
  JSON.stringify([other.sheet, other.sampleRateHz, other.spend])

function progressWords({ state, rows, seconds }: SearchState): string {
  const found = rows.filter(isOffered).length
  const counts = `${found} found, ${rows.length - found} can’t meet it`
  switch (state) {
    case 'searching':
      return `Searching: ${counts} so far…`
    case 'done':
      return rows.length > 0 ? `${counts}; ${formatFixed(seconds, 1)}\u2009s` : ''
    case 'stopped':
      return `Stopped: ${counts}`
    default:
      return ''
  }
}

function RefusedList({ rows }: { rows: readonly RefusedRow[] }) {
  return (
    <details className="text-[13px]">
      <summary className="w-fit min-h-6 cursor-pointer leading-6 text-pencil hover:text-ink">
        {rows.length} can’t meet it, and why
      </summary>
      <dl className="mt-1 grid max-w-5xl grid-cols-1 gap-x-6 sm:grid-cols-[max-content_minmax(0,1fr)]">
        {rows.map(({ id, parts, refused }) => (
          <div key={id} className="contents">
            <dt className="border-t border-graph py-1">{nameOf(parts)}</dt>
            <dd className="border-t border-graph py-1 text-pencil">{refused.reason}</dd>
          </div>
        ))}
      </dl>
    </details>
  )
}
