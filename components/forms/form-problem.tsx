'use client'

import { useEffect, useRef } from 'react'
import type { Problem } from '@/lib/designs/types'

/** A refusal that belongs to no single field; takes the focus, so that readers who can't see it hear it. */
export function FormProblem({ problem }: { problem: Problem | null }) {
  const box = useRef<HTMLDivElement>(null)
  useEffect(() => {
    if (problem) box.current?.focus()
  }, [problem])
  if (!problem) return null
  return (
    <div ref={box} tabIndex={-1} role="alert" className="border-l-2 border-vermilion py-1 pl-3 text-[14px]">
      {problem.message}
    </div>
  )
}
