'use client'

import Link from 'next/link'
import { FormProblem } from '@/components/forms/form-problem'
import { useZodForm } from '@/components/forms/use-zod-form'
import { Button } from '@/components/ui/button'
import { TextField } from '@/components/ui/field'
import { signInSchema } from '@/lib/auth/schemas'
import type { Send } from './send'

export function SignInForm({ signIn, next }: { signIn: Send; next?: string | undefined }) {
  const { register, submit, errorOf, problem, pending } = useZodForm(signInSchema, { email: '', password: '' })
  return (
    <form
      noValidate
      method="post"
      onSubmit={submit((values) => signIn({ ...values, ...(next !== undefined && { next }) }))}
      className="flex flex-col gap-4"
    >
      <FormProblem problem={problem} />
      <TextField
        label="E-mail address"
        type="email"
        autoComplete="username"
        error={errorOf('email')}
        {...register('email')}
      />
      <TextField
        label="Password"
        type="password"
        autoComplete="current-password"
        error={errorOf('password')}
        {...register('password')}
      />
      <div className="flex flex-wrap items-center justify-between gap-3">
        <Button type="submit" kind="primary" disabled={pending}>
          {pending ? 'Signing in…' : 'Sign in'}
        </Button>
        <Link href="/forgot" className="py-1 text-[14px] text-spruce underline underline-offset-2">
          Forgotten the password?
        </Link>
      </div>
    </form>
  )
}
