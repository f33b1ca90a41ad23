import Link from 'next/link'
import type { Send } from '@/components/account/send'
import { classNames } from '@/lib/format/class-names'
import type { ChainLine } from '@/lib/chains/project-lines'
import { DuplicateChainButton } from './duplicate-chain-button'

const tones = { met: 'text-moss', missed: 'text-vermilion', open: 'text-pencil' } as const

/** One ruled line for each chain, as designs have: its number, title and statement, where it stands, and whether its sheet is met. */
export function ChainList({ chains, duplicateChain }: { chains: readonly ChainLine[]; duplicateChain: Send | null }) {
  return (
    <ul className="border-t border-graph-strong">
      {chains.map((chain) => (
        <li
          key={chain.id}
          className="grid gap-x-5 gap-y-1 border-b border-graph py-3 sm:grid-cols-[7.5rem_minmax(0,1fr)_auto] hover:bg-sheet"
        >
          <span className="numeric pt-1 text-[13px] text-pencil">{chain.drawingNumber}</span>
          <div className="min-w-0">
            <Link
              href={`/chains/${chain.id}`}
              className="inline-block py-0.5 font-medium underline-offset-2 hover:text-spruce hover:underline"
            >
              {chain.title}
            </Link>
            <p className="text-[14px] text-pencil">{chain.statement}</p>
          </div>
          <div className="flex flex-wrap items-baseline gap-x-4 gap-y-1 text-[13px] sm:flex-col sm:items-end">
            <span className="numeric">
              {chain.rate} · {chain.version}
            </span>
            {chain.sheet === '' ? null : (
              <span className={classNames('numeric', tones[chain.sheetTone])}>{chain.sheet}</span>
            )}
            <span className="text-pencil">{chain.saved}</span>
            {duplicateChain ? (
              <DuplicateChainButton chainId={chain.id} title={chain.title} duplicateChain={duplicateChain} />
            ) : null}
          </div>
        </li>
      ))}
    </ul>
  )
}
