'use client'

import { useCallback } from 'react'
import type { Send } from '@/components/account/send'
import { DuplicateButton } from './duplicate-button'

/** As the button of a design. */
export function DuplicateChainButton({
  chainId,
  title,
  duplicateChain,
}: {
  chainId: string
  title: string
  duplicateChain: Send
}) {
  const send = useCallback(() => duplicateChain({ chainId }), [chainId, duplicateChain])
  return <DuplicateButton designId={chainId} title={title} duplicateDesign={send} />
}
