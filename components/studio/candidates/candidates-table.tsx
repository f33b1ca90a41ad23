import type { OfferedRow } from '@/dsp'
import { Button } from '@/components/ui/button'
import { classNames } from '@/lib/format/class-names'
import { ScrollRegion } from '../panels/chart/data-table'
import { columns, nameOf, sizeOf, type Ranking } from './columns'
import { Sketch } from './sketch'

export interface RowActions {
  readonly heldId: string | null
  readonly pickedIds: readonly string[]
  readonly mayEdit: boolean
  /** No more can be picked. */
  readonly isFull: boolean
  onHold(row: OfferedRow): void
  onTake(row: OfferedRow): void
  onPick(row: OfferedRow): void
}

/** What meets the sheet, ranked by a column; each can be held beside the design, picked to compare, or put into the statement. */
export function CandidatesTable({
  rows,
  ranking,
  onRank,
  actions,
}: {
  rows: readonly OfferedRow[]
  ranking: Ranking
  onRank(ranking: Ranking): void
  actions: RowActions
}) {
  return (
    <ScrollRegion label="Candidates that meet the sheet" className="border-y border-graph-strong">
      <table className="w-full text-[13px]">
        <thead>
          <tr className="border-b border-graph-strong text-pencil [&>th]:py-1 [&>th]:pr-4 [&>th]:text-right [&>th]:font-normal [&>th]:whitespace-nowrap">
            <th scope="col" className="!text-left">
              compare
            </th>
            <th scope="col" className="!text-left">
              response
            </th>
            <th scope="col" className="!text-left">
              filter
            </th>
            {columns.map(({ id, name, title, better }) => {
              const isOn = ranking.by === id
              const rises = (better === 'less') === ranking.bestFirst
              return (
                <th key={id} scope="col" aria-sort={isOn ? (rises ? 'ascending' : 'descending') : 'none'}>
                  <button
                    type="button"
                    title={`${title}. Rank by it`}
                    className={classNames('min-h-6 hover:text-ink', isOn && 'font-semibold text-ink')}
                    onClick={() => onRank({ by: id, bestFirst: isOn ? !ranking.bestFirst : true })}
                  >
                    {name}
                    <span aria-hidden className="inline-block w-3 text-center">
                      {isOn ? (rises ? '↑' : '↓') : ''}
                    </span>
                  </button>
                </th>
              )
            })}
            <th scope="col">
              <span className="sr-only">Actions</span>
            </th>
          </tr>
        </thead>
        <tbody>
          {rows.map((row) => (
            <Row key={row.id} row={row} actions={actions} />
          ))}
        </tbody>
      </table>
    </ScrollRegion>
  )
}

function Row({ row, actions }: { row: OfferedRow; actions: RowActions }) {
  const name = `${nameOf(row.parts)}, ${sizeOf(row)}`
  const isHeld = actions.heldId === row.id
  const isPicked = actions.pickedIds.includes(row.id)
  return (
    <tr
      className={classNames(
        'border-b border-graph last:border-b-0 [&>td]:py-1 [&>td]:pr-4 [&>td]:text-right [&>td]:whitespace-nowrap',
        isHeld && 'bg-spruce-wash',
      )}
    >
      <td className="!text-left">
        <label className="inline-flex size-6 items-center">
          <span className="sr-only">Compare {name}</span>
          <input
            type="checkbox"
            className="size-4 accent-spruce"
            checked={isPicked}
            disabled={!isPicked && actions.isFull}
            onChange={() => actions.onPick(row)}
          />
        </label>
      </td>
      <td>
        <Sketch levels={row.sketch} label={name} />
      </td>
      <th scope="row" className="py-1 pr-4 text-left font-normal">
        {nameOf(row.parts)} <span className="numeric text-pencil">{sizeOf(row)}</span>
      </th>
      {columns.map((column) => (
        <td key={column.id} className="numeric">
          {column.text(row)}
        </td>
      ))}
      <td>
        <span className="inline-flex gap-2">
          <Button
            small
            aria-pressed={isHeld}
            aria-label={`${isHeld ? 'Let go of' : 'Hold up'} ${name}`}
            title="Draw it on the plots beside the design"
            onClick={() => actions.onHold(row)}
          >
            {isHeld ? 'Let go' : 'Hold up'}
          </Button>
          {actions.mayEdit ? (
            <Button small aria-label={`Put ${name} into the statement`} onClick={() => actions.onTake(row)}>
              Take
            </Button>
          ) : null}
        </span>
      </td>
    </tr>
  )
}
