import type { Metadata } from 'next'
import { connection } from 'next/server'
import { AccountPage } from '@/components/account/account-page'
import { ForgotForm } from '@/components/account/forgot-form'
import { askReset } from '../actions'

export const metadata: Metadata = { title: 'Forgotten password' }

export default async function ForgotPage() {
  await connection()
  return (
    <AccountPage title="Forgotten password">
      <ForgotForm askReset={askReset} />
    </AccountPage>
  )
}
