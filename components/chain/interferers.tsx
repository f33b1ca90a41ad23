'use client'

import { X } from 'lucide-react'
import { useEffect, useMemo, useRef, useState } from 'react'
import {
  interfererLandings,
  MOST_INTERFERERS,
  noiseBudget,
  type ChainSpec,
  type ComputedChain,
  type InterfererLanding,
} from '@/dsp'
import { useOnPage } from '@/components/ui/use-on-page'
import { Button } from '@/components/ui/button'
import { hertzText, shownLevel, withPartAt } from '@/lib/chains/fields'
import { nameRefusal } from '@/lib/chains/names'
import { unitAfter } from '@/lib/chains/outline'
import { classNames } from '@/lib/format/class-names'
import { formatFixed, formatNumber } from '@/lib/format/quantity'
import type { ChainDesk } from './chain-desk'
import { ChainNumber } from './desk-fields'
import { NameWord, plainWord } from './name-word'

/** What is there beside the wanted signal: where each lands in the samples, and how big. */
export function Interferers({
  spec,
  chain,
  desk,
  readOnly,
  onTrace,
}: {
  spec: ChainSpec
  chain: ComputedChain | null
  desk: ChainDesk
  readOnly: boolean
  onTrace(hz: number): void
}) {
  const { interferers } = spec
  const onPage = useOnPage()
  // A chain is computed of one spec: while it follows a gesture, its landings may be of the one before.
  const landings = useMemo(
    () => (onPage && chain && chain.spec.interferers.length > 0 ? interfererLandings(chain) : []),
    [onPage, chain],
  )
  const noiseRms = useMemo(
    () => (onPage && chain && chain.spec.interferers.length > 0 ? noiseBudget(chain).rms : 0),
    [onPage, chain],
  )
  const [problem, setProblem] = useState<string | null>(null)
  const section = useRef<HTMLElement>(null)
  const awaited = useRef<number | null>(null)
  useEffect(() => {
    if (awaited.current === null || interferers.length <= awaited.current) return
    section.current?.querySelector<HTMLElement>(`[data-interferer="${awaited.current}"] input`)?.focus()
    awaited.current = null
  }, [interferers])

  function add(kind: 'tone' | 'band') {
    const { toHz } = spec.kept
    const hz = Number((2.5 * toHz).toPrecision(2))
    awaited.current = interferers.length
    setProblem(
      desk.addInterferer(
        kind === 'tone'
          ? { kind, name: 'tone', hz, level: 0.1 }
          : { kind, name: 'band', fromHz: hz, toHz: 2 * hz, level: 0.1 },
      ),
    )
  }
  function remove(index: number) {
    setProblem(desk.removeInterferer(index))
    requestAnimationFrame(() =>
      section.current
        ?.querySelector<HTMLElement>(
          interferers.length === 1
            ? '[data-tool="add"]'
            : `[data-interferer="${Math.max(index - 1, 0)}"] [data-tool="remove"]`,
        )
        ?.focus(),
    )
  }

  return (
    <section ref={section} aria-labelledby="interferers-heading">
      <div className="flex flex-wrap items-baseline justify-between gap-x-3">
        <h2 id="interferers-heading" className="font-text text-[13px] font-semibold text-pencil">
          Interferers
        </h2>
        {interferers.length > 0 ? (
          <span className="text-[12px] text-pencil">level at the sensor → in the samples</span>
        ) : null}
      </div>
      {interferers.length > 0 ? (
        <ul className="border-t border-graph-strong">
          {interferers.map((one, index) => {
            const at = `interferers.${index}`
            const fields = { spec, desk, readOnly }
            return (
              <li
                key={index}
                data-interferer={index}
                className="flex flex-wrap items-baseline justify-end gap-x-2.5 border-b border-graph py-0.5"
              >
                <span className="mr-auto min-w-0 text-[14px]">
                  <NameWord
                    label={`Interferer ${index + 1}, name`}
                    name={one.name}
                    look={plainWord}
                    readOnly={readOnly}
                    onName={(name) => nameRefusal(name) ?? desk.edit((now) => withPartAt(now, `${at}.name`, name))}
                  />
                </span>
                {one.kind === 'tone' ? (
                  <ChainNumber {...fields} path={`${at}.hz`} name={`Interferer ${index + 1}, frequency`} />
                ) : (
                  <span>
                    <ChainNumber {...fields} path={`${at}.fromHz`} name={`Interferer ${index + 1}, from`} />
                    <span className="text-[13px] text-pencil"> to </span>
                    <ChainNumber {...fields} path={`${at}.toHz`} name={`Interferer ${index + 1}, to`} />
                  </span>
                )}
                <span title={levelMeans[one.kind].title}>
                  <ChainNumber
                    {...fields}
                    path={`${at}.level`}
                    name={`Interferer ${index + 1}, level (${levelMeans[one.kind].spoken})`}
                  />
                  <span aria-hidden className="text-[12px] text-pencil">
                    {' '}
                    {levelMeans[one.kind].word}
                  </span>
                </span>
                <span className="flex items-baseline justify-end gap-x-1.5">
                  <Landing landing={landings[index] ?? null} spec={spec} noiseRms={noiseRms} onTrace={onTrace} />
                  {readOnly ? null : (
                    <Button
                      kind="quiet"
                      small
                      className="min-w-6 self-center px-1"
                      aria-label={`Remove interferer ${index + 1}, ${one.name}`}
                      title="Remove this interferer"
                      data-tool="remove"
                      onClick={() => remove(index)}
                    >
                      <X aria-hidden size={14} />
                    </Button>
                  )}
                </span>
              </li>
            )
          })}
        </ul>
      ) : (
        <p className="border-t border-graph-strong pt-1.5 text-[14px] leading-6">
          {readOnly
            ? 'No interferers are listed.'
            : 'Nothing listed yet. A pump’s blade pass, a drive’s switching frequency: say what is there, and see where it lands.'}
        </p>
      )}
      {problem ? (
        <p role="alert" className="mt-1 border-l-2 border-vermilion pl-2 text-[13px] text-vermilion">
          {problem}
        </p>
      ) : null}
      {readOnly ? null : (
        <div className="mt-1.5 flex flex-wrap gap-2">
          <Button small data-tool="add" disabled={interferers.length >= MOST_INTERFERERS} onClick={() => add('tone')}>
            Add a tone
          </Button>
          <Button small disabled={interferers.length >= MOST_INTERFERERS} onClick={() => add('band')}>
            Add a band
          </Button>
        </div>
      )}
    </section>
  )
}

