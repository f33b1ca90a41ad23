import { markerOutline } from '@/components/plot/trace-style'
import { sideStyle } from './side-styles'

/** A short piece of a side's trace with its dash and marker. */
export function SideSwatch({ place }: { place: number }) {
  const { stroke, marker } = sideStyle(place)
  const look = { fill: 'var(--sheet)', strokeWidth: 1.4 }
  return (
    <svg
      width="34"
      height="12"
      viewBox="0 0 34 12"
      fill="none"
      stroke={`var(--${stroke.ink})`}
      aria-hidden
      className="shrink-0"
    >
      <path d="M0 6h34" strokeWidth={stroke.widthPixels} strokeDasharray={stroke.dash.join(' ') || undefined} />
      <g transform="translate(17 6)">
        {marker === 'circle' ? (
          <circle r="3.4" {...look} />
        ) : (
          <polygon
            points={markerOutline(marker, 3.4)
              .map((point) => point.join(','))
              .join(' ')}
            {...look}
          />
        )}
      </g>
    </svg>
  )
}
