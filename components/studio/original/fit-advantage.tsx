import { useMemo } from 'react'
import { DesignError, fittedAdvantage, isFamilyDesign, isFirDesign, type DesignSpec, type FittedAdvantage } from '@/dsp'
import { methodLabels } from '@/lib/designs/words'
import { formatHz, formatNumber } from '@/lib/format/quantity'
import { methodAsShown } from '../derive'
import { orRefusal } from '../or-refusal'

/** What a fitted version is worth beside the transforms, in one sentence of numbers; or that there is no advantage. */
export function FitAdvantage({ spec }: { spec: DesignSpec }) {
  const found = useMemo(() => advantageOf(spec), [spec])
  if (found === null) return null
  return (
    <p className="text-[13px] text-pencil" aria-label="Worth of the fitted version">
      {found instanceof DesignError ? `The fitted version: ${found.message}` : advantageWords(found)}
    </p>
  )
}

function advantageOf(spec: DesignSpec): FittedAdvantage | DesignError | null {
  if (isFirDesign(spec) || (!isFamilyDesign(spec) && spec.own.given === 'measured')) return null
  const how = methodAsShown(spec, 'fitted')
  return how.method === 'fitted' ? orRefusal(() => fittedAdvantage(spec, how)) : null
}

function advantageWords({ fromHz, upToHz, versions, isAdvantage, removeDelay }: FittedAdvantage): string {
  const figures = versions.map(
    ({ method, db, degrees }) =>
      `${methodLabels[method]} ${formatNumber(db, 2)}\u2009dB and ${formatNumber(degrees, 2)}°`,
  )
  const band = fromHz > 0 ? `From ${formatHz(fromHz, 3)} to ${formatHz(upToHz, 4)}` : `Up to ${formatHz(upToHz, 4)}`
  const verdict = isAdvantage
    ? 'the fitted version is the closest of these three.'
    : 'the fitted version has no advantage over these two here.'
  return `${band}${removeDelay ? ', best delay removed' : ''}, the worst departures are: ${figures.join('; ')} – ${verdict}`
}
