import { useState } from 'react'
import type { OwnTarget } from '@/dsp'
import { Button } from '@/components/ui/button'
import { TextField } from '@/components/ui/field'
import { gainForUnityAtDc, readRoots, writtenRoots, type RootUnit } from '@/lib/targets/written-roots'
import { parsePlainNumber } from '@/lib/units/parse'
import { ChoiceGroup } from '@/components/handover/choice-group'
import type { GivenForm } from './given-form'
import { GivenFrame } from './given-frame'
import { TextAreaField } from './text-area-field'

type Roots = Extract<OwnTarget, { given: 'roots' }>

const units = [
  { value: 'rad/s', label: 'rad/s' },
  { value: 'Hz', label: 'Hz' },
] as const

const MOST_ROOTS = 24

/** An original given by its zeros, poles and gain. */
export function RootsForm({ given, onTake, readOnly }: GivenForm<Roots>) {
  const [unit, setUnit] = useState<RootUnit>('rad/s')
  const [poles, setPoles] = useState(() => (given ? writtenRoots(given.poles, 'rad/s') : '−300 ± 300j'))
  const [zeros, setZeros] = useState(() => (given ? writtenRoots(given.zeros, 'rad/s') : ''))
  const [gain, setGain] = useState(() => (given ? String(given.gain) : '180000'))
  const [name, setName] = useState(given?.name ?? 'Own response')
  const [problems, setProblems] = useState<Partial<Record<'poles' | 'zeros' | 'gain', readonly string[]>>>({})

  function read() {
    const [foundPoles, foundZeros] = [readRoots(poles, unit), readRoots(zeros, unit)]
    const told = (found: typeof foundPoles) =>
      found.ok ? [] : found.problems.map(({ line, reason }) => `Line ${line}: ${reason}`)
    const many = (found: typeof foundPoles) =>
      found.ok && found.value.length > MOST_ROOTS
        ? [`There are ${found.value.length}; at most ${MOST_ROOTS} can be kept.`]
        : []
    const [poleProblems, zeroProblems] = [
      [...told(foundPoles), ...many(foundPoles)],
      [...told(foundZeros), ...many(foundZeros)],
    ]
    setProblems({ poles: poleProblems, zeros: zeroProblems })
    if (poleProblems.length + zeroProblems.length > 0) return null
    return foundPoles.ok && foundZeros.ok ? { poles: foundPoles.value, zeros: foundZeros.value } : null
  }

  function take() {
    const roots = read()
    const written = parsePlainNumber(gain)
    const value = written.ok ? written.value : 0
    if (value === 0) {
      setProblems((known) => ({ ...known, gain: ['The gain is a number other than 0.'] }))
      return
    }
    if (roots) onTake({ given: 'roots', name, ...roots, gain: value })
  }

  function unity() {
    const roots = read()
    if (!roots) return
    const found = gainForUnityAtDc(roots.zeros, roots.poles)
    if (found === null) setProblems({ gain: ['With a root at the origin there is no unity at DC.'] })
    else setGain(String(found))
  }

  return (
    <GivenFrame
      name={name}
      onName={setName}
      takeWords="Use as the original"
      onTake={take}
      readOnly={readOnly}
      beside={<Button onClick={unity}>Make it one at DC</Button>}
    >
      <ChoiceGroup legend="Roots in" inline choices={units} value={unit} onChange={(next) => setUnit(next)} />
      <div className="grid gap-4 sm:grid-cols-2">
        <TextAreaField
          label="Poles"
          hint="One a line; a pair once, as −120 ± 300j. Left of the imaginary axis."
          problems={problems.poles ?? []}
          value={poles}
          readOnly={readOnly}
          onChange={(event) => setPoles(event.currentTarget.value)}
        />
        <TextAreaField
          label="Zeros"
          hint="No more than there are poles; may be empty."
          problems={problems.zeros ?? []}
          value={zeros}
          readOnly={readOnly}
          onChange={(event) => setZeros(event.currentTarget.value)}
        />
      </div>

      <TextField
        label="Gain"
        hint="H(s) = gain · ∏(s − zeros) / ∏(s − poles), s in rad/s."
        error={problems.gain?.[0]}
        value={gain}
        readOnly={readOnly}
        onChange={(event) => setGain(event.currentTarget.value)}
      />
    </GivenFrame>
  )
}
