'use client'

import { useState } from 'react'
import { Button } from '@/components/ui/button'
import { SelectField, TextField } from '@/components/ui/field'
import { Notice } from '@/components/ui/notice'
import { DELIMITER_NAMES, DELIMITERS, TIME_UNITS, type Delimiter, type TimeUnit } from '@/lib/recordings/table/plan'
import { parseFrequency } from '@/lib/units/parse'
import { ScrollRegion } from '../panels/chart/data-table'
import { ColumnChoice } from './column-choice'
import type { PlanChange, TablePreview as Preview } from './shapes'
import { formatBytes, formatCount, formatRate, jitterWords, rateWords, unevenWords } from './words'

const TIME_UNIT_NAMES: Readonly<Record<TimeUnit, string>> = {
  s: 'seconds',
  ms: 'milliseconds',
  µs: 'microseconds',
  ns: 'nanoseconds',
  min: 'minutes',
  stamp: 'date and time (ISO)',
}

/** How a text file will be read: everything that was detected, each of it correctable, tried on the first lines. */
export function TablePreview({
  preview,
  busy,
  onChange,
  onRead,
  onForget,
}: {
  preview: Preview
  busy: boolean
  onChange(change: PlanChange): void
  onRead(): void
  onForget(): void
}) {
  const { plan, columns, firstLines, problem } = preview
  const settle = (settled: Extract<PlanChange, { settled: unknown }>['settled']) => onChange({ settled })
  return (
    <section aria-label="How the file is read" className="flex flex-col gap-4">
      <p className="text-[14px]">
        <strong className="font-semibold break-words">{preview.fileName}</strong>{' '}
        <span className="text-pencil">
          {formatBytes(preview.fileBytes)} · this is how it will be read; correct what is wrong.
        </span>
      </p>
      <FirstLines lines={firstLines} headerLine={plan.headerLine} firstLine={plan.firstLine} />
      <div className="grid grid-cols-[repeat(auto-fill,minmax(9.5rem,1fr))] items-start gap-3">
        <SelectField
          label="Delimiter"
          value={plan.delimiter}
          onChange={(event) => {
            const delimiter = DELIMITERS.find((each) => each === event.target.value)
            if (delimiter) settle({ delimiter, ...decimalBeside(delimiter, plan.decimal) })
          }}
        >
          {DELIMITERS.map((delimiter) => (
            <option key={delimiter} value={delimiter}>
              {DELIMITER_NAMES[delimiter]}
            </option>
          ))}
        </SelectField>
        <SelectField
          label="Decimal mark"
          value={plan.decimal}
          onChange={(event) => settle({ delimiter: plan.delimiter, decimal: event.target.value === ',' ? ',' : '.' })}
        >
          <option value=".">point</option>
          <option value="," disabled={plan.delimiter === ','}>
            comma
          </option>
        </SelectField>
        <SelectField
          label="Names"
          value={plan.headerLine ?? 'none'}
          onChange={(event) =>
            settle({ headerLine: event.target.value === 'none' ? null : Number(event.target.value) })
          }
        >
          <option value="none">none</option>
          {headerLines(plan.firstLine, plan.headerLine).map((line) => (
            <option key={line} value={line}>
              in line {line}
            </option>
          ))}
        </SelectField>
        <FirstLineField key={plan.firstLine} value={plan.firstLine} onSettle={(firstLine) => settle({ firstLine })} />
        <SelectField
          label="Time"
          value={plan.time?.column ?? 'none'}
          onChange={(event) => {
            const column = columns.find((each) => String(each.column) === event.target.value)
            settle({ time: column ? { column: column.column, unit: column.holds === 'stamps' ? 'stamp' : 's' } : null })
          }}
        >
          <option value="none">no time column</option>
          {columns
            .filter((column) => column.holds !== 'text' || column.column === plan.time?.column)
            .map((column) => (
              <option key={column.column} value={column.column}>
                {column.name}
              </option>
            ))}
        </SelectField>
        {plan.time ? (
          <SelectField
            label="Unit of time"
            value={plan.time.unit}
            onChange={(event) => {
              const unit = TIME_UNITS.find((each) => each === event.target.value)
              if (unit && plan.time) settle({ time: { column: plan.time.column, unit } })
            }}
          >
            {TIME_UNITS.map((unit) => (
              <option key={unit} value={unit}>
                {TIME_UNIT_NAMES[unit]}
              </option>
            ))}
          </SelectField>
        ) : null}
        <RateField
          key={plan.statedRateHz ?? 'measured'}
          preview={preview}
          onSettle={(statedRateHz) => onChange({ plan: { ...plan, statedRateHz } })}
        />
      </div>
      <ColumnChoice preview={preview} onChange={onChange} />
      <Found preview={preview} />
      <div className="flex flex-wrap gap-3">
        <Button kind="primary" disabled={problem !== null || busy} onClick={onRead}>
          Read the recording
        </Button>
        <Button onClick={onForget}>Close</Button>
      </div>
    </section>
  )
}

