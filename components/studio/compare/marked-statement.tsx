import { isFamilyDesign, isFirDesign, type DesignSpec } from '@/dsp'
import { markedStatement, type MarkedPart } from '@/lib/designs/statement-changes'
import { statementParts, statementText } from '@/lib/designs/statement'

/**
 * A statement with what changed since an earlier one: old words struck through, new words underlined on a wash. Only words that carry the
 * design are marked; what joins them is that of the later statement.
 */
export function MarkedStatement({ before, after }: { before: DesignSpec | null; after: DesignSpec }) {
  if (before === null) return <>{statementText(after)}</>
  if (kindOf(before) !== kindOf(after)) return <OfAnotherKind before={before} after={after} />
  const shown = markedStatement(before, after)
    .filter(({ mark, part }) => mark !== 'gone' || (part.kind !== 'text' && !isJoint(part.text, after)))
    .map(({ mark, part }) => ({ part, mark: mark === 'new' && isJoint(part.text, before) ? ('same' as const) : mark }))
  return shown.map((marked, index) => <Piece key={index} {...marked} next={shown[index + 1]?.part.text ?? ''} />)
}

export const kindOf = (spec: DesignSpec): 'family' | 'fir' | 'own' =>
  isFamilyDesign(spec) ? 'family' : isFirDesign(spec) ? 'fir' : 'own'

/**
 * Two sentences of different build don't lie over each other: old words struck out between the new ones would read as neither. The later
 * statement stands alone, with the words marked that the earlier one doesn't have.
 */
function OfAnotherKind({ before, after }: { before: DesignSpec; after: DesignSpec }) {
  const said = new Set(statementParts(before).flatMap((part) => (part.kind === 'text' ? [] : [part.text])))
  return statementParts(after).map((part, index) => (
    <Piece key={index} part={part} mark={part.kind === 'text' || said.has(part.text) ? 'same' : 'new'} next="" />
  ))
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
