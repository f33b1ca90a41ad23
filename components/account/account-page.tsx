import type { ReactNode } from 'react'
import { Header } from '@/components/frame/header'

/** The narrow sheet that the account forms stand on. */
export function AccountPage({ title, children }: { title: string; children: ReactNode }) {
  return (
    <>
      <Header crumbs={[{ label: title }]} />
      <main className="mx-auto w-full max-w-md px-4 py-10 sm:px-6">
        <h1 className="text-[26px]">{title}</h1>
        <div className="mt-6 flex flex-col gap-6">{children}</div>
      </main>
    </>
  )
}
