import { Button } from '@/components/ui/button'
import { Notice } from '@/components/ui/notice'

/** Offers what this browser kept because it never reached the server. */
export function KeptNotice<Spec>({
  kept,
  onBringBack,
  onLetGo,
}: {
  kept: Spec | null
  onBringBack(spec: Spec): void
  onLetGo(): void
}) {
  if (kept === null) return null
  return (
    <Notice kind="note">
      This browser kept a draft that never reached the server.{' '}
      <Button small onClick={() => onBringBack(kept)}>
        Bring it back
      </Button>{' '}
      <Button small onClick={onLetGo}>
        Let it go
      </Button>
    </Notice>
  )
}
