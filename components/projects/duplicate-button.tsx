'use client'

import { useRouter } from 'next/navigation'
import { useState, useTransition } from 'react'
import type { Send } from '@/components/account/send'
import { Button } from '@/components/ui/button'

/** Makes a copy and stays on the list, where the copy then stands. */
export function DuplicateButton({
  designId,
  title,
  duplicateDesign,
}: {
  designId: string
  title: string
  duplicateDesign: Send
}) {
  const router = useRouter()
  const [pending, startTransition] = useTransition()
  const [problem, setProblem] = useState<string | null>(null)

  const duplicate = () =>
    startTransition(async () => {
      const answer = await duplicateDesign({ designId }).catch(() => null)
      if (answer?.ok) router.refresh()
      setProblem(answer === null ? 'The server didn’t answer; try again.' : answer.ok ? null : answer.problem.message)
    })

  return (
    <>
      <Button small kind="quiet" disabled={pending} aria-label={`Duplicate ${title}`} onClick={duplicate}>
        {pending ? 'Copying…' : 'Duplicate'}
      </Button>
      {problem === null ? null : (
        <span role="alert" className="text-vermilion">
          {problem}
        </span>
      )}
    </>
  )
}
