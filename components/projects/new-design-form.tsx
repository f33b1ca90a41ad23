'use client'

import { useRouter } from 'next/navigation'
import { FormProblem } from '@/components/forms/form-problem'
import { useZodForm } from '@/components/forms/use-zod-form'
import { Button } from '@/components/ui/button'
import { TextField } from '@/components/ui/field'
import type { Problem } from '@/lib/designs/types'
import { createDesignSchema } from '@/lib/designs/schemas'

export type CreateDesign = (
  input: unknown,
) => Promise<
  | { readonly ok: true; readonly value: { readonly designId: string } }
  | { readonly ok: false; readonly problem: Problem }
>

/** A title is all it takes; the sheet opens with a low-pass that every word of can be changed. */
export function NewDesignForm({ projectId, createDesign }: { projectId: string; createDesign: CreateDesign }) {
  const router = useRouter()
  const { register, submit, errorOf, problem, pending } = useZodForm(createDesignSchema, { projectId, title: '' })
  return (
    <form
      noValidate
      method="post"
      onSubmit={submit(async (values) => {
        const answer = await createDesign(values)
        if (answer.ok) router.push(`/designs/${answer.value.designId}`)
        return answer
      })}
      className="flex flex-col gap-3 sm:flex-row sm:items-start"
    >
      <FormProblem problem={problem} />
      <div className="grow">
        <TextField
          label="Title of the new design"
          placeholder="Deck accelerometer, logger low-pass"
          autoComplete="off"
          error={errorOf('title')}
          {...register('title')}
        />
      </div>
      <Button type="submit" kind="primary" disabled={pending} className="sm:mt-[26px]">
        {pending ? 'Opening…' : 'Create design'}
      </Button>
    </form>
  )
}
