'use client'

import Link from 'next/link'
import { SelectField } from '@/components/ui/field'
import { Button, buttonClass } from '@/components/ui/button'
import { TitleBlock } from '@/components/ui/title-block'
import type { DesignRecord, VersionSummary } from '@/lib/designs/types'
import { formatInstant } from '@/lib/format/quantity'
import type { DesignSpec } from '@/dsp'
import { CompareSpecs } from './compare-specs'

export type Choice = number | 'draft'

/** Any two versions of a design, or a version and the draft; the choice is in the address, so that a link keeps it. */
export function CompareView({
  design,
  versions,
  draft,
  a,
  b,
}: {
  design: DesignRecord
  versions: readonly VersionSummary[]
  draft: DesignSpec | null
  a: Choice
  b: Choice
}) {
  const path = `/designs/${design.id}/compare`
  const left = sideOf(a, versions, draft)
  const right = sideOf(b, versions, draft)
  return (
    <main className="mx-auto max-w-[1680px] px-4 pt-5 pb-10 sm:px-6">
      <div className="flex flex-wrap items-end justify-between gap-x-6 gap-y-3">
        <h1 className="text-[22px]">
          {left?.label ?? 'Nothing'} beside {(right?.label ?? 'nothing').replace(/^The/, 'the')}
        </h1>
        <form method="get" action={path} className="flex flex-wrap items-end gap-2">
          <ChoiceField name="a" label="From" chosen={a} versions={versions} hasDraft={draft !== null} />
          <ChoiceField name="b" label="To" chosen={b} versions={versions} hasDraft={draft !== null} />
          <Button type="submit" kind="primary">
            Compare
          </Button>
          <Link className={buttonClass()} href={`${path}?a=${b}&b=${a}`}>
            Swap
          </Link>
        </form>
      </div>
      <div className="mt-5">{left && right ? <CompareSpecs left={left} right={right} /> : null}</div>
      {left && right ? (
        <div className="mt-6 ml-auto max-w-lg">
          <TitleBlock
            label="Title block"
            cells={[
              { label: 'Drawing', value: design.drawingNumber, span: 6 },
              { label: 'From', value: left.short, span: 3 },
              { label: 'To', value: right.short, span: 3 },
              { label: 'From, drawn', value: left.drawn, span: 3 },
              { label: 'To, drawn', value: right.drawn, span: 3 },
              { label: 'From, coefficients', value: left.checksum, span: 3 },
              { label: 'To, coefficients', value: right.checksum, span: 3 },
            ]}
          />
        </div>
      ) : null}
    </main>
  )
}

function ChoiceField({
  name,
  label,
  chosen,
  versions,
  hasDraft,
}: {
  name: string
  label: string
  chosen: Choice
  versions: readonly VersionSummary[]
  hasDraft: boolean
}) {
  return (
    <SelectField label={label} name={name} defaultValue={String(chosen)}>
      {hasDraft ? <option value="draft">Draft</option> : null}
      {versions.map(({ number, note }) => (
        <option key={number} value={number}>
          {`Version ${number}: ${note.length > 40 ? `${note.slice(0, 39)}…` : note}`}
        </option>
      ))}
    </SelectField>
  )
}

function sideOf(choice: Choice, versions: readonly VersionSummary[], draft: DesignSpec | null) {
  if (choice === 'draft')
    return draft === null
      ? null
      : { label: 'The draft', short: 'draft', spec: draft, drawn: '—', checksum: 'not saved' }
  const version = versions.find(({ number }) => number === choice)
  if (!version) return null
  return {
    label: `Version ${version.number}`,
    short: String(version.number),
    spec: version.spec,
    drawn: `${version.savedBy}, ${formatInstant(version.savedAt).slice(0, 11)}`,
    checksum: `${version.checksum.slice(0, 4)}…${version.checksum.slice(-4)}`,
  }
}
