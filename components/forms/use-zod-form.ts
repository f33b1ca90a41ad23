'use client'

import { zodResolver } from '@hookform/resolvers/zod'
import { useState } from 'react'
import { useForm, type DefaultValues, type FieldValues, type Path } from 'react-hook-form'
import * as z from 'zod'
import type { Problem } from '@/lib/designs/types'

// The content policy allows no code made from strings; zod would otherwise try.
z.config({ jitless: true })

type Answer = { readonly ok: true } | { readonly ok: false; readonly problem: Problem }

/**
 * A form whose fields are checked by the schema that the server checks as well. A refusal by the server goes to the field it names, or
 * stands above the form; the first field in error gets the focus either way.
 */
export function useZodForm<In extends FieldValues, Out>(schema: z.ZodType<Out, In>, defaultValues: DefaultValues<In>) {
  const form = useForm<In, unknown, Out>({
    resolver: zodResolver(schema),
    defaultValues,
    mode: 'onSubmit',
    reValidateMode: 'onChange',
  })
  const [problem, setProblem] = useState<Problem | null>(null)

  /** Sends what the form holds; `send` is a server action. An action that redirects answers with nothing. */
  const submit = (send: (values: Out) => Promise<Answer | undefined>, onDone?: () => void) =>
    form.handleSubmit(async (values) => {
      setProblem(null)
      const answer = await answerOf(() => send(values))
      if (!answer) return
      if (answer.ok) return onDone?.()
      const field = fieldOf(answer.problem)
      if (field) form.setError(field, { type: 'server', message: answer.problem.message }, { shouldFocus: true })
      else setProblem(answer.problem)
    })

  function fieldOf({ field }: Problem): Path<In> | undefined {
    return Object.keys(defaultValues ?? {}).find((name): name is Path<In> => name === field)
  }

  const errorOf = (name: Path<In>): string | undefined => {
    const message: unknown = form.getFieldState(name, form.formState).error?.message
    return typeof message === 'string' ? message : undefined
  }

  return { ...form, submit, problem, errorOf, pending: form.formState.isSubmitting }
}

async function answerOf(send: () => Promise<Answer | undefined>): Promise<Answer | undefined> {
  try {
    return await send()
  } catch (thrown) {
    // Next signals a redirect by throwing; it carries a digest and must go on to the router.
    if (
      typeof thrown === 'object' &&
      thrown !== null &&
      'digest' in thrown &&
      String(thrown.digest).startsWith('NEXT_')
    )
      throw thrown
    return {
      ok: false,
      problem: {
        code: 'unreachable',
        message: 'The server didn’t answer. What you typed is still here; try again in a moment.',
      },
    }
  }
}
