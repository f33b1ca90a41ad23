import type { ChainSpec, ChainStage, DesignLink } from '@/dsp'
import type { LinkableDesign } from './types'

export interface StageLink {
  readonly stageId: string
  readonly stageIndex: number
  /** Path of the link in the spec, as refusals name it. */
  readonly field: string
  readonly link: DesignLink
}

/** The link of a stage, and the part of the stage that holds it. */
export function linkOf(stage: ChainStage): { readonly part: 'source' | 'filter'; readonly link: DesignLink } | null {
  if (stage.kind === 'analog')
    return stage.source.from === 'design' ? { part: 'source', link: stage.source.link } : null
  if (stage.kind === 'decimate' || stage.kind === 'shape')
    return stage.filter.type === 'design' ? { part: 'filter', link: stage.filter.link } : null
  return null
}

/** All links of a chain, in signal order; those of bypassed stages too. */
export function linksOf(spec: ChainSpec): readonly StageLink[] {
  return spec.stages.flatMap((stage, stageIndex) => {
    const found = linkOf(stage)
    return found
      ? [{ stageId: stage.id, stageIndex, field: `stages.${stageIndex}.${found.part}.link`, link: found.link }]
      : []
  })
}

/** The links whose design has gone on since, each with its newest version. */
export function outdatedLinks(
  spec: ChainSpec,
  linkable: readonly LinkableDesign[],
): readonly (StageLink & { readonly newest: DesignLink })[] {
  return linksOf(spec).flatMap((one) => {
    const newest = linkable.find(({ link }) => link.designId === one.link.designId)?.link
    return newest && newest.version > one.link.version ? [{ ...one, newest }] : []
  })
}

/** The same chain with each link as `change` gives it. */
export function withLinks(spec: ChainSpec, change: (link: DesignLink) => DesignLink): ChainSpec {
  return {
    ...spec,
    stages: spec.stages.map((stage): ChainStage => {
      if (stage.kind === 'analog' && stage.source.from === 'design')
        return { ...stage, source: { ...stage.source, link: change(stage.source.link) } }
      if (stage.kind === 'decimate' && stage.filter.type === 'design')
        return { ...stage, filter: { ...stage.filter, link: change(stage.filter.link) } }
      if (stage.kind === 'shape' && stage.filter.type === 'design')
        return { ...stage, filter: { ...stage.filter, link: change(stage.filter.link) } }
      return stage
    }),
  }
}
