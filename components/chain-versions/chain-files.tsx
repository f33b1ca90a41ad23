import Link from 'next/link'
import { buttonClass } from '@/components/ui/button'
import type { ChainRecord, ChainVersionSummary } from '@/lib/chains/types'
import { caution } from '@/lib/exports/coefficient-set'

/** The files of a version, or who may have them; the checksum in either case. */
export function ChainFiles({
  chain,
  version,
  mayExport,
}: {
  chain: ChainRecord
  version: ChainVersionSummary
  mayExport: boolean
}) {
  const path = `/api/chains/${chain.id}/versions/${version.number}/export`
  const decimates = version.spec.stages.some((stage) => stage.kind === 'decimate' && !stage.bypassed)
  return (
    <div className="flex max-w-prose flex-col gap-3 text-[14px]">
      {mayExport ? (
        <div className="flex flex-wrap gap-2">
          <a className={buttonClass()} href={`${path}?as=json`} download>
            Chain, JSON
          </a>
          {decimates ? (
            <a className={buttonClass()} href={`${path}?as=c`} download>
              Decimation coefficients, C
            </a>
          ) : null}
        </div>
      ) : (
        <p className="text-pencil">
          As an observer you read this version; an owner, designer, reviewer or integrator of the team hands it over.
        </p>
      )}
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
