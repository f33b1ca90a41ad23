'use client'

import { useMemo, useRef, useState, useSyncExternalStore } from 'react'
import { lookWithoutPage, onPageLook, pageLook } from '@/components/plot/page-look'
import { useOnPage } from '@/components/ui/use-on-page'
import { Act } from '@/components/studio/stack/choice'
import { offerFile, svgFile } from '@/components/studio/stack/download'
import { StaticLayer } from '@/components/studio/stack/static-layer'
import { useWidth } from '@/components/studio/stack/use-width'
import { foldChart, foldPaths, type ChainSpec, type ComputedChain, type FoldPath } from '@/dsp'
import { classNames } from '@/lib/format/class-names'
import { formatFixed, formatHz } from '@/lib/format/quantity'
import {
  aliasFloors,
  drawnStrips,
  FIRST_STRIPS,
  floorDbOf,
  foldFrame,
  gatheredStrips,
  MORE_STRIPS,
  topDbOf,
} from './layout'
import { foldExport, foldScene, type FoldPlan } from './picture'
import { StripsTable, TraceTable } from './tables'
import { TraceGround, TracePicture } from './trace-ground'
import { beyondWords, boundWords, stripName, traceWords, weakFoldSentence } from './words'

export interface FoldChartProps {
  readonly chain: ComputedChain
  readonly spec: ChainSpec
  /** The output frequency that is traced, in Hz. */
  readonly traceHz: number | null
  onTrace(hz: number | null): void
}

const POINTS = 361

/** Output frequencies over the base band, both ends included. */
export const foldFrequencies = (outputRateHz: number): Float64Array =>
  Float64Array.from({ length: POINTS }, (_, k) => ((outputRateHz / 2) * k) / (POINTS - 1))

const noPaths: readonly FoldPath[] = []

/** The frequency axis folded at each change of rate: what of every strip reaches the stored sample, and which inputs share an output. */
export function FoldChart(props: FoldChartProps) {
  return useOnPage() ? <Chart {...props} /> : <div className="min-h-[28rem]" />
}

function Chart({ chain, spec, traceHz, onTrace }: FoldChartProps) {
  const ref = useRef<HTMLDivElement>(null)
  const width = useWidth(ref)
  const look = useSyncExternalStore(onPageLook, pageLook, () => lookWithoutPage)
  const [most, setMost] = useState(FIRST_STRIPS)
  const kept = useRef<number | null>(null)

  // Nothing here knows of the trace: moving it repaints no strip.
  const chart = useMemo(() => foldChart(chain, foldFrequencies(chain.outputRateHz)), [chain])
  const plan = useMemo((): FoldPlan => ({ chain, chart, floors: aliasFloors(spec) }), [chain, chart, spec])
  const drawn = useMemo(() => drawnStrips(chart, most), [chart, most])
  const frame = useMemo(() => {
    const levels = { topDb: topDbOf(drawn), floorDb: floorDbOf(chart, plan.floors) }
    return foldFrame(width, chain.outputRateHz, drawn, levels)
  }, [width, chain.outputRateHz, drawn, chart, plan.floors])
  const scene = useMemo(() => foldScene(plan, frame), [plan, frame])
  const gathered = useMemo(() => gatheredStrips(chart, drawn), [chart, drawn])

  const hz = traceHz !== null && traceHz <= chain.outputRateHz / 2 ? traceHz : null
  const paths = useMemo(() => (hz === null ? noPaths : foldPaths(chain, hz)), [chain, hz])
  const scale = `${formatFixed(frame.topDb, 0)} to ${formatFixed(frame.floorDb, 0)}\u2009dB in each strip`

  function keep(next: number | null) {
    kept.current = next
    onTrace(next)
  }

  function download() {
    const heading = `Fold chart to ${formatHz(chain.outputRateHz)} stored, kept to ${formatHz(spec.kept.toHz)}`
    const foot = `${weakFoldSentence(chain, chart)} Down from the same level at the sensor, ${scale}.`
    offerFile('fold-chart.svg', svgFile(foldExport(plan, frame, { heading, foot }), look.palette, heading))
  }

  return (
    <section aria-label="Fold chart" className="flex min-w-0 flex-col gap-1">
      <div className="flex flex-wrap items-baseline justify-between gap-x-4">
        <h2 className="font-text text-[13px] font-semibold text-pencil">Fold chart</h2>
        <p className="text-[12px] text-pencil">
          every strip folds onto the one above it; the curve is what reaches the stored sample, down from the same level
          at the sensor, {scale}
        </p>
      </div>
      <div ref={ref} className="min-w-0">
        <div className="relative" style={{ height: frame.height }}>
          <StaticLayer scene={scene} look={look} />
          <TracePicture frame={frame} hz={hz} paths={paths} />
          <TraceGround
            frame={frame}
            chain={chain}
            hz={hz}
            paths={paths}
            onPoint={onTrace}
            onKeep={keep}
            onLeave={() => onTrace(kept.current)}
          />
        </div>
      </div>
      <div className="flex min-h-6 flex-wrap items-baseline justify-between gap-x-4">
        <p className={classNames('min-h-6 text-[12px] leading-6', hz !== null && 'numeric')}>
          {hz === null ? (
            <span className="text-pencil">point at a strip to see what shares its output frequency</span>
          ) : (
            traceWords(hz, paths)
          )}
        </p>
        <Act label="Download the fold chart as SVG" onPress={download}>
          SVG
        </Act>
      </div>
      {gathered || most > FIRST_STRIPS ? (
        <p className="flex flex-wrap items-baseline gap-x-3 text-[13px]">
          {gathered ? (
            <span>
              {gathered.count} more {gathered.count === 1 ? 'strip' : 'strips'}, {formatHz(gathered.fromHz)} to{' '}
              {formatHz(gathered.toHz)}:{' '}
              {gathered.worst?.worst
                ? `${boundWords(gathered.worst.worst.levelDb)} in the kept band (the ${stripName(gathered.worst)})`
                : 'nothing of them is kept'}
              .
            </span>
          ) : null}
          {gathered ? (
            <Act onPress={() => setMost(most + MORE_STRIPS)}>
              {gathered.count > MORE_STRIPS ? `draw ${MORE_STRIPS} more` : 'draw them'}
            </Act>
          ) : null}
          {most > FIRST_STRIPS ? <Act onPress={() => setMost(FIRST_STRIPS)}>draw the first ones only</Act> : null}
        </p>
      ) : null}
      <p className="text-[13px] text-pencil">
        {weakFoldSentence(chain, chart)} {beyondWords(chart)}
      </p>
      <TraceTable chain={chain} hz={hz} paths={paths} />
      <StripsTable chain={chain} chart={chart} />
    </section>
  )
}
