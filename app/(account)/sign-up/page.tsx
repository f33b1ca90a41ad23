import type { Metadata } from 'next'
import Link from 'next/link'
import { redirect } from 'next/navigation'
import { AccountPage } from '@/components/account/account-page'
import { SignUpForm } from '@/components/account/sign-up-form'
import { currentSession } from '@/lib/auth/viewer'
import { signUp } from '../actions'

export const metadata: Metadata = { title: 'Create account' }

export default async function SignUpPage() {
  if (await currentSession()) redirect('/projects')
  return (
    <AccountPage title="Create account">
      <SignUpForm signUp={signUp} />
      <p className="text-[14px] text-pencil">
        Have one already?{' '}
        <Link href="/sign-in" className="inline-block py-1 text-spruce underline underline-offset-2">
          Sign in
        </Link>
      </p>
    </AccountPage>
  )
}
