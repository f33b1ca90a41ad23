import type { Metadata } from 'next'
import Link from 'next/link'
import { connection } from 'next/server'
import { Header } from '@/components/frame/header'
import { buttonClass } from '@/components/ui/button'

export const metadata: Metadata = { title: 'Not found' }

/** The same words for what isn't there and for what isn't the reader's to see. */
export default async function NotFoundPage() {
  await connection()
  return (
    <>
      <Header crumbs={[{ label: 'Not found' }]} />
      <main className="mx-auto flex w-full max-w-xl flex-col items-start gap-4 px-4 py-12 sm:px-6">
        <h1 className="text-[26px]">Nothing here that you may see</h1>
        <p>The address may be mistyped, or what it leads to belongs to a team that you are not a member of.</p>
        <Link href="/projects" className={buttonClass('primary')}>
          Your projects
        </Link>
      </main>
    </>
  )
}
