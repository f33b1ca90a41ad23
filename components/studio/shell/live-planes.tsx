import { useDeferredValue, useMemo } from 'react'
import { firZeros, isFir } from '@/dsp'
import { Planes, type VersionRoots } from '../planes/planes'
import type { StudioStore } from '../store'
import { useDrawnRoots } from './use-derived'

/** The planes, moving with the hand; the zeros of an FIR filter are searched for, and may come a moment later. */
export function LivePlanes({ store }: { store: StudioStore }) {
  const { versions, hidden } = useDrawnRoots(store)
  const fir = versions?.digital.find(({ filter }) => isFir(filter))?.filter ?? null
  const searched = useDeferredValue(fir)
  const zeros = useMemo(() => (searched && isFir(searched) ? firZeros(searched) : null), [searched])
  if (!versions) return null
  const known = versions.digital.flatMap(({ id, filter }): VersionRoots[] => {
    if (hidden.includes(id)) return []
    if (isFir(filter)) return zeros ? [{ id, zeros, poles: [] }] : []
    return [{ id, zeros: filter.zeros, poles: filter.poles }]
  })
  if (fir && searched === fir && !zeros)
    return <p className="text-[13px] text-pencil">The zeros of so many taps are not drawn; the taps stand below.</p>
  return <Planes analog={versions.analog} versions={known} />
}
