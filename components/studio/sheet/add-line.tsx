import { MOST_REQUIREMENTS, type RequirementKind } from '@/dsp'
import { ActionMenu } from '@/components/ui/action-menu'
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
  return (
    <ActionMenu
      className={buttonClass(primary ? 'primary' : 'plain', true)}
      disabled={full}
      title={full ? `A sheet holds ${MOST_REQUIREMENTS} lines` : undefined}
      tool="add"
      focusMovesOn
      onOpen={onOpen}
      actions={kinds.map(([kind, label]) => ({ id: kind, label, run: () => onAdd(kind) }))}
    >
      Add a line
    </ActionMenu>
  )
}
