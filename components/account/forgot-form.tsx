'use client'

import { useState } from 'react'
import { FormProblem } from '@/components/forms/form-problem'
import { useZodForm } from '@/components/forms/use-zod-form'
import { Button } from '@/components/ui/button'
import { TextField } from '@/components/ui/field'
import { Notice } from '@/components/ui/notice'
import { askResetSchema } from '@/lib/auth/schemas'
import type { Send } from './send'

export function ForgotForm({ askReset }: { askReset: Send }) {
  const { register, submit, errorOf, problem, pending, getValues } = useZodForm(askResetSchema, { email: '' })
  const [sentTo, setSentTo] = useState<string | null>(null)
  if (sentTo !== null)
    return (
      <Notice kind="note">
        If {sentTo} has an account, a link is on its way there. It works once, for 30 minutes. Nothing in the mailbox
        after a few minutes? Look among the unwanted mail, or try another address.
      </Notice>
    )
  return (
    <form
      noValidate
      method="post"
      onSubmit={submit(askReset, () => setSentTo(getValues('email')))}
      className="flex flex-col gap-4"
    >
      <FormProblem problem={problem} />
      <p className="text-[14px] text-pencil">We mail you a link with which you set a new one.</p>
      <TextField
        label="E-mail address"
        type="email"
        autoComplete="username"
        error={errorOf('email')}
        {...register('email')}
      />
      <div>
        <Button type="submit" kind="primary" disabled={pending}>
          {pending ? 'Asking…' : 'Mail me a link'}
        </Button>
      </div>
    </form>
  )
}
