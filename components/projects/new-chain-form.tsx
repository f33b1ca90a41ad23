'use client'

import { useRouter } from 'next/navigation'
import { FormProblem } from '@/components/forms/form-problem'
import { useZodForm } from '@/components/forms/use-zod-form'
import { Button } from '@/components/ui/button'
import { SelectField, TextField } from '@/components/ui/field'
import { chainTemplateSchema, createChainSchema } from '@/lib/chains/schemas'
import { templateWords } from '@/lib/chains/templates'
import type { Problem } from '@/lib/designs/types'

export type CreateChain = (
  input: unknown,
) => Promise<
  | { readonly ok: true; readonly value: { readonly chainId: string } }
  | { readonly ok: false; readonly problem: Problem }
>

/** A title and what to begin with; every stage can be changed afterwards. */
export function NewChainForm({ projectId, createChain }: { projectId: string; createChain: CreateChain }) {
  const router = useRouter()
  const { register, submit, errorOf, problem, pending } = useZodForm(createChainSchema, {
    projectId,
    title: '',
    template: 'plain',
  })
  return (
    <form
      noValidate
      method="post"
      onSubmit={submit(async (values) => {
        const answer = await createChain(values)
        if (answer.ok) router.push(`/chains/${answer.value.chainId}`)
        return answer
      })}
      className="flex flex-col gap-3 sm:flex-row sm:items-start"
    >
      <FormProblem problem={problem} />
      <div className="grow">
        <TextField
          label="Title of the new chain"
          placeholder="Deck logger"
          autoComplete="off"
          error={errorOf('title')}
          {...register('title')}
        />
      </div>
      <SelectField label="Begin with" error={errorOf('template')} {...register('template')}>
        {chainTemplateSchema.options.map((template) => (
          <option key={template} value={template}>
            {templateWords[template]}
          </option>
        ))}
      </SelectField>
      <Button type="submit" kind="primary" disabled={pending} className="sm:mt-[26px]">
        {pending ? 'Opening…' : 'New chain'}
      </Button>
    </form>
  )
}
