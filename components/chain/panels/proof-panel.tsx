'use client'

import { useMemo, useState } from 'react'
import { DataTable } from '@/components/studio/panels/chart/data-table'
import { useOnPage } from '@/components/ui/use-on-page'
import { InlineQuantity } from '@/components/studio/shell/inline-quantity'
import { Notice } from '@/components/ui/notice'
import type { ChainSpec } from '@/dsp'
import { sameValue } from '@/lib/designs/same-value'
import { classNames } from '@/lib/format/class-names'
import { formatDb } from '@/lib/format/quantity'
import { parseCount } from '@/lib/units/parse'
import { FiguresRuled } from './chart/figures'
import { LinesPlot } from './chart/lines-plot'
import type { ChainPanelProps } from './props'
import { delayWords, isBelow, proofCells, proofColumns, proofVerdict, spectrumPlan, spectrumRows } from './proof-words'
import { useWork } from './work/use-work'
import { runProof } from './work/work-client'
import { WorkLine } from './work/work-line'

interface Asked {
  readonly spec: ChainSpec
  readonly seed: number
}

const start = ({ spec, seed }: Asked) => runProof(spec, seed)

/** The chain run sample by sample on a made-up signal, and every figure of it measured on what came out. */
export function ProofPanel(props: ChainPanelProps) {
  return useOnPage() ? <Proof {...props} /> : null
}

function Proof({ spec }: ChainPanelProps) {
  const work = useWork(start)
  const [seed, setSeed] = useState(1)
  const { value: result, question } = work
  const older =
    question !== null &&
    !sameValue(
      [question.spec.stages, question.spec.kept, question.spec.interferers, question.seed],
      [spec.stages, spec.kept, spec.interferers, seed],
    )
  const plan = useMemo(() => (result === null ? null : spectrumPlan(result, older)), [result, older])
  return (
    <div className="flex min-w-0 flex-col gap-3">
      <WorkLine
        work={work}
        what="The proof run"
        startWords="Run the proof"
        againWords="Run the proof again"
        stopWords="Stop the proof"
        onStart={() => work.run({ spec, seed })}
        onStop={work.stop}
      >
        <span className="inline-flex items-center gap-2 text-[14px]">
          seed
          <InlineQuantity
            label="Seed of the proof"
            text={String(seed)}
            parse={parseCount}
            onValue={(next) => {
              if (!(next >= 0 && next <= 0xffffffff)) return 'A seed is a whole number from 0 to 4 294 967 295.'
              setSeed(next)
              return null
            }}
          />
        </span>
      </WorkLine>
      {result === null || plan === null ? (
        work.state === 'working' ? null : (
          <p className="max-w-prose text-[14px] text-pencil">
            A signal with known lines, some in the kept band and some in the strips that fold onto it, is run through
            the stages at a high rate, quantised, decimated and stored. What is measured on the stored samples is held
            against what is computed.
          </p>
        )
      ) : (
        <>
          {older ? (
            <Notice kind="note">This proof is of an older chain or of another seed; run it again to be sure.</Notice>
          ) : (
            <Notice kind={result.agrees ? 'met' : 'caution'}>{proofVerdict(result)}</Notice>
          )}
          <FiguresRuled
            label="Lines, computed and measured"
            columns={proofColumns}
            rows={result.lines.map((line, index) => {
              const cells = proofCells(line)
              const verdict = cells[cells.length - 1] ?? ''
              return {
                key: `${index} ${line.what}`,
                cells: [
                  ...cells.slice(0, -1),
                  <span
                    key="verdict"
                    className={classNames(
                      !line.agrees ? 'text-vermilion' : isBelow(line) ? 'text-pencil' : 'text-moss',
                    )}
                  >
                    {verdict}
                  </span>,
                ],
              }
            })}
          />
          {result.notes.map((note) => (
            <p key={note} className="max-w-prose text-[13px] text-pencil">
              {note}
            </p>
          ))}
          <p className={classNames('numeric text-[13px]', !result.delay.agrees && 'text-vermilion')}>
            {delayWords(result)}
          </p>
          <LinesPlot plan={plan} writeValue={(value) => formatDb(value, 1)} />
          <DataTable
            summary="Spectrum as a table"
            columns={['frequency', 'measured, dB', 'computed, dB']}
            rows={() => spectrumRows(result)}
          />
        </>
      )}
    </div>
  )
}
