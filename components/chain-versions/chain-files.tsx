import Link from 'next/link'
import { buttonClass } from '@/components/ui/button'
import type { ChainRecord, ChainVersionSummary } from '@/lib/chains/types'
import { caution } from '@/lib/caution'

/** The files of a version, or who may have them; the checksum in either case. */
export function ChainFiles({
  chain,
  version,
  lacksStages,
  mayExport,
}: {
  chain: ChainRecord
  version: ChainVersionSummary
  /** It was saved before stages that integrate and shape were kept, and has some. */
  lacksStages: boolean
  mayExport: boolean
}) {
  const path = `/api/chains/${chain.id}/versions/${version.number}/export`
  const runs = version.spec.stages.some(({ kind, bypassed }) => (kind === 'decimate' || kind === 'shape') && !bypassed)
  return (
    <div className="flex max-w-prose flex-col gap-3 text-[14px]">
      {mayExport ? (
        <div className="flex flex-wrap gap-2">
          <a className={buttonClass()} href={`${path}?as=json`} download>
            Chain, JSON
          </a>
          {runs ? (
            <a className={buttonClass()} href={`${path}?as=c`} download>
              Digital stages, C
            </a>
          ) : null}
        </div>
      ) : (
        <p className="text-pencil">
          As an observer you read this version; an owner, designer, reviewer or integrator of the team hands it over.
        </p>
      )}
      {lacksStages ? (
        <p className="font-semibold text-vermilion">
          This version was saved before stages that integrate and shape were kept: its files hold the decimations alone,
          and no test vector. Save the chain again for files that hold every digital stage.
        </p>
      ) : null}
      <p className="text-pencil">
        SHA-256 of spec, figures and numbers{' '}
        <span className="numeric wrap-anywhere text-[12px] text-ink">{version.checksum}</span>
      </p>
      <p className="text-[13px] text-pencil">
        What stands in the files is described{' '}
        <Link href="/formats" className="text-spruce underline underline-offset-2">
          here
        </Link>
        . {caution}
      </p>
    </div>
  )
}
