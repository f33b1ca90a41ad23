import type { ReactNode } from 'react'
import type { ChainRequirementResult, ChainSpec, ChainStage } from '@/dsp'
import { Button } from '@/components/ui/button'
import { SelectField } from '@/components/ui/field'
import { otherChanges } from '@/lib/chains/changes'
import { changesBetween, changeText } from '@/lib/chains/facts'
import { figureRows } from '@/lib/chains/figure-words'
import { chainStatementParts, type ChainStatementPart } from '@/lib/chains/statement'
import { chainLineText, chainMarginWords, stageLabel, stageName } from '@/lib/chains/words'
import { sameValue } from '@/lib/designs/same-value'
import { markedParts } from '@/lib/designs/statement-changes'
import { ChainOverlay } from './chain-overlay'
import { ChainTable } from './chain-table'
import type { ChosenVersions } from './chosen-versions'

/** The lines of each version's sheet, judged, left first; null where today's engine can't compute it. */
type SideResults = readonly (readonly ChainRequirementResult[] | null)[]

/** Two versions of a chain side by side: their sentences with the words that differ, figures, sheets, stages, and responses over each other. */
export function ChainCompare({
  numbers,
  chosen,
  results,
}: {
  /** Of all versions, newest first. */
  numbers: readonly number[]
  chosen: ChosenVersions | null
  results: SideResults
}) {
  return (
    <main className="mx-auto flex max-w-5xl flex-col gap-8 px-4 pt-5 pb-10 sm:px-6">
      {chosen ? (
        <Sides numbers={numbers} chosen={chosen} results={results} />
      ) : (
        <>
          <h1 className="text-[22px]">Compare versions</h1>
          <p>This chain has no version yet; save two, and they can be compared.</p>
        </>
      )}
    </main>
  )
}

function Sides({
  numbers,
  chosen,
  results,
}: {
  numbers: readonly number[]
  chosen: ChosenVersions
  results: SideResults
}) {
  const { left, right } = chosen
  const labels = [`version ${left.number}`, `version ${right.number}`] as const
  const columns = [`Version ${left.number}`, `Version ${right.number}`]
  return (
    <>
      <div>
        <h1 className="mb-3 text-[22px]">
          Version {left.number} beside version {right.number}
        </h1>
        <Chooser numbers={numbers} chosen={chosen} />
      </div>
      <Part title="What they say">
        <Statements left={left.spec} right={right.spec} labels={columns} />
      </Part>
      <Part title="Figures">
        <ChainTable label="Figures of both" columns={['Figure', ...columns, 'Difference']} numeric={[1, 2, 3]}>
          {figureRows(left.figures).map((row, at) => {
            const other = figureRows(right.figures)[at] ?? row
            return [row.name, row.text, marked(other.text, row.text !== other.text), differenceWords(row, other)]
          })}
        </ChainTable>
      </Part>
      <Part title="Responses over each other">
        <ChainOverlay left={left.spec} right={right.spec} labels={labels} />
      </Part>
      <Part title="Requirement sheets">
        <Sheets sides={[left, right]} columns={columns} results={results} />
      </Part>
      <Part title="Stages">
        <ChainTable label="Stages of both" columns={['Stage', ...columns, 'Change']}>
          {stageRows(left.spec, right.spec)}
        </ChainTable>
      </Part>
      <Part title="Kept band, sheet, interferers and tolerance">
        <Others left={left.spec} right={right.spec} columns={columns} />
      </Part>
    </>
  )
}

function differenceWords(
  row: ReturnType<typeof figureRows>[number],
  other: ReturnType<typeof figureRows>[number],
): string {
  if (row.value === null || other.value === null) return row.text === other.text ? 'same' : 'differs'
  return row.value === other.value ? 'same' : other.change(other.value - row.value)
}

const marked = (text: string, differs: boolean): ReactNode =>
  differs ? <mark className="bg-spruce-wash font-semibold text-ink">{text}</mark> : text

function Chooser({ numbers, chosen }: { numbers: readonly number[]; chosen: ChosenVersions }) {
  const options = numbers.map((number) => (
    <option key={number} value={number}>
      Version {number}
    </option>
  ))
  return (
    <form method="get" className="flex flex-wrap items-end gap-3">
      <SelectField label="Left" name="left" defaultValue={chosen.left.number}>
        {options}
      </SelectField>
      <SelectField label="Right" name="right" defaultValue={chosen.right.number}>
        {options}
      </SelectField>
      <Button type="submit">Compare</Button>
    </form>
  )
}

