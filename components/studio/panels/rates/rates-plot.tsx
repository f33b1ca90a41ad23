'use client'

import { useMemo, useRef } from 'react'
import { formatHz, formatNumber } from '@/lib/format/quantity'
import { useWidth } from '../../stack/use-width'
import { PlotSheet } from '../chart/plot-sheet'
import { ValueSlider, type SliderEvents } from '../chart/value-slider'
import { levelSpan } from './curves'
import { ratesFrame, ratesScene, unitSign, type RatesFrame, type RatesPlan } from './rates-picture'

/** The curves, the rate the design runs at and the budget; the two lines can be pulled, or stepped with the keys. */
export function RatesPlot({
  plan,
  title,
  spanHz,
  rateHz,
  limit,
  limitText,
  onRate,
  rateIsFixed,
  onLimit,
}: {
  plan: RatesPlan
  title: string
  spanHz: readonly [number, number]
  /** As previewed. */
  rateHz: number
  /** The budget in the plot's unit, as previewed. */
  limit: number
  limitText: string
  onRate: SliderEvents
  /** For readers, who may not change the design. */
  rateIsFixed: boolean
  onLimit: SliderEvents
}) {
  const ref = useRef<HTMLDivElement>(null)
  const width = useWidth(ref)
  // The axis stands still while the limit is pulled a little: its decades follow the nearest power of ten.
  const decade = 10 ** Math.round(Math.log10(limit))
  const levels = useMemo(() => levelSpan(plan.curves, plan.unit, decade), [plan.curves, plan.unit, decade])
  const frame = useMemo(() => ratesFrame(width, spanHz, levels), [width, spanHz, levels])
  const scene = useMemo(() => ratesScene(plan, frame), [plan, frame])
  return (
    <div ref={ref} className="min-w-0">
      <PlotSheet scene={scene}>
        <span
          className="pointer-events-none absolute rounded bg-sheet/80 px-2 text-[12px] leading-5 font-medium"
          style={{ right: 4, top: frame.box.top + 2, maxWidth: width - frame.box.left }}
        >
          {title}
          <span className="max-sm:hidden"> against the sampling rate</span>
        </span>
        <Lines frame={frame} rateHz={rateHz} limit={limit} />
        <LimitHandle frame={frame} limit={limit} text={limitText} sign={unitSign[plan.unit]} events={onLimit} />
        <RateHandle frame={frame} rateHz={rateHz} edgeHz={plan.edgeHz} events={onRate} disabled={rateIsFixed} />
      </PlotSheet>
    </div>
  )
}

const within = (value: number, from: number, to: number) => Math.min(to, Math.max(from, value))

function Lines({
  frame: { box, x, y, width, height },
  rateHz,
  limit,
}: {
  frame: RatesFrame
  rateHz: number
  limit: number
}) {
  const at = within(x.toPixel(rateHz), box.left, box.right)
  const level = y.toPixel(limit)
  return (
    <svg
      aria-hidden
      className="pointer-events-none absolute top-0 left-0"
      width={width}
      height={height}
      fill="none"
      stroke="var(--vermilion)"
    >
      {level >= box.top && level <= box.bottom ? (
        <path d={`M${box.left} ${level}H${box.right}`} strokeWidth={1.5} strokeDasharray="1.5 3.5" />
      ) : null}
      <path d={`M${at} ${box.top - 4}V${box.bottom}`} strokeWidth={1.5} strokeDasharray="5 3.5" />
    </svg>
  )
}

const tag =
  'pointer-events-none rounded border bg-sheet px-1.5 font-mono text-[11px] leading-[18px] whitespace-nowrap text-vermilion border-vermilion'

function RateHandle({
  frame: { box, x, width },
  rateHz,
  edgeHz,
  events,
  disabled,
}: {
  frame: RatesFrame
  rateHz: number
  edgeHz: number
  events: SliderEvents
  disabled: boolean
}) {
  const [min, max] = x.domain
  const text = `fs ${formatHz(rateHz)}`
  const half = text.length * 3.7 + 8
  return (
    <ValueSlider
      scale={x}
      orientation="horizontal"
      min={min}
      max={max}
      value={rateHz}
      valueText={`${formatHz(rateHz)}, ${formatNumber(rateHz / edgeHz, 3)} times the highest edge`}
      label="Sampling rate"
      left={within(x.toPixel(rateHz), Math.max(box.left, half), width - half)}
      top={11}
      round={(hertz) => Number(hertz.toPrecision(3))}
      disabled={disabled}
      {...events}
    >
      <span className={tag}>{text}</span>
    </ValueSlider>
  )
}

function LimitHandle({
  frame: { box, y },
  limit,
  text,
  sign,
  events,
}: {
  frame: RatesFrame
  limit: number
  text: string
  sign: string
  events: SliderEvents
}) {
  const level = y.toPixel(limit)
  if (level < box.top || level > box.bottom) return null
  return (
    <ValueSlider
      scale={y}
      orientation="vertical"
      min={y.domain[0]}
      max={y.domain[1]}
      value={limit}
      valueText={text}
      label="Budget, as a trial"
      left={box.right - 30}
      top={level}
      className="w-14"
      round={(value) => Number(value.toPrecision(2))}
      {...events}
    >
      <span className={tag}>
        {formatNumber(limit, 3)}
        {sign}
      </span>
    </ValueSlider>
  )
}
