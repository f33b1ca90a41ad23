'use client'

import Link from 'next/link'
import { useTransition } from 'react'
import { Button, buttonClass } from '@/components/ui/button'
import type { Send } from './send'

/** In the header of signed-in pages: whose account this is, and the way out. */
export function AccountLinks({ label, signOut }: { label: string; signOut: Send }) {
  const [pending, startTransition] = useTransition()
  return (
    <>
      <Link href="/account" className={buttonClass('quiet')} title="Your account">
        <span className="max-w-56 truncate">{label}</span>
      </Link>
      <Button disabled={pending} onClick={() => startTransition(async () => void (await signOut({})))}>
        Sign out
      </Button>
    </>
  )
}
