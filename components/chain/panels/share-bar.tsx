import { classNames } from '@/lib/format/class-names'

export interface Share {
  readonly id: string
  readonly name: string
  /** 0 or more, in one unit for all. */
  readonly amount: number
  readonly text: string
}

/** What a total is made of: one ruled bar to scale, and the same in words under it. Parts are told by their letter, not by colour. */
export function ShareBar({ label, shares }: { label: string; shares: readonly Share[] }) {
  const total = shares.reduce((sum, { amount }) => sum + amount, 0)
  if (!(total > 0)) return null
  const parts = shares.map((share, index) => ({
    ...share,
    letter: String.fromCharCode(65 + index),
    percent: (share.amount / total) * 100,
  }))
  return (
    <figure aria-label={label} className="flex min-w-0 flex-col gap-1">
      <div aria-hidden className="flex h-7 border border-ink">
        {parts.map(({ id, letter, percent }, index) =>
          percent > 0 ? (
            <div
              key={id}
              className={classNames(
                'numeric overflow-hidden text-center text-[11px] leading-[26px]',
                index > 0 && 'border-l border-ink',
                index % 2 === 0 ? 'bg-spruce-wash' : 'bg-sheet',
              )}
              style={{ width: `${percent}%` }}
            >
              {percent > 2.5 ? letter : ''}
            </div>
          ) : null,
        )}
      </div>
      <ol className="grid grid-cols-1 gap-x-6 text-[13px] sm:grid-cols-2 xl:grid-cols-3">
        {parts.map(({ id, letter, name, text, percent }) => (
          <li key={id} className="flex justify-between gap-3 border-b border-graph py-0.5">
            <span className="min-w-0">
              <span className="numeric text-pencil">{letter}</span> {name}
            </span>
            <span className="numeric whitespace-nowrap">
              {text} · {percent.toFixed(0)}
              {'\u2009'}%
            </span>
          </li>
        ))}
      </ol>
    </figure>
  )
}
