'use client'

import { useId, type ReactNode } from 'react'
import type { ChainSpec } from '@/dsp'
import { InlineQuantity } from '@/components/studio/shell/inline-quantity'
import { RefusalNote } from '@/components/studio/statement/refusal-note'
import { chainFieldOf, chainFieldText, numberAt, parseChainField } from '@/lib/chains/fields'
import type { ChainDesk } from './chain-desk'
import type { ChainOption } from './statement-options'
import { chainWordLabel, nyquistOf } from './statement'
import { useSaid } from './use-said'

/* The fields of the desk: each with its label before it, each refused right beside itself. */

interface FieldProps {
  readonly spec: ChainSpec
  readonly desk: ChainDesk
  readonly readOnly: boolean
}

const Labelled = ({ label, children }: { label: ReactNode; children: ReactNode }) => (
  <span className="inline-flex min-h-7 flex-wrap items-baseline gap-x-1.5 text-[13px]">
    <span className="text-pencil">{label}</span>
    {children}
  </span>
)

/** The number at a path, typed in place; `label` where it is called otherwise than in the sentence. */
export function NumberField({
  spec,
  desk,
  readOnly,
  path,
  label,
  name,
}: FieldProps & { path: string; label?: string | undefined; name?: string }) {
  const value = numberAt(spec, path)
  if (value === null) return null
  return (
    <Labelled label={label ?? chainFieldOf(path)?.label}>
      <ChainNumber spec={spec} desk={desk} readOnly={readOnly} path={path} name={name ?? chainWordLabel(path)} />
    </Labelled>
  )
}

/** The number at a path by itself, wherever it stands. */
export function ChainNumber({ spec, desk, readOnly, path, name }: FieldProps & { path: string; name: string }) {
  const value = numberAt(spec, path)
  if (value === null) return null
  const text = chainFieldText(spec, path, value)
  if (readOnly) return <span className="numeric text-[13px]">{text}</span>
  return (
    <InlineQuantity
      label={name}
      text={text}
      parse={(typed) => parseChainField(spec, path, typed, nyquistOf(spec, path))}
      onValue={(next) => desk.setNumber(path, next)}
      onStep={(direction) => desk.step(path, direction)}
      onStepped={desk.stepped}
    />
  )
}

/** A part that a stage has or hasn't; its numbers stand behind it. */
export function SwitchField({
  label,
  isOn,
  desk,
  readOnly,
  onSwitch,
  children,
}: Omit<FieldProps, 'spec'> & {
  label: string
  isOn: boolean
  onSwitch(isOn: boolean): (spec: ChainSpec) => ChainSpec
  children?: ReactNode
}) {
  const [problem, setProblem] = useSaid<string>(desk)
  const id = useId()
  return (
    <span className="inline-flex min-h-7 flex-wrap items-baseline gap-x-3 text-[13px]">
      <label className="inline-flex min-h-6 items-center gap-1.5">
        <input
          type="checkbox"
          className="size-4 accent-spruce"
          checked={isOn}
          disabled={readOnly}
          aria-describedby={problem ? id : undefined}
          onChange={(event) => setProblem(desk.edit(onSwitch(event.currentTarget.checked)))}
        />
        {label}
      </label>
      {isOn ? children : null}
      {problem ? <RefusalNote id={id} message={problem} /> : null}
    </span>
  )
}

/** A choice of a few; a refused one leaves the old one standing and says why. */
export function ChoiceField({
  label,
  current,
  options,
  desk,
  readOnly,
}: Omit<FieldProps, 'spec'> & { label: string; current: string; options: readonly ChainOption[] }) {
  const [problem, setProblem] = useSaid<string>(desk)
  const id = useId()
  return (
    <span className="inline-flex max-w-full min-h-7 flex-wrap items-baseline gap-x-1.5 text-[13px]">
      <label htmlFor={id} className="text-pencil">
        {label}
      </label>
      <select
        id={id}
        className="min-h-7 w-auto max-w-60 min-w-0 rounded border border-graph-strong bg-sheet px-1.5 text-[13px] text-ink hover:border-pencil"
        value={current}
        disabled={readOnly}
        aria-describedby={problem ? `${id}-problem` : undefined}
        onChange={(event) => {
          const option = options.find(({ value }) => value === event.currentTarget.value)
          if (option) setProblem(desk.edit(option.apply))
        }}
      >
        {options.map(({ value, label: words }) => (
          <option key={value} value={value}>
            {words}
          </option>
        ))}
      </select>
      {problem ? <RefusalNote id={`${id}-problem`} message={problem} /> : null}
    </span>
  )
}
