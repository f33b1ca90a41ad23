'use client'

import { useState } from 'react'
import { Button } from '@/components/ui/button'
import { SelectField } from '@/components/ui/field'
import { Notice } from '@/components/ui/notice'
import { offerDownload } from './offer-download'
import type { SaveFormat, SaveRequest } from './shapes'
import type { TrialView } from './store'
import type { Trial } from './trial'

const FORMATS: readonly { readonly value: SaveFormat; readonly word: string }[] = [
  { value: 'float32', word: 'WAV, 32-bit float' },
  { value: 'float64', word: 'WAV, 64-bit float' },
  { value: 'int24', word: 'WAV, 24-bit integer' },
  { value: 'csv', word: 'CSV: time, before, after' },
]

/** The result as a file. */
export function SaveControls({ trial, state }: { trial: Trial; state: TrialView }) {
  const [format, setFormat] = useState<SaveFormat>('float32')
  const [beyond, setBeyond] = useState<SaveRequest['beyondFullScale']>('refuse')
  const { run, runningWords, busyWith, saved, saveProblem } = state
  async function save() {
    const file = await trial.save({ format, beyondFullScale: beyond })
    if (file) offerDownload(file.blob, file.name)
  }
  return (
    <div className="flex flex-col gap-2">
      <div className="flex flex-wrap items-end gap-3">
        <div className="w-56">
          <SelectField
            label="Save the result as"
            value={format}
            onChange={(event) =>
              setFormat(FORMATS.find((each) => each.value === event.target.value)?.value ?? 'float32')
            }
          >
            {FORMATS.map(({ value, word }) => (
              <option key={value} value={value}>
                {word}
              </option>
            ))}
          </SelectField>
        </div>
        {format === 'int24' ? (
          <div className="w-56">
            <SelectField
              label="Beyond full scale"
              value={beyond}
              onChange={(event) => setBeyond(event.target.value === 'scale' ? 'scale' : 'refuse')}
            >
              <option value="refuse">refuse, nothing is clipped</option>
              <option value="scale">scale everything to fit</option>
            </SelectField>
          </div>
        ) : null}
        <Button disabled={!run || runningWords !== null || busyWith !== null} onClick={() => void save()}>
          Save the result
        </Button>
      </div>
      {saveProblem ? <Notice kind="caution">{saveProblem.message}</Notice> : null}
      {saved ? (
        <Notice kind="met">
          <span className="break-all">{saved.name}</span> was handed to the browser. {saved.note}
        </Notice>
      ) : null}
    </div>
  )
}