/** The comma can't be both. */
const decimalBeside = (delimiter: Delimiter, decimal: '.' | ','): { decimal?: '.' | ',' } =>
  delimiter === ',' ? { decimal: '.' } : { decimal }

const headerLines = (firstLine: number, headerLine: number | null): number[] =>
  [
    ...new Set([
      ...Array.from({ length: Math.min(12, firstLine - 1) }, (_, k) => firstLine - 1 - k),
      ...(headerLine === null ? [] : [headerLine]),
    ]),
  ].sort((a, b) => a - b)

function FirstLines({
  lines,
  headerLine,
  firstLine,
}: {
  lines: readonly string[]
  headerLine: number | null
  firstLine: number
}) {
  return (
    <ScrollRegion label="First lines of the file" className="max-h-40 border border-graph-strong bg-sheet">
      <table className="numeric text-[12px]">
        <tbody>
          {lines.map((line, i) => (
            <tr key={i}>
              <th scope="row" className="w-10 px-2 text-right align-top font-normal text-pencil">
                {i + 1}
              </th>
              <td className="px-2 whitespace-pre">
                <span className={i + 1 === headerLine ? 'font-bold' : i + 1 < firstLine ? 'text-pencil' : ''}>
                  {line.replaceAll('\t', ' → ')}
                </span>
              </td>
              <td className="px-2 whitespace-nowrap text-spruce">
                {i + 1 === headerLine ? 'names' : i + 1 === firstLine ? 'first sample' : ''}
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </ScrollRegion>
  )
}

function FirstLineField({ value, onSettle }: { value: number; onSettle(line: number): void }) {
  const [text, setText] = useState(String(value))
  const line = Number(text)
  const error = Number.isInteger(line) && line >= 1 ? undefined : 'A whole number, 1 or more.'
  const settle = () => {
    if (!error && line !== value) onSettle(line)
  }
  return (
    <TextField
      label="First sample in line"
      inputMode="numeric"
      className="numeric"
      value={text}
      error={error}
      onChange={(event) => setText(event.target.value)}
      onBlur={settle}
      onKeyDown={(event) => {
        if (event.key === 'Enter') settle()
        if (event.key === 'Escape') setText(String(value))
      }}
    />
  )
}

/** The rate as measured, or as stated in its place. */
function RateField({ preview, onSettle }: { preview: Preview; onSettle(hertz: number | null): void }) {
  const { plan, timing } = preview
  const shown = plan.statedRateHz === null ? '' : formatRate(plan.statedRateHz)
  const [text, setText] = useState(shown)
  const [refusal, setRefusal] = useState<string | undefined>()
  async function settle() {
    if (text === shown) return setRefusal(undefined)
    if (text.trim() === '') return onSettle(null)
    const parsed = await parseFrequency(text, { nyquistHz: null })
    if (!parsed.ok) return setRefusal(parsed.message)
    if (!(parsed.value > 0)) return setRefusal('More than 0 Hz, for example 600 Hz.')
    onSettle(parsed.value)
  }
  const measured = plan.time && timing ? `${formatRate(timing.sampleRateHz)} if left empty` : undefined
  const missing =
    !plan.time && plan.statedRateHz === null ? 'Needed: there is no time column. For example 600 Hz.' : undefined
  return (
    <TextField
      label="Sampling rate"
      className="numeric"
      placeholder={timing ? formatRate(timing.sampleRateHz) : '600 Hz'}
      value={text}
      hint={missing ? undefined : measured}
      error={refusal ?? missing}
      onChange={(event) => setText(event.target.value)}
      onBlur={() => void settle()}
      onKeyDown={(event) => {
        if (event.key === 'Enter') void settle()
        if (event.key === 'Escape') setText(shown)
      }}
    />
  )
}

/** Rate, jitter and broken cells among the first lines; or why they can't be read so. */
function Found({ preview }: { preview: Preview }) {
  const { timing, problem, flaws, rowsTried } = preview
  if (problem) {
    // a missing rate is already said beside its field
    return problem.code === 'bad-rate' && !preview.plan.time && preview.plan.statedRateHz === null ? null : (
      <Notice kind="caution">{problem.message}</Notice>
    )
  }
  if (!timing) return null
  const uneven = unevenWords({ timing, worstRow: null })
  return (
    <div className="flex flex-col gap-2 text-[14px]">
      <p role="status">
        In the first {formatCount(rowsTried, 'row', 'rows')}: <span className="numeric">{rateWords(timing)}</span>
        {jitterWords(timing) ? <span className="numeric">, {jitterWords(timing)}</span> : null}.
      </p>
      {uneven ? <Notice kind="caution">{uneven}</Notice> : null}
      {flaws.length > 0 ? (
        <Notice kind="caution">{flaws.map((flaw) => `Line ${flaw.row ?? '?'}: ${flaw.reason}.`).join(' ')}</Notice>
      ) : null}
    </div>
  )
}
