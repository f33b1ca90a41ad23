import type { Metadata } from 'next'
import Link from 'next/link'
import { redirect } from 'next/navigation'
import { z } from 'zod'
import { AccountPage } from '@/components/account/account-page'
import { SignInForm } from '@/components/account/sign-in-form'
import { Notice } from '@/components/ui/notice'
import { currentSession } from '@/lib/auth/viewer'
import { signIn } from '../actions'

export const metadata: Metadata = { title: 'Sign in' }

const searchSchema = z.object({
  next: z.string().optional().catch(undefined),
  after: z.literal('reset').optional().catch(undefined),
})

export default async function SignInPage({ searchParams }: { searchParams: Promise<unknown> }) {
  const { next, after } = searchSchema.parse(await searchParams)
  if (await currentSession()) redirect('/projects')
  return (
    <AccountPage title="Sign in">
      {after === 'reset' ? <Notice kind="met">The new password is set. Sign in with it.</Notice> : null}
      <SignInForm signIn={signIn} next={next} />
      <p className="text-[14px] text-pencil">
        New here?{' '}
        <Link href="/sign-up" className="inline-block py-1 text-spruce underline underline-offset-2">
          Create account
        </Link>
      </p>
    </AccountPage>
  )
}
