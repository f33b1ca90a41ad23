import type { ComputedChain } from '@/dsp'
import { stageName } from '@/lib/chains/words'

/** What was computed, but should be known of: each caution with the stage that it is about. */
export function Cautions({ chain }: { chain: ComputedChain }) {
  const found = [
    ...chain.diagnostics.map((diagnostic) => ({ diagnostic, of: '' })),
    ...chain.stages.flatMap(({ stage, index, diagnostics }) =>
      diagnostics.map((diagnostic) => ({ diagnostic, of: `Stage ${index + 1}, ${stageName(stage)}: ` })),
    ),
  ].filter(({ diagnostic }) => diagnostic.severity === 'caution')
  if (found.length === 0) return null
  return (
    <ul aria-label="Cautions" className="mt-1 border-l-2 border-ochre pl-3 text-[13px] text-ink">
      {found.map(({ diagnostic, of }) => (
        <li key={`${of}${diagnostic.code}`}>
          {of}
          {diagnostic.message}
        </li>
      ))}
    </ul>
  )
}