function Statements({ left, right, labels }: { left: ChainSpec; right: ChainSpec; labels: readonly string[] }) {
  const pieces = markedParts(chainStatementParts(left), chainStatementParts(right))
  const sides = [
    { mark: 'gone', look: 'bg-graph font-semibold' },
    { mark: 'new', look: 'bg-spruce-wash font-semibold' },
  ] as const
  return (
    <div className="grid gap-4 sm:grid-cols-2">
      {sides.map(({ mark, look }, at) => (
        <div key={mark}>
          <p className="text-[13px] text-pencil">{labels[at]}</p>
          <p>
            {pieces
              .filter((piece) => piece.mark === 'same' || piece.mark === mark)
              .map((piece, index) => (
                <Words key={index} part={piece.part} look={piece.mark === 'same' ? null : look} />
              ))}
          </p>
        </div>
      ))}
    </div>
  )
}

/** What joins the words is no change by itself. */
function Words({ part, look }: { part: ChainStatementPart; look: string | null }) {
  return look === null || part.kind === 'text' ? part.text : <mark className={`text-ink ${look}`}>{part.text}</mark>
}

/** A row for each line that either sheet has. */
function Sheets({
  sides,
  columns,
  results,
}: {
  sides: readonly ChosenVersions['left'][]
  columns: readonly string[]
  results: SideResults
}) {
  const judged = sides.map((version, side) => {
    return new Map(
      version.spec.sheet.map((_, index) => {
        const result = results[side]?.[index]
        return [chainLineText(version.spec, index), result ? chainMarginWords(result) : 'can’t be computed any more']
      }),
    )
  })
  const lines = [...new Set(judged.flatMap((side) => [...side.keys()]))]
  if (lines.length === 0) return <p className="text-[14px] text-pencil">Nothing is asked of either.</p>
  return (
    <ChainTable label="Requirement sheets of both" columns={['Line', ...columns]}>
      {lines.map((line) => {
        const [one, other] = judged.map((side) => side.get(line) ?? 'not asked')
        return [line, one, marked(other ?? '', one !== other)]
      })}
    </ChainTable>
  )
}

/** By the stages' names: those of the right in order, then those that are gone. */
function stageRows(left: ChainSpec, right: ChainSpec): readonly (readonly ReactNode[])[] {
  const gone = left.stages.filter(({ id }) => !right.stages.some((stage) => stage.id === id))
  return [...right.stages, ...gone].map((stage) => {
    const [was, is] = [left, right].map(({ stages }) => stages.findIndex(({ id }) => id === stage.id))
    const [before, after] = [left.stages[was ?? -1], right.stages[is ?? -1]]
    const [one, other] = [before, after].map((side) => (side ? nameOf(side) : '—'))
    return [stageLabel(stage), one, marked(other ?? '', one !== other), stageChange(left, right, was ?? -1, is ?? -1)]
  })
}

/** Every field that differs, by its name and with both values. */
function stageChange(left: ChainSpec, right: ChainSpec, was: number, is: number): ReactNode {
  if (was < 0) return 'added'
  if (is < 0) return 'gone'
  const changes = changesBetween(left, `stages.${was}`, right, `stages.${is}`).map(changeText)
  const isOtherwise = changes.length === 0 && !sameValue(left.stages[was], right.stages[is])
  const all = [...(was === is ? [] : ['moved']), ...changes, ...(isOtherwise ? ['changed'] : [])]
  if (all.length === 0) return 'same'
  return (
    <ul>
      {all.map((text) => (
        <li key={text}>{text}</li>
      ))}
    </ul>
  )
}

/** Kept band, lines, interferers and the tolerance run, as far as they differ. */
function Others({ left, right, columns }: { left: ChainSpec; right: ChainSpec; columns: readonly string[] }) {
  const rows = otherChanges(left, right)
  if (rows.length === 0)
    return (
      <p className="text-[14px] text-pencil">
        The kept band, the sheet’s lines, the interferers and the tolerance run are the same.
      </p>
    )
  return (
    <ChainTable label="What else differs" columns={['What', ...columns]}>
      {rows.map(({ what, left: one, right: other }) => [what, one, marked(other, true)])}
    </ChainTable>
  )
}

const nameOf = (stage: ChainStage): string => `${stageName(stage)}${stage.bypassed ? ', bypassed' : ''}`

function Part({ title, children }: { title: string; children: ReactNode }) {
  return (
    <section aria-label={title} className="min-w-0">
      <h2 className="mb-2 text-[19px]">{title}</h2>
      {children}
    </section>
  )
}
