'use client'

import { ChoiceGroup } from '@/components/handover/choice-group'
import { InlineQuantity } from '@/components/studio/shell/inline-quantity'
import { toleranceSchema, type ToleranceSettings } from '@/dsp'
import { formatNumber } from '@/lib/format/quantity'
import { parseCount, parsePercent } from '@/lib/units/parse'

const kinds = [
  { value: 'parts', label: 'parts' },
  { value: 'sections', label: 'f0 and Q' },
] as const

const words = {
  percent: 'A spread is above 0 and at most 50 %.',
  channels: 'A run has 100 to 20 000 channels.',
  seed: 'A seed is a whole number from 0 to 4 294 967 295.',
}

/** How much the parts spread, over how many channels, from which seed; a sentence whose quantities can be typed over. */
export function ToleranceForm({
  settings,
  disabled,
  onChange,
}: {
  settings: ToleranceSettings
  disabled: boolean
  /** False when the page refused it. */
  onChange(settings: ToleranceSettings): boolean
}) {
  const { spread } = settings
  const set = (change: Partial<ToleranceSettings>, reason: string): string | null => {
    const parsed = toleranceSchema.safeParse({ ...settings, ...change })
    if (!parsed.success) return reason
    return onChange(parsed.data) ? null : 'The chain refuses it; see the statement.'
  }
  const percent = (label: string, value: number, change: (value: number) => ToleranceSettings['spread']) => (
    <InlineQuantity
      label={label}
      text={`${formatNumber(value)}\u2009%`}
      parse={parsePercent}
      onValue={(next) => set({ spread: change(next) }, words.percent)}
      disabled={disabled}
    />
  )
  return (
    <div className="flex flex-wrap items-center gap-x-2 gap-y-1 text-[14px]">
      {disabled ? null : (
        <ChoiceGroup
          legend="Spread of"
          inline
          choices={kinds}
          value={spread.of}
          onChange={(of) => {
            if (of === spread.of) return
            onChange({
              ...settings,
              spread: of === 'parts' ? { of, percent: 1 } : { of, f0Percent: 1, qPercent: 2 },
            })
          }}
        />
      )}
      {spread.of === 'parts' ? (
        <>
          <span>each R and C within</span>
          {percent('Spread of the parts', spread.percent, (value) => ({ of: 'parts', percent: value }))}
        </>
      ) : (
        <>
          <span>f0 within</span>
          {percent('Spread of f0', spread.f0Percent, (value) => ({ ...spread, f0Percent: value }))}
          <span>and Q within</span>
          {percent('Spread of Q', spread.qPercent, (value) => ({ ...spread, qPercent: value }))}
        </>
      )}
      <span>over</span>
      <InlineQuantity
        label="Channels"
        text={formatNumber(settings.channels, 6)}
        parse={(text) => parseCount(text.replace(/[\s\u2009]/g, ''))}
        onValue={(channels) => set({ channels }, words.channels)}
        disabled={disabled}
      />
      <span>channels, seed</span>
      <InlineQuantity
        label="Seed"
        text={String(settings.seed)}
        parse={parseCount}
        onValue={(seed) => set({ seed }, words.seed)}
        disabled={disabled}
      />
    </div>
  )
}
