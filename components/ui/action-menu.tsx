'use client'

import { DropdownMenu } from 'radix-ui'
import { useRef, type ReactNode } from 'react'

interface MenuAction {
  readonly id: string
  readonly label: string
  readonly isOut?: boolean
  run(): void
}

/** A button that opens a list of things to do. */
export function ActionMenu({
  children,
  actions,
  align = 'start',
  className,
  label,
  title,
  tool,
  disabled = false,
  focusMovesOn = false,
  onOpen,
}: {
  /** What stands on the button. */
  children: ReactNode
  actions: readonly MenuAction[]
  align?: 'start' | 'end'
  /** Of the button. */
  className: string
  /** Says what the button is where its words don't. */
  label?: string
  title?: string | undefined
  /** Name by which the focus finds the button again. */
  tool?: string
  disabled?: boolean
  /** What is done takes the focus with it, e.g. to a new line: it doesn't come back to the button then. */
  focusMovesOn?: boolean
  onOpen?(): void
}) {
  const acted = useRef(false)
  return (
    <DropdownMenu.Root modal={false} onOpenChange={(open) => open && onOpen?.()}>
      <DropdownMenu.Trigger className={className} disabled={disabled} aria-label={label} title={title} data-tool={tool}>
        {children}
      </DropdownMenu.Trigger>
      <DropdownMenu.Portal>
        <DropdownMenu.Content
          align={align}
          sideOffset={4}
          collisionPadding={8}
          className="z-20 max-h-(--radix-dropdown-menu-content-available-height) min-w-40 overflow-y-auto rounded border border-ink bg-sheet py-1 text-[15px] text-ink"
          onCloseAutoFocus={(event) => {
            if (acted.current && focusMovesOn) event.preventDefault()
            acted.current = false
          }}
        >
          {actions.map(({ id, label: words, isOut = false, run }) => (
            <DropdownMenu.Item
              key={id}
              className="flex min-h-8 cursor-pointer items-center px-3 outline-none data-disabled:cursor-default data-disabled:text-pencil data-highlighted:bg-spruce-wash"
              disabled={isOut}
              onSelect={() => {
                acted.current = true
                run()
              }}
            >
              {words}
            </DropdownMenu.Item>
          ))}
        </DropdownMenu.Content>
      </DropdownMenu.Portal>
    </DropdownMenu.Root>
  )
}
