'use client'

import { useRouter } from 'next/navigation'
import { useState, useTransition } from 'react'
import { Button } from '@/components/ui/button'
import { FormProblem } from '@/components/forms/form-problem'
import type { Problem } from '@/lib/designs/types'
import type { Send } from './send'

export interface SessionLine {
  readonly id: string
  readonly since: string
  readonly agent: string
  readonly isThis: boolean
}

/** Where the account is signed in; each other session can be ended. */
export function SessionList({
  sessions,
  endSession,
  endOtherSessions,
}: {
  sessions: readonly SessionLine[]
  endSession: Send
  endOtherSessions: Send
}) {
  const router = useRouter()
  const [pending, startTransition] = useTransition()
  const [problem, setProblem] = useState<Problem | null>(null)

  const send = (action: Send, input: unknown) =>
    startTransition(async () => {
      const unreachable = {
        ok: false as const,
        problem: { code: 'unreachable', message: 'The server didn’t answer; try again.' },
      }
      const answer = await action(input).catch(() => unreachable)
      setProblem(answer.ok ? null : answer.problem)
      router.refresh()
    })

  return (
    <div className="flex flex-col gap-3">
      <FormProblem problem={problem} />
      <ul className="border-t border-graph-strong">
        {sessions.map((session) => (
          <li
            key={session.id}
            className="flex flex-wrap items-center justify-between gap-x-4 gap-y-1 border-b border-graph py-2 text-[14px]"
          >
            <div className="min-w-0">
              <p className="truncate">{session.agent}</p>
              <p className="numeric text-[13px] text-pencil">since {session.since}</p>
            </div>
            {session.isThis ? (
              <span className="text-[13px] text-pencil">this one</span>
            ) : (
              <Button small disabled={pending} onClick={() => send(endSession, { session: session.id })}>
                End
              </Button>
            )}
          </li>
        ))}
      </ul>
      {sessions.length > 1 ? (
        <div>
          <Button disabled={pending} onClick={() => send(endOtherSessions, {})}>
            End all others
          </Button>
        </div>
      ) : null}
    </div>
  )
}
