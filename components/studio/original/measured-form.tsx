import { useState } from 'react'
import type { OwnTarget } from '@/dsp'
import { formatHz, formatNumber } from '@/lib/format/quantity'
import { parseMeasured, type FileProblem, type MeasuredFile } from '@/lib/targets/measured-file'
import { ChooseFile, DropGround } from '../trial/drop-zone'
import { TextAreaField } from './text-area-field'
import type { GivenForm } from './given-form'
import { GivenFrame } from './given-frame'

type Measured = Extract<OwnTarget, { given: 'measured' }>
type ReadFile = Extract<MeasuredFile, { ok: true }>

/** A table of text larger than this is no frequency response. */
const MOST_BYTES = 2_000_000

/** An original given as a measured table of frequency, level or gain, and phase: dropped, chosen or pasted. */
export function MeasuredForm({ given, onTake, readOnly }: GivenForm<Measured>) {
  const [text, setText] = useState(() => (given ? asText(given.rows) : ''))
  const [name, setName] = useState(given?.name ?? 'Measured response')
  const [read, setRead] = useState<ReadFile | null>(null)
  const [problems, setProblems] = useState<readonly string[]>([])

  function parse(next: string): ReadFile | null {
    setText(next)
    const found = parseMeasured(next)
    setRead(found.ok ? found : null)
    setProblems(found.ok ? [] : found.problems.map(problemWords))
    return found.ok ? found : null
  }

  async function takeFile(file: File) {
    if (file.size > MOST_BYTES) {
      setProblems([
        `The file has ${formatNumber(file.size / 1e6, 2)} MB; a measured table has ${MOST_BYTES / 1e6} MB at most.`,
      ])
      return
    }
    if (parse(await file.text())) setName(file.name.replace(/\.[^.]*$/, '').slice(0, 80) || 'Measured response')
  }

  return (
    <DropGround onFile={(file) => void (readOnly ? undefined : takeFile(file))}>
      <GivenFrame
        name={name}
        onName={setName}
        takeWords="Fit to this table"
        onTake={() => {
          const found = read ?? parse(text)
          if (found) onTake({ given: 'measured', name, rows: found.rows })
        }}
        readOnly={readOnly}
      >
        {readOnly ? null : (
          <div className="flex flex-wrap items-center gap-3 text-[13px] text-pencil">
            <ChooseFile label="Measured table" onFile={(file) => void takeFile(file)}>
              Choose a table…
            </ChooseFile>
            or drop a CSV or TSV file here, or paste rows below
          </div>
        )}
        <TextAreaField
          label="Rows"
          hint="Frequency, level in dB or gain, phase in degrees; a header may say otherwise. Rising frequencies, four rows at least."
          problems={problems}
          rows={9}
          value={text}
          readOnly={readOnly}
          onChange={(event) => {
            setText(event.currentTarget.value)
            setRead(null)
            setProblems([])
          }}
        />
        {read ? <p className="text-[13px] text-pencil">{readWords(read)}</p> : null}
      </GivenFrame>
    </DropGround>
  )
}

const asText = (rows: Measured['rows']): string =>
  ['frequency Hz; level dB; phase deg', ...rows.map((row) => row.join('; '))].join('\n')

function problemWords({ row, column, reason }: FileProblem): string {
  const place = [row === null ? '' : `Row ${row}`, column === null ? '' : `column ${column}`].filter(Boolean).join(', ')
  return place === '' ? reason : `${place}: ${reason}`
}

function readWords({ rows, columns }: ReadFile): string {
  const [first, last] = [rows[0]?.[0] ?? 0, rows.at(-1)?.[0] ?? 0]
  const { frequency, magnitude, phase } = columns
  return `${rows.length} rows, ${formatHz(first, 4)} to ${formatHz(last, 4)}; read as ${frequency.unit}, ${magnitude.unit} and ${phase.unit}.`
}
