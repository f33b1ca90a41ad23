import type { DesignSpec } from '@/dsp'
import { markedStatement, type MarkedPart } from '@/lib/designs/statement-changes'
import { statementText } from '@/lib/designs/statement'

/** A statement with what changed since an earlier one: old words struck through, new words underlined on a wash. */
export function MarkedStatement({ before, after }: { before: DesignSpec | null; after: DesignSpec }) {
  if (before === null) return <>{statementText(after)}</>
  return markedStatement(before, after).map((marked, index) => <Piece key={index} {...marked} />)
}

function Piece({ mark, part }: MarkedPart) {
  // What only joins words isn't worth a mark: the later statement's own joints are kept, the earlier one's left out.
  if (mark === 'same' || !/[\p{L}\d]/u.test(part.text)) return mark === 'gone' ? null : part.text
  if (mark === 'gone')
    return (
      <>
        <del className="text-pencil decoration-1">
          <span className="sr-only">was </span>
          {part.text.trim()}
          <span className="sr-only">, now</span>
        </del>{' '}
      </>
    )
  return <ins className="border-b border-spruce bg-spruce-wash font-semibold no-underline">{part.text}</ins>
}
