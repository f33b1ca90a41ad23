import type { DesignSpec } from '@/dsp'
import { classNames } from '@/lib/format/class-names'
import { sheetOf } from '@/lib/designs/sheet-edits'
import { useJudgements } from './judge'

/** How the sheet stands, in a few words under the statement. */
export function SheetFigure({ spec }: { spec: DesignSpec }) {
  const judgements = useJudgements(spec)
  const count = sheetOf(spec).length
  if (count === 0 || judgements.size < count) return null
  const missed = [...judgements.values()].filter(({ met }) => !met).length
  return (
    <p className={classNames('text-[14px]', missed === 0 ? 'text-moss' : 'text-vermilion')}>
      <a href="#sheet-heading">
        {missed === 0 ? `All ${count} requirements met` : `${missed} of ${count} requirements missed`}
      </a>
    </p>
  )
}
