/** The product's mark: a unit circle with its axes, two poles and a zero. */
export function Mark({ size = 26 }: { size?: number }) {
  return (
    <svg width={size} height={size} viewBox="0 0 32 32" fill="none" aria-hidden="true">
      <circle cx="17" cy="16" r="12" className="stroke-ink" strokeWidth="1.4" />
      <path d="M17 3v26M3 16h27" className="stroke-graph-strong" strokeWidth="1" />
      <path d="m18 7 5 5m0-5-5 5m0 8 5 5m0-5-5 5" className="stroke-spruce" strokeWidth="2" />
      <circle cx="5" cy="16" r="2.6" className="fill-paper stroke-vermilion" strokeWidth="1.8" />
    </svg>
  )
}
