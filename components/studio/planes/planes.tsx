'use client'

import { useState, type ReactNode } from 'react'
import { written } from '@/components/plot/scene'
import { roundedUp } from '@/components/plot/ticks'
import type { Complex, Filter } from '@/dsp'
import { versionLabels, type VersionId } from '@/lib/designs/words'
import { formatNumber } from '@/lib/format/quantity'
import { Choice } from '../stack/choice'
import { describeAnalog, describeDigital } from './describe'
import { PLANE_SIZE, sPlaneFrame, unitCircle, zPlaneFrame, type SPlaneFrame, type ZPlaneSpan } from './plane-frames'
import { RootMarks } from './plane-marks'
import { ellipseThrough } from './root-groups'
import { RootTable } from './root-table'

export interface PlanesProps {
  /** Null where the original is not known by its roots. */
  readonly analog: Filter<'s'> | null
  readonly versions: readonly VersionRoots[]
}

export interface VersionRoots {
  readonly id: VersionId
  readonly zeros: readonly Complex[]
  readonly poles: readonly Complex[]
}

/** The s-plane of the prototype beside the z-plane of its digital versions; both follow every drag. */
export function Planes({ analog, versions }: PlanesProps) {
  const [span, setSpan] = useState<ZPlaneSpan>('circle')
  const frame = analog && sPlaneFrame(analog)
  return (
    <section aria-label="Poles and zeros" className="min-w-0">
      <div className="flex flex-wrap items-center justify-between gap-x-3">
        <h2 className="font-text text-[12px] font-semibold tracking-wide text-pencil">
          {frame ? (
            <>s-plane ({frame.exponent === 0 ? null : <>×10{superscript(frame.exponent)} </>}rad/s) and </>
          ) : null}
          z-plane
        </h2>
        <Choice
          label="Part of the z-plane shown"
          options={[
            { value: 'circle', word: 'circle', name: 'The whole unit circle' },
            { value: 'poles', word: 'poles', name: 'Only where the poles are' },
          ]}
          value={span}
          onChange={(next) => setSpan(next)}
        />
      </div>
      <div className="mt-1 grid grid-cols-[repeat(2,minmax(0,16rem))] gap-4">
        {analog && frame ? <SPlane analog={analog} frame={frame} /> : null}
        <ZPlane versions={versions} span={span} />
      </div>
      <RootTable
        groups={[
          ...(analog ? [{ label: 'analog, rad/s', ...analog }] : []),
          ...versions.map(({ id, zeros, poles }) => ({ label: versionLabels[id], zeros, poles })),
        ]}
      />
    </section>
  )
}

const superscript = (exponent: number) => <sup className="leading-none">{formatNumber(exponent)}</sup>

function SPlane({ analog, frame }: { analog: Filter<'s'>; frame: SPlaneFrame }) {
  const axisX = frame.x(0)
  const ellipse = ellipseThrough(analog.poles)
  const mark = roundedUp(frame.reach * 0.55)
  const markText = formatNumber(mark / 10 ** frame.exponent, 3)
  return (
    <Plane label={describeAnalog(analog)}>
      <path d={`M${axisX} 0V${PLANE_SIZE}M0 ${PLANE_SIZE / 2}H${PLANE_SIZE}`} className="stroke-graph-strong" />
      {ellipse ? (
        <path
          d={`M${axisX} ${frame.y(ellipse.omega)}A${written(ellipse.sigma / frame.perPixel)} ${written(ellipse.omega / frame.perPixel)} 0 0 0 ${axisX} ${frame.y(-ellipse.omega)}`}
          fill="none"
          className="stroke-graph-strong"
          strokeDasharray="3 3"
        />
      ) : null}
      {[mark, -mark].map((im) => (
        <g key={im}>
          <path d={`M${axisX - 3} ${frame.y(im)}h6`} className="stroke-pencil" />
          <Word x={PLANE_SIZE - 4} y={frame.y(im) + 3.5} anchor="end">
            {im < 0 ? `−${markText}` : markText}
          </Word>
        </g>
      ))}
      <Word x={axisX + 6} y={14}>
        jω
      </Word>
      <Word x={8} y={PLANE_SIZE - 8}>
        σ
      </Word>
      <RootMarks id="analog" poles={analog.poles} zeros={analog.zeros} frame={frame} radius={5} />
    </Plane>
  )
}

/** The largest first, so that marks on one place nest. */
const radii = [6, 4.6, 3.4, 2.4]

function ZPlane({ versions, span }: { versions: PlanesProps['versions']; span: ZPlaneSpan }) {
  const frame = zPlaneFrame(
    versions.flatMap(({ poles }) => poles),
    span,
  )
  const described = versions.map(({ id, poles, zeros }) => ({ label: versionLabels[id], poles, zeros }))
  return (
    <Plane label={describeDigital(described)}>
      <path d={`M${frame.x(0)} 0V${PLANE_SIZE}M0 ${frame.y(0)}H${PLANE_SIZE}`} className="stroke-graph-strong" />
      <path d={unitCircle(frame)} fill="none" className="stroke-ink" strokeWidth={1} opacity={0.85} />
      <Word x={PLANE_SIZE - 6} y={PLANE_SIZE - 8} anchor="end">
        {span === 'circle' ? 'Re z' : `${formatNumber(frame.perPixel * PLANE_SIZE, 2)} wide`}
      </Word>
      {versions.map(({ id, poles, zeros }, index) => (
        <RootMarks
          key={id}
          id={id}
          poles={poles}
          zeros={zeros}
          frame={frame}
          radius={radii[Math.min(index, radii.length - 1)] ?? 3}
        />
      ))}
    </Plane>
  )
}

function Plane({ label, children }: { label: string; children: ReactNode }) {
  return (
    <svg
      role="img"
      aria-label={label}
      viewBox={`0 0 ${PLANE_SIZE} ${PLANE_SIZE}`}
      className="block w-full border border-graph-strong bg-sheet"
      strokeWidth={1}
    >
      {children}
    </svg>
  )
}

function Word({
  x,
  y,
  anchor = 'start',
  children,
}: {
  x: number
  y: number
  anchor?: 'start' | 'end'
  children: ReactNode
}) {
  return (
    <text x={x} y={y} textAnchor={anchor} fontSize={10.5} className="fill-pencil font-mono" stroke="none">
      {children}
    </text>
  )
}
