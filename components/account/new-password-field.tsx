'use client'

import { useState, type InputHTMLAttributes, type Ref } from 'react'
import { TextField } from '@/components/ui/field'
import { PASSWORD_MIN_LENGTH } from '@/lib/auth/schemas'

/** A password to be chosen: may be pasted, may be looked at. */
export function NewPasswordField({
  label,
  error,
  ...input
}: { label: string; error?: string | undefined } & InputHTMLAttributes<HTMLInputElement> & {
    ref?: Ref<HTMLInputElement>
  }) {
  const [visible, setVisible] = useState(false)
  return (
    <div className="flex flex-col gap-1.5">
      <TextField
        label={label}
        type={visible ? 'text' : 'password'}
        autoComplete="new-password"
        hint={`At least ${PASSWORD_MIN_LENGTH} characters of any kind; a few unrelated words are best.`}
        error={error}
        {...input}
      />
      <label className="flex min-h-6 items-center gap-2 text-[13px] text-pencil">
        <input
          type="checkbox"
          checked={visible}
          onChange={(event) => setVisible(event.currentTarget.checked)}
          className="size-4 accent-spruce"
        />
        Show it
      </label>
    </div>
  )
}
