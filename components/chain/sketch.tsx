import { chainResponse, stageMagnitudeDb, type ComputedChain } from '@/dsp'

const WIDTH = 72
const HEIGHT = 30
const TOP_DB = 6
const FLOOR_DB = -90
const POINTS = 73

/** Levels of one stage, small: what is analog over a logarithmic axis up to the converter's rate, what is digital up to half its own. */
export function stageLevels(chain: ComputedChain, index: number): Float64Array {
  const stage = chain.stages[index]
  const { kept } = chain.spec
  if (stage?.stage.kind === 'converter') return stageMagnitudeDb(chain, index, even(2 * chain.converterRateHz))
  if (stage?.inRateHz) return stageMagnitudeDb(chain, index, even(stage.inRateHz / 2))
  const fromHz = Math.min(kept.fromHz > 0 ? kept.fromHz : kept.toHz / 100, kept.toHz / 10)
  return stageMagnitudeDb(chain, index, logarithmic(fromHz, chain.converterRateHz))
}

/** From the sensor to the stored sample, up to half the output rate. */
export const storedLevels = (chain: ComputedChain): Float64Array =>
  chainResponse(chain, even(chain.outputRateHz / 2)).magnitudeDb

/** Above 0 Hz, which a high-pass makes −∞ and an integration more. */
const even = (toHz: number) => Float64Array.from({ length: POINTS }, (_, k) => (toHz * (k + 0.5)) / POINTS)
const logarithmic = (fromHz: number, toHz: number) =>
  Float64Array.from({ length: POINTS }, (_, k) => fromHz * (toHz / fromHz) ** (k / (POINTS - 1)))

/** A response in the size of a word; its figures stand beside it, so that it is decoration to who can't see it. */
export function StageSketch({ levels, tone }: { levels: Float64Array; tone: 'analog' | 'digital' | 'stored' }) {
  const ink = { analog: 'stroke-ink', digital: 'stroke-spruce', stored: 'stroke-moss' }[tone]
  const x = (index: number) => ((index / (levels.length - 1)) * WIDTH).toFixed(1)
  const y = (db: number) => {
    const level = Number.isNaN(db) ? FLOOR_DB : Math.max(FLOOR_DB, Math.min(TOP_DB, db))
    return (1 + ((TOP_DB - level) / (TOP_DB - FLOOR_DB)) * (HEIGHT - 2)).toFixed(1)
  }
  const path = Array.from(levels, (db, index) => `${index === 0 ? 'M' : 'L'}${x(index)} ${y(db)}`).join('')
  return (
    <svg
      aria-hidden
      width={WIDTH}
      height={HEIGHT}
      viewBox={`0 0 ${WIDTH} ${HEIGHT}`}
      preserveAspectRatio="none"
      className="block min-w-0 shrink"
    >
      <path d={`M0 ${HEIGHT - 0.5}H${WIDTH}`} className="stroke-graph-strong" fill="none" />
      <path
        d={path}
        className={ink}
        fill="none"
        strokeWidth={1.3}
        strokeLinejoin="round"
        vectorEffect="non-scaling-stroke"
      />
    </svg>
  )
}
