import type { ReactNode } from 'react'
import { Button } from '@/components/ui/button'
import { TextField } from '@/components/ui/field'

/** What the three ways of giving an original share: the form, the name, and the button that takes it. */
export function GivenFrame({
  name,
  onName,
  takeWords,
  onTake,
  readOnly,
  beside,
  children,
}: {
  name: string
  onName(name: string): void
  takeWords: string
  onTake(): void
  readOnly: boolean
  /** A further button. */
  beside?: ReactNode
  children: ReactNode
}) {
  return (
    <form
      className="flex flex-col gap-4"
      onSubmit={(event) => {
        event.preventDefault()
        onTake()
      }}
    >
      {children}
      <TextField
        label="Name"
        hint="As the statement and the files call it."
        value={name}
        maxLength={80}
        required
        readOnly={readOnly}
        onChange={(event) => onName(event.currentTarget.value)}
      />
      {readOnly ? null : (
        <div className="flex flex-wrap gap-3">
          <Button kind="primary" type="submit">
            {takeWords}
          </Button>
          {beside}
        </div>
      )}
    </form>
  )
}
