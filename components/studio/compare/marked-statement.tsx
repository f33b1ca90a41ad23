import type { DesignSpec } from '@/dsp'
import { markedStatement, type MarkedPart } from '@/lib/designs/statement-changes'
import { statementParts, statementText } from '@/lib/designs/statement'

/**
 * A statement with what changed since an earlier one: old words struck through, new words underlined on a wash. Only words that carry the
 * design are marked; what joins them is that of the later statement.
 */
export function MarkedStatement({ before, after }: { before: DesignSpec | null; after: DesignSpec }) {
  if (before === null) return <>{statementText(after)}</>
  const shown = markedStatement(before, after)
    .filter(({ mark, part }) => mark !== 'gone' || (part.kind !== 'text' && !isJoint(part.text, after)))
    .map(({ mark, part }) => ({ part, mark: mark === 'new' && isJoint(part.text, before) ? ('same' as const) : mark }))
  return shown.map((marked, index) => <Piece key={index} {...marked} next={shown[index + 1]?.part.text ?? ''} />)
}

/** What is a choice in one family's statement ("down 3 dB at") may be a mere joint in another's: the same words are no change. */
const isJoint = (words: string, spec: DesignSpec) =>
  statementParts(spec).some((part) => part.kind === 'text' && part.text.includes(words))

function Piece({ mark, part, next }: MarkedPart & { next: string }) {
  if (mark === 'same' || part.kind === 'text') return part.text
  if (mark === 'new')
    return <ins className="border-b border-spruce bg-spruce-wash font-semibold no-underline">{part.text}</ins>
  return (
    <>
      {' '}
      <del className="text-pencil decoration-1">
        <span className="sr-only">was </span>
        {part.text}
        <span className="sr-only">, now</span>
      </del>
      {/^[,.]/.test(next) ? '' : ' '}
    </>
  )
}
