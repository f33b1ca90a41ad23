import type { ReactNode } from 'react'
import type { Diagnostic } from '@/dsp'

/** A titled part of the drawer. */
export function Part({ title, controls, children }: { title: string; controls?: ReactNode; children: ReactNode }) {
  return (
    <section aria-label={title} className="flex min-w-0 flex-col gap-2">
      <div className="flex flex-wrap items-center gap-x-5 gap-y-1">
        <h3 className="font-text text-[14px] font-semibold">{title}</h3>
        {controls}
      </div>
      {children}
    </section>
  )
}

/** What should be known of a design; nothing where there is nothing. */
export function ToKnow({ diagnostics }: { diagnostics: readonly Diagnostic[] }) {
  if (diagnostics.length === 0) return null
  return (
    <Part title="To know about this design">
      <ul className="flex flex-col gap-1.5 text-[14px]">
        {diagnostics.map(({ code, severity, message }) => (
          <li key={`${code} ${message}`}>
            <span className={severity === 'caution' ? 'text-vermilion' : 'text-pencil'}>
              {severity === 'caution' ? 'Caution: ' : 'Note: '}
            </span>
            {message}
          </li>
        ))}
      </ul>
    </Part>
  )
}
