'use client'

import Link from 'next/link'
import { useEffect, useRef, useState } from 'react'
import { Header } from '@/components/frame/header'
import { Button, buttonClass } from '@/components/ui/button'

const digestOf = (error: unknown): string | null =>
  typeof error === 'object' && error !== null && 'digest' in error && typeof error.digest === 'string'
    ? error.digest
    : null

/** A page that could not be made. What went wrong is in the server's log under the reference; the browser asks whether the database is there. */
export default function ErrorPage({ error, retry }: { error: unknown; retry: () => void }) {
  const heading = useRef<HTMLHeadingElement>(null)
  const [databaseAway, setDatabaseAway] = useState(false)
  useEffect(() => {
    heading.current?.focus()
    fetch('/api/health', { cache: 'no-store' }).then(
      (response) => setDatabaseAway(response.status === 503),
      () => setDatabaseAway(false),
    )
  }, [error])
  const digest = digestOf(error)
  return (
    <>
      <Header crumbs={[{ label: 'No answer' }]} />
      <main className="mx-auto flex w-full max-w-xl flex-col items-start gap-4 px-4 py-12 sm:px-6">
        <h1 ref={heading} tabIndex={-1} className="text-[26px]">
          {databaseAway ? 'The database can’t be reached just now' : 'This page could not be made'}
        </h1>
        <p>
          {databaseAway
            ? 'What was saved is safe. Try again in a moment; if it stays so, tell whoever runs this server.'
            : 'Something went wrong on our side, and what was saved is safe. Try again; if it happens again, tell whoever runs this server.'}
        </p>
        <div className="flex flex-wrap gap-3">
          <Button kind="primary" onClick={() => retry()}>
            Try again
          </Button>
          <Link href="/" className={buttonClass()}>
            Start page
          </Link>
        </div>
        {digest === null ? null : <p className="numeric text-[13px] text-pencil">Reference {digest}</p>}
      </main>
    </>
  )
}
