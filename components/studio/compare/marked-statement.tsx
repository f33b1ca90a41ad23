import type { DesignSpec } from '@/dsp'
import { markedStatement } from '@/lib/designs/statement-changes'
import { statementText } from '@/lib/designs/statement'

/** A statement with what changed since an earlier one: old words struck through, new words underlined on a wash. */
export function MarkedStatement({ before, after }: { before: DesignSpec | null; after: DesignSpec }) {
  if (before === null) return <>{statementText(after)}</>
  return markedStatement(before, after).map(({ mark, part }, index) => {
    if (mark === 'same' || part.text.trim() === '') return <span key={index}>{mark === 'gone' ? '' : part.text}</span>
    if (mark === 'gone')
      return (
        <del key={index} className="text-pencil decoration-1">
          <span className="sr-only"> was </span>
          {part.text}
          <span className="sr-only">, now </span>{' '}
        </del>
      )
    return (
      <ins key={index} className="border-b border-spruce bg-spruce-wash font-semibold no-underline">
        {part.text}
      </ins>
    )
  })
}
