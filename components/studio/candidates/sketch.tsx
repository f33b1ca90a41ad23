const WIDTH = 112
const HEIGHT = 30
const TOP_DB = 3
const FLOOR_DB = -80

/** A response in the size of a word: magnitude over a logarithmic axis up to half the rate. */
export function Sketch({ levels, label }: { levels: Float32Array; label: string }) {
  const x = (index: number) => ((index / (levels.length - 1)) * WIDTH).toFixed(1)
  const y = (db: number) =>
    (((TOP_DB - Math.max(FLOOR_DB, Math.min(TOP_DB, db))) / (TOP_DB - FLOOR_DB)) * HEIGHT).toFixed(1)
  const path = Array.from(levels, (db, index) => `${index === 0 ? 'M' : 'L'}${x(index)} ${y(db)}`).join('')
  return (
    <svg
      role="img"
      aria-label={`Magnitude of ${label}, from ${TOP_DB} to ${-FLOOR_DB} dB down`}
      width={WIDTH}
      height={HEIGHT}
      viewBox={`0 0 ${WIDTH} ${HEIGHT}`}
      className="block border border-graph bg-sheet"
    >
      <path d={`M0 ${y(0)}H${WIDTH}`} className="stroke-graph-strong" fill="none" />
      <path d={path} className="stroke-ink" fill="none" strokeWidth={1.3} strokeLinejoin="round" />
    </svg>
  )
}
