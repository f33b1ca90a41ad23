import Link from 'next/link'
import { TitleBlock } from '@/components/ui/title-block'
import { statementText } from '@/lib/designs/statement'
import { isStoredTaps, type StoredCoefficients, type StoredTaps } from '@/lib/designs/stored-coefficients'
import type { DesignRecord, VersionSummary } from '@/lib/designs/types'
import { stateWords } from '@/lib/designs/words'
import { typesetEquation } from '@/lib/exports/equation'
import { formatHz, formatInstant } from '@/lib/format/quantity'
import { CoefficientsTable } from './coefficients-table'
import { HandOverRegion } from './hand-over-region'

/** A version of a chain with a stage that is tied to this version. */
interface ChainUse {
  readonly chainId: string
  readonly drawingNumber: string
  readonly chainVersion: number
  readonly stageId: string
}

/** A saved version to read and to hand over; nothing on it can be changed. */
export function VersionSheet({
  design,
  version,
  kept,
  numbers,
  uses,
  mayExport,
}: {
  design: DesignRecord
  version: VersionSummary
  kept: StoredCoefficients
  /** Of all versions of the design, newest first. */
  numbers: readonly number[]
  uses: readonly ChainUse[]
  mayExport: boolean
}) {
  const path = `/designs/${design.id}/versions`
  return (
    <main className="mx-auto flex max-w-[1680px] flex-col gap-6 px-4 pt-5 pb-10 sm:px-6">
      <div>
        <h1 className="text-[22px] leading-snug sm:text-[26px]">{statementText(version.spec)}</h1>
        <p className="mt-1 text-[14px] text-pencil wrap-anywhere">
          Version {version.number}: {version.note}
        </p>
        {numbers.length > 1 ? (
          <nav aria-label="Versions of this design" className="mt-2">
            <ul className="flex flex-wrap gap-1 text-[13px]">
              {numbers.map((number) => (
                <li key={number}>
                  <Link
                    href={`${path}/${number}`}
                    aria-label={`Version ${number}`}
                    aria-current={number === version.number ? 'page' : undefined}
                    className="numeric flex min-h-6 min-w-6 items-center justify-center border border-graph-strong px-1.5 hover:border-ink aria-[current=page]:border-ink aria-[current=page]:bg-spruce-wash aria-[current=page]:font-semibold"
                  >
                    {number}
                  </Link>
                </li>
              ))}
            </ul>
          </nav>
        ) : null}
        <UsedBy uses={uses} />
      </div>

      <section aria-labelledby="coefficients-heading" className="min-w-0">
        <h2 id="coefficients-heading" className="text-[19px]">
          Coefficients as they were kept
        </h2>
        <p className="mt-0.5 mb-2 text-[13px] text-pencil">
          {isStoredTaps(kept) ? tapsWords(kept) : sectionsWords} Run at {formatHz(kept.sampleRateHz, 6)}.
        </p>
        <CoefficientsTable kept={kept} />
      </section>

      {mayExport ? (
        <HandOverRegion
          design={design}
          version={version}
          kept={kept}
          exportPath={`/api${path}/${version.number}/export`}
        />
      ) : (
        <section aria-labelledby="checksum-heading">
          <h2 id="checksum-heading" className="text-[19px]">
            Hand-over
          </h2>
          <p className="mt-1 max-w-prose text-[14px] text-pencil">
            As an observer you read this version; an owner, designer, reviewer or integrator of the team hands its
            coefficients over. Their SHA-256 is{' '}
            <span className="numeric wrap-anywhere text-ink">{version.checksum}</span>.
          </p>
        </section>
      )}

      <div className="w-full max-w-lg self-end">
        <TitleBlock
          label="Title block"
          cells={[
            { label: 'Drawing', value: design.drawingNumber, span: 3 },
            { label: 'Version', value: String(version.number), span: 3 },
            { label: 'Drawn', value: `${version.savedBy}, ${formatInstant(version.savedAt)}`, span: 6 },
            {
              label: 'State',
              value: stateWords[version.state],
              tone: version.state === 'released' ? 'met' : 'caution',
            },
            { label: 'Engine', value: version.engineVersion },
            { label: 'Coefficients', value: `${version.checksum.slice(0, 4)}…${version.checksum.slice(-4)}` },
          ]}
        />
      </div>
    </main>
  )
}

function UsedBy({ uses }: { uses: readonly ChainUse[] }) {
  // Two stages of one chain may be tied to the same version.
  const chains = [...new Map(uses.map((use) => [`${use.chainId}/versions/${use.chainVersion}`, use]))]
  if (chains.length === 0) return null
  return (
    <p className="mt-2 text-[14px] text-pencil">
      Used by{' '}
      {chains.map(([path, { drawingNumber, chainVersion }], at) => (
        <span key={path}>
          {at === 0 ? '' : '; '}
          <Link href={`/chains/${path}`} className="text-spruce underline underline-offset-2">
            chain <span className="numeric">{drawingNumber}</span>, version {chainVersion}
          </Link>
        </span>
      ))}
    </p>
  )
}

const sectionsWords = `Sections in the order they run, in double precision; feedback terms are subtracted: ${typesetEquation('sections', 'subtract', 2)}.`

const symmetryWords = {
  even: 'the same from either end',
  odd: 'from the other end the same with the other sign',
  none: 'not symmetric',
} as const

const tapsWords = ({ taps, symmetry }: StoredTaps): string =>
  `${taps.length} taps in double precision, ${symmetryWords[symmetry]}; there is no feedback: ${typesetEquation('taps', 'subtract', taps.length - 1)}.`
