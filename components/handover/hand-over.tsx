'use client'

import Link from 'next/link'
import { useEffect, useMemo, useRef, useState, type KeyboardEvent, type ReactNode } from 'react'
import { Button } from '@/components/ui/button'
import { TextField } from '@/components/ui/field'
import { isStoredTaps, type StoredCoefficients } from '@/lib/designs/stored-coefficients'
import type { DesignRecord, VersionSummary } from '@/lib/designs/types'
import { caution } from '@/lib/caution'
import { structuresOf, usualStructure, type ExportOptions } from '@/lib/exports'
import { defaultIdentifier } from '@/lib/exports/names'
import { Checksum } from './checksum'
import { ChoiceGroup } from './choice-group'
import { equationOf, previewOf, ratioProblem } from './draft-file'
import { FilePreview } from './file-preview'

const formats = [
  { value: 'json', label: 'JSON' },
  { value: 'csv', label: 'CSV' },
  { value: 'c', label: 'C header' },
  { value: 'numpy', label: 'NumPy' },
  { value: 'octave', label: 'Octave' },
] as const
const structureLabels = { sections: 'Sections', ratio: 'b/a', taps: 'Taps' } as const
const numberTypes = [
  { value: 'double', label: 'Double' },
  { value: 'float', label: 'Single (float)' },
] as const
const signs = [
  { value: 'subtract', label: 'Subtracted' },
  { value: 'add', label: 'Added' },
] as const
const literalStyles = [
  { value: 'decimal', label: 'Decimal' },
  { value: 'hexadecimal', label: 'Hexadecimal' },
] as const

/**
 * A version's coefficients as a file in the target's own convention. In the page, not over it: the sheet stays usable beside it.
 * Escape, pressed inside, closes it.
 */
