import { DesignError } from '../errors'
import { analogSections } from './analog-sections'
import type { ComputedStage } from './chain'
import { LEAST_CHANNELS, MOST_CHANNEL_SECTIONS } from './limits'
import type { ChainSpec } from './spec'

/**
 * Whether a tolerance run of the chain stays within the work that is done for one: channels times analog sections.
 *
 * @param stages all of them, with their parts
 * @throws DesignError `too-much-drawing` with field `tolerance.channels`, nearest the most channels that such a chain can have
 */
export function checkToleranceWork({ tolerance: { channels } }: ChainSpec, stages: readonly ComputedStage[]): void {
  // No filter has more sections than poles, and few chains come near: splitting them is left to those that do.
  const poles = stages.reduce(
    (sum, { stage, parts }) =>
      sum +
      (stage.kind === 'sensor' ? (stage.highPass?.order ?? 0) : 0) +
      parts.reduce((own, part) => own + (part.kind === 'analog' ? part.filter.poles.length : 0), 0),
    0,
  )
  if (channels * poles <= MOST_CHANNEL_SECTIONS) return
  const sections = analogSections({ stages }).length
  if (channels * sections <= MOST_CHANNEL_SECTIONS) return
  const most = Math.max(LEAST_CHANNELS, Math.floor(MOST_CHANNEL_SECTIONS / sections))
  const message = `With ${sections} analog sections a tolerance run draws ${most} channels at most; ${channels} were asked for.`
  throw new DesignError('too-much-drawing', 'tolerance.channels', message, most)
}
