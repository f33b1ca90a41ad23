import type { Metadata } from 'next'
import { signOut } from '@/app/(account)/actions'
import { ChangePasswordForm } from '@/components/account/change-password-form'
import { SessionList } from '@/components/account/session-list'
import { SignedInPage } from '@/components/projects/signed-in-page'
import { agentWords } from '@/lib/auth/agent-words'
import { listSessions } from '@/lib/auth/sessions'
import { requireSession } from '@/lib/auth/viewer'
import { formatInstant } from '@/lib/format/quantity'
import { changePassword, endOtherSessions, endSession } from './actions'

export const metadata: Metadata = { title: 'Account' }

export default async function AccountSettingsPage() {
  const session = await requireSession('/account')
  const sessions = await listSessions(session.account.id)
  return (
    <SignedInPage
      crumbs={[{ label: 'Projects', href: '/projects' }, { label: 'Account' }]}
      label={session.account.label}
      signOut={signOut}
    >
      <h1 className="text-[26px]">Account</h1>
      <p className="mt-2 text-[14px] text-pencil">
        {session.account.label}, {session.account.email}
      </p>
      <section aria-labelledby="change-password" className="mt-8">
        <h2 id="change-password" className="pb-3 text-[19px]">
          Password
        </h2>
        <ChangePasswordForm changePassword={changePassword} />
      </section>
      <section aria-labelledby="sessions" className="mt-10 max-w-2xl">
        <h2 id="sessions" className="pb-3 text-[19px]">
          Where you are signed in
        </h2>
        <SessionList
          sessions={sessions.map(({ id, createdAt, agent }) => ({
            id,
            since: formatInstant(createdAt.toISOString()),
            agent: agentWords(agent),
            isThis: id === session.id,
          }))}
          endSession={endSession}
          endOtherSessions={endOtherSessions}
        />
      </section>
    </SignedInPage>
  )
}
