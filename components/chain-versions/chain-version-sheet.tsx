import Link from 'next/link'
import type { ReactNode } from 'react'
import type { ChainRequirementResult } from '@/dsp'
import { TitleBlock } from '@/components/ui/title-block'
import { factsAt } from '@/lib/chains/facts'
import { figureRows } from '@/lib/chains/figure-words'
import type { StageLink } from '@/lib/chains/links'
import { chainText } from '@/lib/chains/statement'
import type { ChainRecord, ChainVersionSummary } from '@/lib/chains/types'
import { chainLineText, chainMarginWords, chainQuantity, stageLabel, stageName } from '@/lib/chains/words'
import { stateWords } from '@/lib/designs/words'
import { classNames } from '@/lib/format/class-names'
import { formatDb, formatDegrees, formatHz, formatInstant } from '@/lib/format/quantity'
import { ChainFiles } from './chain-files'
import { ChainTable } from './chain-table'
import { VersionNumbers } from './version-numbers'

/** A saved version of a chain to read and to hand over; nothing on it can be changed. */
export function ChainVersionSheet({
  chain,
  version,
  results,
  links,
  numbers,
  lacksStages,
  mayExport,
}: {
  chain: ChainRecord
  version: ChainVersionSummary
  /** The lines of the sheet; null where today's engine can't compute the chain. */
  results: readonly ChainRequirementResult[] | null
  links: readonly StageLink[]
  /** Of all versions of the chain, newest first. */
  numbers: readonly number[]
  /** It was saved before stages that integrate and shape were kept, and has some. */
  lacksStages: boolean
  mayExport: boolean
}) {
  const { spec, figures } = version
  return (
    <main className="mx-auto flex max-w-5xl flex-col gap-8 px-4 pt-5 pb-10 sm:px-6">
      <div>
        <h1 className="text-[22px] leading-snug sm:text-[26px]">{chainText(spec)}</h1>
        <p className="mt-1 text-[14px] text-pencil wrap-anywhere">
          Version {version.number}: {version.note}
        </p>
        <VersionNumbers path={`/chains/${chain.id}/versions`} numbers={numbers} current={version.number} />
      </div>

      <Part id="figures" title="Figures as they were saved">
        <ChainTable label="Figures" columns={['Figure', 'Value']} numeric={[1]}>
          {figureRows(figures).map(({ name, text }) => [name, text])}
        </ChainTable>
        <p className="mt-2 text-[13px] text-pencil">
          Effective bits count the converter’s noise alone; the sensor’s own noise isn’t in them. Multiplies include
          integration and shaping.
        </p>
      </Part>

      <Part id="sheet" title="Requirement sheet">
        <SheetResults spec={spec} results={results} />
      </Part>

      <Part id="stages" title="Stages">
        <ChainTable label="Stages in signal order" columns={['Stage', 'What it is', 'In use', 'As stated']}>
          {spec.stages.map((stage, index) => [
            stageLabel(stage),
            stageName(stage),
            stage.bypassed ? 'bypassed' : 'yes',
            <StageFacts key="facts" spec={spec} index={index} />,
          ])}
        </ChainTable>
      </Part>

      <Part id="links" title="Designs that it is tied to">
        {links.length === 0 ? (
          <p className="text-[14px] text-pencil">None: every filter is stated in the chain itself.</p>
        ) : (
          <ul className="border-t border-graph-strong">
            {links.map(({ stageId, stageIndex, link }) => (
              <li key={stageId} className="flex flex-wrap gap-x-5 border-b border-graph py-2 text-[14px]">
                <span className="text-pencil">Stage {stageIndex + 1}</span>
                <Link
                  href={`/designs/${link.designId}/versions/${link.version}`}
                  className="underline-offset-2 hover:text-spruce hover:underline"
                >
                  <span className="numeric">{link.drawing}</span>, version {link.version}: {link.title}
                </Link>
              </li>
            ))}
          </ul>
        )}
      </Part>

      <Part id="match" title="Match between channels">
        <p className="mb-2 text-[13px] text-pencil">
          {spec.tolerance.channels} channels drawn from seed {spec.tolerance.seed}; 95 of 100 pairs of channels differ
          by no more than this.
        </p>
        <ChainTable
          label="Match at each frequency"
          columns={['Frequency', 'Gain', 'Phase']}
          numeric={[0, 1, 2]}
          className="max-h-72 max-w-md"
        >
          {figures.match.map(({ hz, gainDb, phaseDegrees }) => [
            formatHz(hz, 4),
            formatDb(gainDb, 3),
            formatDegrees(phaseDegrees, 3),
          ])}
        </ChainTable>
      </Part>

      <Part id="files" title="Files">
        <ChainFiles chain={chain} version={version} lacksStages={lacksStages} mayExport={mayExport} />
      </Part>

      <div className="w-full max-w-lg self-end">
        <TitleBlock
          label="Title block"
          cells={[
            { label: 'Drawing', value: chain.drawingNumber, span: 3 },
            { label: 'Version', value: String(version.number), span: 3 },
            { label: 'Drawn', value: `${version.savedBy}, ${formatInstant(version.savedAt)}`, span: 6 },
            {
              label: 'State',
              value: stateWords[version.state],
              tone: version.state === 'released' ? 'met' : 'caution',
            },
            { label: 'Engine', value: version.engineVersion },
            { label: 'Checksum', value: `${version.checksum.slice(0, 4)}…${version.checksum.slice(-4)}` },
          ]}
        />
      </div>
    </main>
  )
}

/** Every field of a stage. */
function StageFacts({ spec, index }: { spec: ChainVersionSummary['spec']; index: number }) {
  return (
    <dl className="flex flex-wrap gap-x-4 gap-y-0.5">
      {factsAt(spec, `stages.${index}`)
        .filter(({ path }) => path !== 'bypassed')
        .map(({ path, label, text }) => (
          <div key={path} className="flex gap-1.5">
            <dt className="text-pencil">{label}</dt>
            <dd>{text}</dd>
          </div>
        ))}
    </dl>
  )
}

function SheetResults({
  spec,
  results,
}: {
  spec: ChainVersionSummary['spec']
  results: readonly ChainRequirementResult[] | null
}) {
  if (spec.sheet.length === 0) return <p className="text-[14px] text-pencil">Nothing is asked of this version.</p>
  if (results === null)
    return (
      <p className="text-[14px] text-pencil">
        This engine can’t compute the version any more; the counts above are those of the engine that saved it.
      </p>
    )
  return (
    <ChainTable label="Lines of the requirement sheet" columns={['Line', 'Value', 'Margin']} numeric={[1]}>
      {results.map((result, index) => [
        chainLineText(spec, index),
        chainQuantity(result.value, result.unit),
        <span
          key="margin"
          className={classNames(
            result.met === null ? 'text-pencil' : result.met ? 'text-moss' : 'font-semibold text-vermilion',
          )}
        >
          {chainMarginWords(result)}
          {result.reason === undefined ? null : `: ${result.reason}`}
        </span>,
      ])}
    </ChainTable>
  )
}

function Part({ id, title, children }: { id: string; title: string; children: ReactNode }) {
  return (
    <section aria-labelledby={`${id}-heading`} className="min-w-0">
      <h2 id={`${id}-heading`} className="mb-2 text-[19px]">
        {title}
      </h2>
      {children}
    </section>
  )
}
