import { useState } from 'react'
import type { OwnTarget } from '@/dsp'
import { TextField } from '@/components/ui/field'
import { readCoefficients } from '@/lib/targets/written-roots'
import type { GivenForm } from './given-form'
import { GivenFrame } from './given-frame'

type Polynomials = Extract<OwnTarget, { given: 'polynomials' }>

/** An original given as a ratio of two polynomials in s. */
export function PolynomialsForm({ given, onTake, readOnly }: GivenForm<Polynomials>) {
  const [numerator, setNumerator] = useState(given?.numerator.join(' ') ?? '40000')
  const [denominator, setDenominator] = useState(given?.denominator.join(' ') ?? '1 280 40000')
  const [name, setName] = useState(given?.name ?? 'Own response')
  const [problems, setProblems] = useState<{ numerator?: string; denominator?: string }>({})

  function take() {
    const [above, below] = [readCoefficients(numerator), readCoefficients(denominator)]
    const told = (found: typeof above) => (found.ok ? undefined : found.problems.map(({ reason }) => reason).join(' '))
    const [first, second] = [told(above), told(below)]
    setProblems({ ...(first && { numerator: first }), ...(second && { denominator: second }) })
    if (above.ok && below.ok) onTake({ given: 'polynomials', name, numerator: above.value, denominator: below.value })
  }

  return (
    <GivenFrame name={name} onName={setName} takeWords="Use as the original" onTake={take} readOnly={readOnly}>
      <div className="grid gap-4 sm:grid-cols-2">
        <TextField
          label="Numerator"
          hint="From the highest power of s down to the constant; s in rad/s."
          error={problems.numerator}
          className="numeric"
          value={numerator}
          readOnly={readOnly}
          onChange={(event) => setNumerator(event.currentTarget.value)}
        />
        <TextField
          label="Denominator"
          hint="Of at least the numerator’s degree, its roots left of the imaginary axis."
          error={problems.denominator}
          className="numeric"
          value={denominator}
          readOnly={readOnly}
          onChange={(event) => setDenominator(event.currentTarget.value)}
        />
      </div>
    </GivenFrame>
  )
}
