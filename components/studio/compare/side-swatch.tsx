/** A short piece of either trace with its dash and marker. */
export function SideSwatch({ side }: { side: 'left' | 'right' }) {
  const isLeft = side === 'left'
  return (
    <svg
      width="30"
      height="12"
      viewBox="0 0 30 12"
      fill="none"
      aria-hidden
      className={isLeft ? 'stroke-slate' : 'stroke-spruce'}
    >
      <path d="M0 6h30" strokeWidth={isLeft ? 1.6 : 1.9} strokeDasharray={isLeft ? '7 4' : undefined} />
      {isLeft ? (
        <path d="M12 3h6v6h-6z" strokeWidth="1.4" className="fill-sheet" />
      ) : (
        <circle cx="15" cy="6" r="3.2" strokeWidth="1.4" className="fill-sheet" />
      )}
    </svg>
  )
}
