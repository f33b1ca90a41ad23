'use client'

import { useEffect, useState } from 'react'
import { Button } from '@/components/ui/button'

type Outcome = 'copied' | 'refused' | null

const words = { copied: 'Copied', refused: 'The browser refused; select and copy the table' } as const

/** Puts plain text on the clipboard and says whether that worked. */
export function CopyButton({ text, children }: { text(): string; children: string }) {
  const [outcome, setOutcome] = useState<Outcome>(null)
  useEffect(() => {
    if (outcome === null) return
    const timer = setTimeout(() => setOutcome(null), 4000)
    return () => clearTimeout(timer)
  }, [outcome])

  async function copy() {
    try {
      await navigator.clipboard.writeText(text())
      setOutcome('copied')
    } catch {
      // Only the browser's own refusal ends here, and the words beside the button say what to do instead.
      setOutcome('refused')
    }
  }

  return (
    <span className="inline-flex items-center gap-2">
      <Button small onClick={() => void copy()}>
        {children}
      </Button>
      <span role="status" className="text-[13px] text-pencil">
        {outcome === null ? '' : words[outcome]}
      </span>
    </span>
  )
}
