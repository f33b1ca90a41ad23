import Link from 'next/link'
import type { ReactNode } from 'react'
import { AccountLinks } from '@/components/account/account-links'
import type { Send } from '@/components/account/send'
import { Header, type Crumb } from '@/components/frame/header'
import { buttonClass } from '@/components/ui/button'

/** The frame of lists and forms: header with the account, one column. */
export function SignedInPage({
  crumbs,
  label,
  signOut,
  children,
}: {
  crumbs: readonly Crumb[]
  label: string
  signOut: Send
  children: ReactNode
}) {
  return (
    <>
      <Header crumbs={crumbs}>
        <Link href="/team" className={buttonClass('quiet')}>
          Team
        </Link>
        <AccountLinks label={label} signOut={signOut} />
      </Header>
      <main className="mx-auto w-full max-w-5xl px-4 py-8 sm:px-6">{children}</main>
    </>
  )
}
