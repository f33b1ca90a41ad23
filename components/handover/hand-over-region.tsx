'use client'

import { useCallback } from 'react'
import type { StoredCoefficients } from '@/lib/designs/stored-coefficients'
import type { DesignRecord, VersionSummary } from '@/lib/designs/types'
import { exportQuery, type ExportOptions } from '@/lib/exports'
import { HandOver } from './hand-over'

/** The hand-over panel as a part of a page that the server renders, which can't pass functions. */
export function HandOverRegion({
  design,
  version,
  kept,
  exportPath,
}: {
  design: DesignRecord
  version: VersionSummary
  kept: StoredCoefficients
  exportPath: string
}) {
  const exportHref = useCallback((options: ExportOptions) => `${exportPath}?${exportQuery(options)}`, [exportPath])
  return <HandOver key={version.checksum} design={design} version={version} kept={kept} exportHref={exportHref} />
}
