import Link from 'next/link'
import type { Send } from '@/components/account/send'
import { DuplicateButton } from './duplicate-button'
import type { DesignLine } from '@/lib/designs/project-lines'

/** One ruled line for each design: its number, title and statement, and where it stands. */
export function DesignList({
  designs,
  duplicateDesign,
}: {
  designs: readonly DesignLine[]
  duplicateDesign: Send | null
}) {
  return (
    <ul className="border-t border-graph-strong">
      {designs.map((design) => (
        <li
          key={design.id}
          className="grid gap-x-5 gap-y-1 border-b border-graph py-3 sm:grid-cols-[7.5rem_minmax(0,1fr)_auto] hover:bg-sheet"
        >
          <span className="numeric pt-1 text-[13px] text-pencil">{design.drawingNumber}</span>
          <div className="min-w-0">
            <Link
              href={`/designs/${design.id}`}
              className="inline-block py-0.5 font-medium underline-offset-2 hover:text-spruce hover:underline"
            >
              {design.title}
            </Link>
            <p className="text-[14px] text-pencil">{design.statement}</p>
          </div>
          <div className="flex flex-wrap items-baseline gap-x-4 gap-y-1 text-[13px] sm:flex-col sm:items-end">
            <span className="numeric">
              {design.rate} · {design.version} · {design.state}
            </span>
            <span className="text-pencil">{design.saved}</span>
            {duplicateDesign ? (
              <DuplicateButton designId={design.id} title={design.title} duplicateDesign={duplicateDesign} />
            ) : null}
          </div>
        </li>
      ))}
    </ul>
  )
}