/** What the number of a level is. */
const levelMeans = {
  tone: { word: 'peak', spoken: 'amplitude', title: 'Amplitude (peak) at the sensor' },
  band: {
    word: 'rms',
    spoken: 'rms over the whole band, evenly spread',
    title: 'Root mean square at the sensor over the whole band, evenly spread',
  },
} as const

/** What of an interferer the level is, and how far down it is; of a band that lands partly elsewhere the part inside alone. */
export function landingWords({ levelDb, keptShare }: InterfererLanding, isFelt: boolean): string {
  const part =
    keptShare > 0 && keptShare < 1 ? `the ${percentText(keptShare)} of it that lands inside the kept band: ` : ''
  const down = levelDb === -Infinity ? 'nothing comes through' : `${formatFixed(-levelDb, 1)}\u2009dB down`
  return `${part}${down}${isFelt ? (part ? ' at its worst, above the alias floor' : ', inside the kept band and above the alias floor') : ''}`
}

const percentText = (part: number): string => `${formatNumber(100 * part, 2)}\u2009%`

/** Part of the noise's rms below which the digits of a level say nothing. */
const LEAST_PART_OF_NOISE = 1e-6

/** A level in the samples, as far as it says anything beside the noise. */
export const landedLevel = (level: number, noiseRms: number, unit: string): string =>
  level < LEAST_PART_OF_NOISE * noiseRms ? 'below the noise' : shownLevel(level, unit)

function Landing({
  landing,
  spec,
  noiseRms,
  onTrace,
}: {
  landing: InterfererLanding | null
  spec: ChainSpec
  noiseRms: number
  onTrace(hz: number): void
}) {
  if (!landing) return <span className="numeric text-[13px] text-pencil">…</span>
  const isFelt = isAboveFloor(landing, spec)
  const lands = hertzText(landing.landsHz, 3)
  const exact = shownLevel(landing.level, unitAfter(spec))
  const level = landedLevel(landing.level, noiseRms, unitAfter(spec))
  return (
    <>
      <button
        type="button"
        className="numeric min-h-6 border-b border-dotted border-pencil text-[13px] whitespace-nowrap hover:bg-spruce-wash"
        aria-label={`${landing.name} lands at ${lands}: trace it on the fold chart`}
        onClick={() => onTrace(landing.landsHz)}
      >
        → {lands}
      </button>
      <span
        className={classNames(
          'numeric min-w-14 text-right text-[13px] whitespace-nowrap',
          isFelt && 'font-semibold text-vermilion',
        )}
        title={`${level === exact ? '' : `${exact}, `}${landingWords(landing, isFelt)}`}
      >
        {level}
        {isFelt ? <span className="sr-only">, inside the kept band and above the alias floor</span> : null}
      </span>
    </>
  )
}

/** Inside the kept band, and there at its worst less far down than the sheet asks of images; without such a line nothing is too much. */
export function isAboveFloor({ inKeptBand, levelDb }: InterfererLanding, { sheet }: ChainSpec): boolean {
  const floors = sheet.flatMap((line) =>
    line.kind === 'alias-floor' ? [line.atLeastDb] : line.kind === 'usable-band' ? [line.aliasDb] : [],
  )
  return inKeptBand && floors.length > 0 && levelDb > -Math.max(...floors)
}
