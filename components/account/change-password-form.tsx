'use client'

import { useState } from 'react'
import { FormProblem } from '@/components/forms/form-problem'
import { useZodForm } from '@/components/forms/use-zod-form'
import { Button } from '@/components/ui/button'
import { TextField } from '@/components/ui/field'
import { Notice } from '@/components/ui/notice'
import { changePasswordSchema } from '@/lib/auth/schemas'
import { NewPasswordField } from './new-password-field'
import type { Send } from './send'

export function ChangePasswordForm({ changePassword }: { changePassword: Send }) {
  const { register, submit, errorOf, problem, pending, reset } = useZodForm(changePasswordSchema, {
    current: '',
    password: '',
  })
  const [changed, setChanged] = useState(false)
  return (
    <form
      noValidate
      method="post"
      onSubmit={submit(changePassword, () => {
        reset()
        setChanged(true)
      })}
      className="flex max-w-md flex-col gap-4"
    >
      <FormProblem problem={problem} />
      {changed ? <Notice kind="met">The password is changed, and every other session was ended.</Notice> : null}
      <TextField
        label="Present password"
        type="password"
        autoComplete="current-password"
        error={errorOf('current')}
        {...register('current')}
      />
      <NewPasswordField label="New password" error={errorOf('password')} {...register('password')} />
      <div>
        <Button type="submit" disabled={pending}>
          {pending ? 'Changing…' : 'Change password'}
        </Button>
      </div>
    </form>
  )
}
