'use client'

import { useState } from 'react'
import { DataTable, ScrollRegion } from '@/components/studio/panels/chart/data-table'
import type { ComputedChain, FoldChart, FoldPath } from '@/dsp'
import { formatHz } from '@/lib/format/quantity'
import { traceRows } from './trace'
import { downWords, foldMaker, ordinal, stageNameOf, weakOf } from './words'

const MOST_ROWS = 400

/** Every strip in a row, for readers who can't use the picture. */
export function StripsTable({ chain, chart }: { chain: ComputedChain; chart: FoldChart }) {
  const more = chart.strips.length - MOST_ROWS
  return (
    <DataTable
      summary={more > 0 ? `Strips as a table: the first ${MOST_ROWS}, and the weak one` : 'Strips as a table'}
      columns={[
        'strip',
        'from',
        'to',
        'runs',
        'its lower edge folds at',
        'first folds at',
        'in the kept band',
        'input',
        'lands on',
      ]}
      rows={() => stripRows(chain, chart)}
    />
  )
}

export function stripRows(chain: ComputedChain, { strips, weakStrip }: FoldChart): readonly (readonly string[])[] {
  const weak = weakOf({ strips, weakStrip })
  const listed = strips.slice(0, MOST_ROWS)
  return (weak && !listed.includes(weak) ? [...listed, weak] : listed).map((strip) => [
    `${ordinal(strip.strip + 1)}${strip === weak && strip.strip > 0 ? ', weak' : ''}`,
    formatHz(strip.fromHz, 7),
    formatHz(strip.toHz, 7),
    strip.mirrored ? 'backwards' : 'forwards',
    (strip.strip === 0 ? null : foldMaker(chain, strip.fromHz)) ?? '—',
    stageNameOf(chain, strip.foldsAtStageId) ?? '—',
    strip.strip === 0 ? 'kept' : strip.worst === null ? 'nothing kept' : downWords(strip.worst.levelDb),
    strip.worst === null ? '—' : formatHz(strip.worst.inputHz, 4),
    strip.worst === null ? '—' : formatHz(strip.worst.outputHz, 4),
  ])
}

/** The inputs that land on the traced frequency. Its room stays the same whatever is traced, so that nothing below it moves. */
export function TraceTable({
  chain,
  hz,
  paths,
}: {
  chain: ComputedChain
  hz: number | null
  paths: readonly FoldPath[]
}) {
  const [open, setOpen] = useState(false)
  return (
    <details className="text-[13px]" onToggle={(event) => setOpen(event.currentTarget.open)}>
      <summary className="w-fit min-h-[24px] cursor-pointer leading-[24px] text-pencil hover:text-ink">
        Inputs that land on one frequency
      </summary>
      {open ? (
        <ScrollRegion label="Inputs that land on the traced frequency" className="mt-1 h-56 border border-graph-strong">
          {hz === null ? (
            <p className="p-2 text-pencil">
              Point at the strips and press, or use the arrow keys on them, to choose an output frequency.
            </p>
          ) : (
            <table className="numeric w-full text-[12px]">
              <caption className="px-2 py-1 text-left text-pencil">Lands on {formatHz(hz, 6)}</caption>
              <thead className="sticky top-0 bg-sheet">
                <tr className="text-pencil [&>th]:px-2 [&>th]:py-1 [&>th]:text-right [&>th]:font-normal [&>th]:whitespace-nowrap">
                  {['input', 'strip', 'runs', 'first folds at', 'in the samples'].map((column) => (
                    <th key={column} scope="col">
                      {column}
                    </th>
                  ))}
                </tr>
              </thead>
              <tbody>
                {traceRows(paths.slice(0, MOST_ROWS), (id) => stageNameOf(chain, id)).map(([first, ...rest], index) => (
                  <tr key={index} className="border-t border-graph [&>td]:px-2 [&>td]:py-0.5 [&>td]:text-right">
                    <th scope="row" className="px-2 py-0.5 text-right font-normal whitespace-nowrap">
                      {first}
                    </th>
                    {rest.map((cell, column) => (
                      <td key={column} className="whitespace-nowrap">
                        {cell}
                      </td>
                    ))}
                  </tr>
                ))}
              </tbody>
            </table>
          )}
        </ScrollRegion>
      ) : null}
    </details>
  )
}