export function HandOver({
  design,
  version,
  kept: numbers,
  exportHref,
  onClose,
}: {
  design: DesignRecord
  version: VersionSummary
  /** The numbers that were kept with the version, and that its files carry. */
  kept: StoredCoefficients
  exportHref(options: ExportOptions): string
  onClose?: (() => void) | undefined
}) {
  const [options, setOptions] = useState<ExportOptions>({
    format: 'c',
    structure: usualStructure(numbers),
    number: 'double',
    feedback: 'subtract',
    literals: 'decimal',
  })
  const [name, setName] = useState('')
  const heading = useRef<HTMLHeadingElement>(null)
  const choose = (change: Partial<ExportOptions>) => setOptions((before) => ({ ...before, ...change }))

  const asked = useMemo(() => (name === '' ? options : { ...options, name }), [options, name])
  const preview = useMemo(() => previewOf(design, version, numbers, asked), [design, version, numbers, asked])
  const refusedRatio = useMemo(() => ratioProblem(numbers, options.number), [numbers, options.number])
  const problem = 'problem' in preview ? preview.problem : null
  const structures = structuresOf(numbers)

  useEffect(() => {
    // A panel that was opened takes the focus; one that belongs to its page leaves it where it is.
    if (onClose) heading.current?.focus()
  }, [onClose])

  function onKeyDown(event: KeyboardEvent) {
    if (event.key !== 'Escape' || !onClose) return
    event.stopPropagation()
    onClose()
  }

  return (
    <section
      aria-labelledby="hand-over-heading"
      onKeyDown={onKeyDown}
      className="flex min-w-0 flex-col gap-4 border border-graph-strong bg-sheet p-4"
    >
      <div className="flex items-start justify-between gap-3">
        <h2 id="hand-over-heading" ref={heading} tabIndex={-1} className="text-[19px]">
          Hand over version {version.number}
        </h2>
        {onClose ? (
          <Button small kind="quiet" onClick={onClose}>
            Close
          </Button>
        ) : null}
      </div>

      <div className="grid min-w-0 gap-x-8 gap-y-5 lg:grid-cols-[minmax(0,24rem)_minmax(0,1fr)]">
        <div className="flex min-w-0 flex-col gap-4">
          <ChoiceGroup
            legend="Format"
            choices={formats}
            value={options.format}
            onChange={(format) => choose({ format })}
          />
          {structures.length === 1 ? (
            <Fixed legend="Structure">
              <p>{onlyTaps(numbers)}</p>
              <Equation {...equationOf(numbers, options)} />
            </Fixed>
          ) : (
            <ChoiceGroup
              legend="Structure"
              choices={structures.map((value) => ({ value, label: structureLabels[value] }))}
              value={options.structure}
              onChange={(structure) => choose({ structure })}
            >
              {refusedRatio ? (
                <p className={options.structure === 'ratio' ? 'text-vermilion' : 'text-pencil'}>
                  {refusedRatio.message}{' '}
                  {options.structure === 'ratio' ? (
                    <Button small onClick={() => choose({ structure: 'sections' })}>
                      Hand over the sections
                    </Button>
                  ) : null}
                </p>
              ) : (
                <p>Sections are the safe choice; b/a holds this filter too.</p>
              )}
            </ChoiceGroup>
          )}
          <ChoiceGroup
            legend="Numbers"
            choices={numberTypes}
            value={options.number}
            onChange={(number) => choose({ number })}
          >
            {problem?.field === 'number' ? (
              <p className="text-vermilion">
                {problem.message}{' '}
                <Button small onClick={() => choose({ number: 'double' })}>
                  Take double
                </Button>
              </p>
            ) : preview && 'file' in preview ? (
              <p>{capitalised(preview.rounding)}</p>
            ) : null}
          </ChoiceGroup>
          {options.structure === 'taps' ? null : (
            <ChoiceGroup
              legend="Feedback terms"
              choices={signs}
              value={options.feedback}
              onChange={(feedback) => choose({ feedback })}
            >
              <Equation {...equationOf(numbers, options)} />
            </ChoiceGroup>
          )}
          {options.format === 'c' ? (
            <ChoiceGroup
              legend="Numbers in the header"
              choices={literalStyles}
              value={options.literals}
              onChange={(literals) => choose({ literals })}
            />
          ) : null}
          <div>
            <TextField
              label="Names begin with"
              value={name}
              placeholder={defaultIdentifier(design.drawingNumber, version.number)}
              spellCheck={false}
              autoCapitalize="none"
              maxLength={80}
              className="numeric"
              onChange={(event) => setName(event.currentTarget.value)}
              error={problem?.field === 'name' ? problem.message : undefined}
            />
            {problem?.field === 'name' && problem.nearest !== undefined ? (
              <Button small className="mt-1" onClick={() => setName(String(problem.nearest))}>
                Use <span className="numeric">{problem.nearest}</span>
              </Button>
            ) : null}
          </div>
        </div>

        <div className="flex min-w-0 flex-col gap-3">
          <FilePreview href={problem ? null : exportHref(asked)} preview={preview} />
          <Checksum checksum={version.checksum} numbers={numbers} />
          <p className="text-[13px] text-pencil">
            {caution}{' '}
            <Link href="/formats" className="text-spruce underline underline-offset-2">
              What the files hold
            </Link>
          </p>
        </div>
      </div>
    </section>
  )
}

/** What stands where a choice would, when there is but one. */
function Fixed({ legend, children }: { legend: string; children: ReactNode }) {
  return (
    <div className="min-w-0 text-[13px]">
      <p className="mb-1 font-medium text-ink">{legend}</p>
      <div className="text-pencil">{children}</div>
    </div>
  )
}

function onlyTaps(numbers: StoredCoefficients): string {
  const count = isStoredTaps(numbers) ? numbers.taps.length : 0
  return `${count} taps, the one structure of an FIR filter. There is no feedback, so no sign to choose.`
}

function Equation({ typeset, plain }: { typeset: string; plain: string }) {
  return (
    <p className="numeric overflow-x-auto text-[13px] leading-6 text-ink">
      <span aria-hidden>{typeset}</span>
      <span className="sr-only">{plain}</span>
    </p>
  )
}

const capitalised = (text: string) => `${text.charAt(0).toUpperCase()}${text.slice(1)}.`
