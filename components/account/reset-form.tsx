'use client'

import Link from 'next/link'
import { useEffect, useState } from 'react'
import { FormProblem } from '@/components/forms/form-problem'
import { useZodForm } from '@/components/forms/use-zod-form'
import { Button, buttonClass } from '@/components/ui/button'
import { Notice } from '@/components/ui/notice'
import { resetSchema } from '@/lib/auth/schemas'
import { NewPasswordField } from './new-password-field'
import type { Send } from './send'

/**
 * The link's token stands behind # and never reaches the server by itself. It is read once and taken out of the address bar, so that it
 * stays out of the browser's history and of screens that are shared.
 */
export function ResetForm({ resetPassword }: { resetPassword: Send }) {
  const { register, submit, errorOf, problem, pending, setValue } = useZodForm(resetSchema, { token: '', password: '' })
  const [link, setLink] = useState<'unread' | 'missing' | 'there'>('unread')
  useEffect(() => {
    function read() {
      const token = location.hash.slice(1)
      if (token === '') {
        setLink((known) => (known === 'there' ? known : 'missing'))
        return
      }
      history.replaceState(history.state, '', location.pathname)
      setValue('token', token)
      setLink('there')
    }
    read()
    // A second link opened in the same tab changes the address without loading the page.
    addEventListener('hashchange', read)
    return () => removeEventListener('hashchange', read)
  }, [setValue])

  const badToken = errorOf('token')
  if (link === 'missing' || badToken !== undefined)
    return (
      <div className="flex flex-col items-start gap-4">
        <Notice kind="caution">
          {badToken ?? 'This page is opened by the link in the mail; there is none in the address.'}
        </Notice>
        <Link href="/forgot" className={buttonClass('primary')}>
          Ask for a new link
        </Link>
      </div>
    )
  return (
    <form noValidate method="post" onSubmit={submit(resetPassword)} className="flex flex-col gap-4">
      <FormProblem problem={problem} />
      <NewPasswordField label="New password" error={errorOf('password')} {...register('password')} />
      <div>
        <Button type="submit" kind="primary" disabled={pending || link === 'unread'}>
          {pending ? 'Setting it…' : 'Set new password'}
        </Button>
      </div>
      <p className="text-[13px] text-pencil">
        Every session of the account ends; sign in with the new password afterwards.
      </p>
    </form>
  )
}
