import Link from 'next/link'
import { redirect } from 'next/navigation'
import { Header } from '@/components/frame/header'
import { buttonClass } from '@/components/ui/button'
import { currentSession } from '@/lib/auth/viewer'

export default async function HomePage() {
  if (await currentSession()) redirect('/projects')
  return (
    <>
      <Header crumbs={[]}>
        <Link href="/sign-in" className={buttonClass()}>
          Sign in
        </Link>
      </Header>
      <main className="mx-auto flex w-full max-w-3xl flex-col gap-6 px-4 py-16 sm:px-6">
        <h1 className="text-[30px] sm:text-[38px]">The filters between the sensor and the number in the report</h1>
        <p className="max-w-[60ch] text-[17px]">
          State a filter in one sentence. See its analog original beside its digital versions as the sampling rate
          changes, and how far they part, in decibels, degrees and microseconds. Try it on a recording, save the
          version, hand its coefficients to firmware.
        </p>
        <div className="flex flex-wrap gap-3">
          <Link href="/sign-up" className={buttonClass('primary')}>
            Create account
          </Link>
          <Link href="/sign-in" className={buttonClass()}>
            Sign in
          </Link>
        </div>
        <p className="max-w-[60ch] border-t border-graph-strong pt-4 text-[14px] text-pencil">
          To look around first, sign in with one of the demo accounts that the start command printed: a measurement team
          with a footbridge, a pump hall and an operator’s seat on its desk.
        </p>
      </main>
    </>
  )
}
