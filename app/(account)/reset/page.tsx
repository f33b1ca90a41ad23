import type { Metadata } from 'next'
import { connection } from 'next/server'
import { AccountPage } from '@/components/account/account-page'
import { ResetForm } from '@/components/account/reset-form'
import { resetPassword } from '../actions'

export const metadata: Metadata = { title: 'New password' }

export default async function ResetPage() {
  await connection()
  return (
    <AccountPage title="New password">
      <ResetForm resetPassword={resetPassword} />
    </AccountPage>
  )
}
