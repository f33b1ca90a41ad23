import type { ComputedChain } from '@/dsp'
import { stageName } from '@/lib/chains/words'

/** What was computed, but should be known of: each caution with the stage that it is about. */
export function Cautions({ chain }: { chain: ComputedChain }) {
  const found = chain.diagnostics.filter(({ severity }) => severity === 'caution')
  if (found.length === 0) return null
  return (
    <ul aria-label="Cautions" className="mt-1 border-l-2 border-ochre pl-3 text-[13px] text-ink">
      {found.map((caution, at) => {
        const named = /^stages\.(\d+)/.exec(caution.field ?? '')?.[1]
        const of =
          chain.stages.find(({ diagnostics }) => diagnostics.includes(caution)) ?? chain.stages[Number(named ?? -1)]
        return (
          <li key={at}>
            {of ? `Stage ${of.index + 1}, ${stageName(of.stage)}: ` : ''}
            {caution.message}
          </li>
        )
      })}
    </ul>
  )
}
