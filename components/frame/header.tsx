import Link from 'next/link'
import type { ReactNode } from 'react'
import { Mark } from '@/components/ui/mark'
import { ThemeSwitch } from './theme-switch'

export interface Crumb {
  readonly label: string
  readonly href?: string
}

/** The strip on top of every page: the mark, where one is, and what can be done here. */
export function Header({ crumbs, children }: { crumbs: readonly Crumb[]; children?: ReactNode }) {
  return (
    <header className="border-b border-graph-strong">
      <div className="mx-auto flex max-w-[1680px] flex-wrap items-center gap-x-4 gap-y-2 px-4 py-2 sm:px-6">
        <Link href="/" className="flex items-center gap-2.5 py-1 font-heading text-[18px] font-semibold">
          <Mark />
          Polewright
        </Link>
        <nav aria-label="Where you are" className="min-w-0 grow basis-40">
          <ol className="flex min-w-0 flex-wrap items-baseline gap-x-2 text-[14px] text-pencil">
            {crumbs.map((crumb, index) => (
              <li key={crumb.label} className="flex min-w-0 items-baseline gap-2">
                {index > 0 ? <span aria-hidden>/</span> : null}
                {crumb.href ? (
                  <Link href={crumb.href} className="inline-block py-1 hover:text-ink hover:underline">
                    {crumb.label}
                  </Link>
                ) : (
                  <span aria-current="page" className="truncate font-medium text-ink">
                    {crumb.label}
                  </span>
                )}
              </li>
            ))}
          </ol>
        </nav>
        <div className="flex flex-wrap items-center gap-2.5">
          {children}
          <ThemeSwitch />
        </div>
      </div>
    </header>
  )
}
