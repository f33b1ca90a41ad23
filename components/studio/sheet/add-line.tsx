import { DropdownMenu } from 'radix-ui'
import { useRef } from 'react'
import type { RequirementKind } from '@/dsp'
import { buttonClass } from '@/components/ui/button'
import { requirementKindWords } from '@/lib/designs/requirement-words'

const kinds = Object.entries(requirementKindWords) as [RequirementKind, string][]

/** A menu of every kind of line. The focus goes to the new line, not back to the menu's button. */
export function AddLine({
  primary,
  full,
  onOpen,
  onAdd,
}: {
  primary: boolean
  full: boolean
  onOpen(): void
  onAdd(kind: RequirementKind): void
}) {
  const added = useRef(false)
  return (
    <DropdownMenu.Root modal={false} onOpenChange={(open) => open && onOpen()}>
      <DropdownMenu.Trigger
        className={buttonClass(primary ? 'primary' : 'plain', true)}
        disabled={full}
        title={full ? 'A sheet holds forty lines' : undefined}
        data-tool="add"
      >
        Add a line
      </DropdownMenu.Trigger>
      <DropdownMenu.Portal>
        <DropdownMenu.Content
          align="start"
          sideOffset={4}
          collisionPadding={8}
          className="z-20 max-h-(--radix-dropdown-menu-content-available-height) min-w-44 overflow-y-auto rounded border border-ink bg-sheet py-1 text-[15px] text-ink"
          onCloseAutoFocus={(event) => {
            if (added.current) event.preventDefault()
            added.current = false
          }}
        >
          {kinds.map(([kind, label]) => (
            <DropdownMenu.Item
              key={kind}
              className="flex min-h-8 cursor-pointer items-center px-3 outline-none data-highlighted:bg-spruce-wash"
              onSelect={() => {
                added.current = true
                onAdd(kind)
              }}
            >
              {label}
            </DropdownMenu.Item>
          ))}
        </DropdownMenu.Content>
      </DropdownMenu.Portal>
    </DropdownMenu.Root>
  )
}
