'use client'

import { FormProblem } from '@/components/forms/form-problem'
import { useZodForm } from '@/components/forms/use-zod-form'
import { Button } from '@/components/ui/button'
import { TextField } from '@/components/ui/field'
import { signUpSchema } from '@/lib/auth/schemas'
import { NewPasswordField } from './new-password-field'
import type { Send } from './send'

export function SignUpForm({ signUp }: { signUp: Send }) {
  const { register, submit, errorOf, problem, pending } = useZodForm(signUpSchema, {
    email: '',
    label: '',
    password: '',
  })
  return (
    <form noValidate method="post" onSubmit={submit(signUp)} className="flex flex-col gap-4">
      <FormProblem problem={problem} />
      <TextField
        label="E-mail address"
        type="email"
        autoComplete="username"
        error={errorOf('email')}
        {...register('email')}
      />
      <TextField
        label="How others will see you"
        hint="Such as “designer, footbridge team”. Your e-mail address is never shown."
        autoComplete="off"
        error={errorOf('label')}
        {...register('label')}
      />
      <NewPasswordField label="Password" error={errorOf('password')} {...register('password')} />
      <div>
        <Button type="submit" kind="primary" disabled={pending}>
          {pending ? 'Creating…' : 'Create account'}
        </Button>
      </div>
      <p className="text-[13px] text-pencil">A new account gets a team of its own, with you as its owner.</p>
    </form>
  )
}
