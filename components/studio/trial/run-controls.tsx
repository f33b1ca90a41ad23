'use client'

import { useState } from 'react'
import { SelectField, TextField } from '@/components/ui/field'
import type { DesignSpec } from '@/dsp'
import { classNames } from '@/lib/format/class-names'
import type { RecordingSummary } from './shapes'
import type { TrialSettings } from './store'
import { parseChannels, writeChannels } from './words'
import { offeredWay } from './zero-phase'

/** Beyond this many channels a text says which are run. */
const MOST_BOXES = 12

const offlineWords = {
  'forward-backward': 'forward and backward (zero phase, offline only)',
  'delay-removed': 'once, its delay taken off (offline only)',
  none: 'without delay: not with these taps, an odd number of symmetric ones',
} as const

/** How the design is run, over which channels, and which of them is shown. */
export function RunControls({
  spec,
  recording,
  settings,
  onChange,
}: {
  spec: DesignSpec
  recording: RecordingSummary
  settings: TrialSettings
  onChange(change: Partial<TrialSettings>): void
}) {
  const way = offeredWay(spec)
  return (
    <div className="flex flex-wrap items-start gap-x-8 gap-y-3">
      <Radios
        legend="Run"
        name="trial-mode"
        value={settings.mode}
        options={[
          { value: 'causal', word: 'causally, as in real time' },
          { value: 'zero-phase', word: offlineWords[way ?? 'none'], disabled: way === null },
        ]}
        onChange={(mode) => onChange({ mode })}
      />
      {settings.mode === 'causal' ? (
        <Radios
          legend="Start"
          name="trial-start"
          value={settings.start}
          options={[
            { value: 'zero', word: 'at rest' },
            { value: 'steady', word: 'steady at the first sample' },
          ]}
          onChange={(start) => onChange({ start })}
        />
      ) : null}
      {recording.channels.length > 1 ? (
        <ChannelChoice recording={recording} settings={settings} onChange={onChange} />
      ) : null}
    </div>
  )
}

function Radios<Value extends string>({
  legend,
  name,
  value,
  options,
  onChange,
}: {
  legend: string
  name: string
  value: Value
  options: readonly { readonly value: Value; readonly word: string; readonly disabled?: boolean }[]
  onChange(value: Value): void
}) {
  return (
    <fieldset className="flex flex-col text-[14px]">
      <legend className="text-[13px] font-medium">{legend}</legend>
      {options.map((option) => (
        <label
          key={option.value}
          className={classNames(
            'inline-flex min-h-[24px] items-center gap-2',
            option.disabled ? 'text-pencil' : 'cursor-pointer',
          )}
        >
          <input
            type="radio"
            disabled={option.disabled}
            name={name}
            className="size-4 accent-spruce"
            checked={option.value === value}
            onChange={() => onChange(option.value)}
          />
          {option.word}
        </label>
      ))}
    </fieldset>
  )
}

function ChannelChoice({
  recording,
  settings,
  onChange,
}: {
  recording: RecordingSummary
  settings: TrialSettings
  onChange(change: Partial<TrialSettings>): void
}) {
  const { channels } = recording
  const toggled = (channel: number) =>
    settings.channels.includes(channel)
      ? settings.channels.filter((each) => each !== channel)
      : [...settings.channels, channel].sort((a, b) => a - b)
  return (
    <>
      {channels.length <= MOST_BOXES ? (
        <fieldset className="flex max-w-full flex-col text-[14px]">
          <legend className="text-[13px] font-medium">Channels to run</legend>
          <div className="flex flex-wrap gap-x-4">
            {channels.map((channel, index) => (
              <label key={index} className="inline-flex min-h-[24px] cursor-pointer items-center gap-2">
                <input
                  type="checkbox"
                  className="size-4 accent-spruce"
                  checked={settings.channels.includes(index)}
                  onChange={() => onChange({ channels: toggled(index) })}
                />
                {channel.name}
              </label>
            ))}
          </div>
        </fieldset>
      ) : (
        <ChannelText
          key={writeChannels(settings.channels)}
          count={channels.length}
          chosen={settings.channels}
          onSettle={(chosen) => onChange({ channels: chosen })}
        />
      )}
      <div className="w-44">
        <SelectField
          label="Shown"
          value={settings.shown}
          onChange={(event) => onChange({ shown: Number(event.target.value) })}
        >
          {channels.map((channel, index) => (
            <option key={index} value={index}>
              {channel.name}
              {settings.channels.includes(index) ? '' : ' (not run)'}
            </option>
          ))}
        </SelectField>
      </div>
    </>
  )
}

function ChannelText({
  count,
  chosen,
  onSettle,
}: {
  count: number
  chosen: readonly number[]
  onSettle(channels: number[]): void
}) {
  const [text, setText] = useState(writeChannels(chosen))
  const parsed = parseChannels(text, count)
  const settle = () => {
    if (parsed && writeChannels(parsed) !== writeChannels(chosen)) onSettle(parsed)
  }
  return (
    <div className="w-56">
      <TextField
        label="Channels to run"
        className="numeric"
        value={text}
        error={parsed ? undefined : `Numbers from 1 to ${count}, such as 1–3, 7.`}
        onChange={(event) => setText(event.target.value)}
        onBlur={settle}
        onKeyDown={(event) => {
          if (event.key === 'Enter') settle()
          if (event.key === 'Escape') setText(writeChannels(chosen))
        }}
      />
    </div>
  )
}
