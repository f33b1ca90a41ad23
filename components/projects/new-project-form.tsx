'use client'

import { useRouter } from 'next/navigation'
import { FormProblem } from '@/components/forms/form-problem'
import { useZodForm } from '@/components/forms/use-zod-form'
import { Button } from '@/components/ui/button'
import { SelectField, TextField } from '@/components/ui/field'
import type { Problem } from '@/lib/designs/types'
import { createProjectSchema } from '@/lib/designs/schemas'

export type CreateProject = (
  input: unknown,
) => Promise<
  | { readonly ok: true; readonly value: { readonly projectId: string } }
  | { readonly ok: false; readonly problem: Problem }
>

export function NewProjectForm({
  teams,
  createProject,
}: {
  teams: readonly { readonly id: string; readonly name: string }[]
  createProject: CreateProject
}) {
  const router = useRouter()
  const { register, submit, errorOf, problem, pending } = useZodForm(createProjectSchema, {
    teamId: teams[0]?.id ?? '',
    name: '',
    code: '',
  })
  return (
    <form
      noValidate
      method="post"
      onSubmit={submit(async (values) => {
        const answer = await createProject(values)
        if (answer.ok) router.push(`/projects/${answer.value.projectId}`)
        return answer
      })}
      className="flex max-w-md flex-col gap-4"
    >
      <FormProblem problem={problem} />
      {teams.length > 1 ? (
        <SelectField label="Team" error={errorOf('teamId')} {...register('teamId')}>
          {teams.map((team) => (
            <option key={team.id} value={team.id}>
              {team.name}
            </option>
          ))}
        </SelectField>
      ) : (
        <input type="hidden" {...register('teamId')} />
      )}
      <TextField
        label="Name"
        placeholder="Harrow Mill footbridge monitor"
        autoComplete="off"
        error={errorOf('name')}
        {...register('name')}
      />
      <TextField
        label="Code"
        hint="Two to six letters and digits. Drawing numbers begin with it: HMF gives HMF-LP-001."
        placeholder="HMF"
        autoComplete="off"
        autoCapitalize="characters"
        className="numeric uppercase placeholder:normal-case"
        error={errorOf('code')}
        {...register('code')}
      />
      <div>
        <Button type="submit" kind="primary" disabled={pending}>
          {pending ? 'Creating…' : 'Create project'}
        </Button>
      </div>
    </form>
  )
}
