'use client'

import { useState, type FormEvent } from 'react'
import { Button } from '@/components/ui/button'
import { SelectField } from '@/components/ui/field'
import type { VersionSummary } from '@/lib/designs/types'
import { compareAddress, MOST_SIDES, parseSide, sideLabel, type SideId } from './sides'

export interface CandidateChoice {
  readonly id: SideId
  readonly label: string
}

/** Which sides, in which order: four lists, the first of them the base. The choice becomes the address, so that a link keeps it. */
export function Chooser({
  designId,
  chosen,
  versions,
  hasDraft,
  candidates,
}: {
  designId: string
  chosen: readonly SideId[]
  versions: readonly VersionSummary[]
  hasDraft: boolean
  candidates: readonly CandidateChoice[]
}) {
  const [picked, setPicked] = useState<readonly string[]>(() =>
    Array.from({ length: MOST_SIDES }, (_, place) => String(chosen[place] ?? '')),
  )
  const ids = [...new Set(picked.map(parseSide).filter((id) => id !== null))]

  function onSubmit(event: FormEvent) {
    event.preventDefault()
    location.assign(compareAddress(designId, ids))
  }

  return (
    <form method="get" onSubmit={onSubmit} className="flex min-w-0 flex-wrap items-end gap-2">
      {picked.map((value, place) => (
        <div key={place} className="w-full min-w-0 sm:w-44">
          <SelectField
            label={place === 0 ? 'Base' : place === 1 ? 'Beside it' : `Side ${place + 1}`}
            name="sides"
            value={value}
            onChange={(event) => {
              const next = event.currentTarget.value
              setPicked((before) => before.map((old, at) => (at === place ? next : old)))
            }}
          >
            {place === 0 ? null : <option value="">Nothing</option>}
            {hasDraft ? <option value="draft">Draft</option> : null}
            {candidates.map(({ id, label }) => (
              <option key={id} value={id}>
                {`${sideLabel(id)}: ${shortened(label)}`}
              </option>
            ))}
            {versions.map(({ number, note }) => (
              <option key={number} value={number}>
                {`Version ${number}: ${shortened(note)}`}
              </option>
            ))}
          </SelectField>
        </div>
      ))}
      <Button type="submit" kind="primary" disabled={ids.length === 0}>
        {ids.length > 1 ? `Compare ${ids.length}` : 'Show it'}
      </Button>
    </form>
  )
}

const shortened = (text: string): string => (text.length > 40 ? `${text.slice(0, 39)}…` : text)
