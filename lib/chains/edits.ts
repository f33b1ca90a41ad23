import {
  chainUnits,
  MOST_CHAIN_STAGES,
  type AnalogSpec,
  type ChainSpec,
  type ChainStage,
  type ChainStageKind,
  type ChainUnit,
  type DecimateStage,
  type DesignLink,
  type Family,
  type ResponseKind,
} from '@/dsp'
import { defaultSpec, withFamily, withResponse } from '@/lib/designs/edits'
import { numberAt, withPartAt, withStage } from './fields'
import { ratesOf, unitAfter } from './outline'
import {
  freshStageId,
  integralUnits,
  newStage,
  usualEdges,
  usualFilter,
  usualIntegration,
  usualTaps,
  type DecimateFilter,
  type DecimateFilterType,
} from './stage-starts'

/*
 * What happens to the rest of a chain when one part changes. A decimating filter's edges and length that stood where the kept band and the
 * rates put them follow when those move; what was set by hand stays. Whether the result makes a chain is for dsp to say.
 */

/** The chain with one number set, and with what follows from it. */
export function withField(spec: ChainSpec, path: string, value: number): ChainSpec {
  if (numberAt(spec, path) === value) return spec
  const next = withPartAt(spec, path, value)
  const [, index] = /^stages\.(\d+)\.factor$/.exec(path) ?? []
  return followed(spec, index === undefined ? next : asFactorAllows(next, Number(index)))
}

/** A half-band filter halves, and nothing else: at another factor a window does its work. */
function asFactorAllows(spec: ChainSpec, index: number): ChainSpec {
  const stage = spec.stages[index]
  if (stage?.kind !== 'decimate' || stage.filter.type !== 'half-band' || stage.factor === 2) return spec
  return withDecimateType(spec, index, 'kaiser')
}

/** Lets the filters of `after` follow its kept band and rates, as far as those of `before` stood where its own put them. */
function followed(before: ChainSpec, after: ChainSpec): ChainSpec {
  const [ratesBefore, ratesAfter] = [ratesOf(before), ratesOf(after)]
  const stages = after.stages.map((stage, index) => {
    const at = before.stages.findIndex(({ id }) => id === stage.id)
    const was = before.stages[at]
    const [rateBefore, rateAfter] = [ratesBefore[at]?.inRateHz ?? null, ratesAfter[index]?.inRateHz ?? null]
    if (stage.kind !== 'decimate' || was?.kind !== 'decimate' || rateBefore === null || rateAfter === null) return stage
    const filter = followedFilter(
      { filter: was.filter, factor: was.factor, inRateHz: rateBefore, toHz: before.kept.toHz },
      { filter: stage.filter, factor: stage.factor, inRateHz: rateAfter, toHz: after.kept.toHz },
    )
    return filter === stage.filter ? stage : { ...stage, filter }
  })
  return stages.every((stage, index) => stage === after.stages[index]) ? after : { ...after, stages }
}

interface Placed {
  readonly filter: DecimateFilter
  readonly factor: number
  readonly inRateHz: number
  readonly toHz: number
}

function followedFilter(was: Placed, is: Placed): DecimateFilter {
  const { filter } = is
  if (filter.type === 'cic') {
    const { compensation } = filter
    return compensation && compensation.passHz === was.toHz && is.toHz !== was.toHz
      ? { ...filter, compensation: { ...compensation, passHz: is.toHz } }
      : filter
  }
  if ((filter.type !== 'kaiser' && filter.type !== 'equiripple') || filter.type !== was.filter.type) return filter
  const [old, now] = [usualOf(was), usualOf(is)]
  const passHz = filter.passHz === old.passHz ? now.passHz : filter.passHz
  const stopHz = filter.stopHz === old.stopHz ? now.stopHz : filter.stopHz
  const hasMoved = passHz !== filter.passHz || stopHz !== filter.stopHz || was.inRateHz !== is.inRateHz
  if (!hasMoved) return filter
  const edges = { ...filter, passHz, stopHz }
  if (edges.type !== 'kaiser' || was.filter.type !== 'kaiser' || !(stopHz > passHz)) return edges
  const { attenuationDb, taps } = edges
  const usualBefore = usualTaps(was.filter.attenuationDb, was.filter.passHz, was.filter.stopHz, was.inRateHz)
  return taps === usualBefore ? { ...edges, taps: usualTaps(attenuationDb, passHz, stopHz, is.inRateHz) } : edges
}

const usualOf = ({ toHz, inRateHz, factor }: Placed) => usualEdges(toHz, inRateHz, factor)

/* Stages */

/** Where a stage of a kind may be put in: the indexes it could get, rising. */
export function placesFor(spec: ChainSpec, kind: ChainStageKind): readonly number[] {
  const converter = spec.stages.findIndex((stage) => stage.kind === 'converter')
  if (converter < 0 || kind === 'sensor' || kind === 'converter') return []
  const [from, to] = kind === 'analog' ? [1, converter] : [converter + 1, spec.stages.length]
  return Array.from({ length: to - from + 1 }, (_, k) => from + k)
}

export type StagesEdit =
  | { readonly ok: true; readonly spec: ChainSpec; readonly stageId: string }
  | { readonly ok: false; readonly message: string }

const refused = (message: string): StagesEdit => ({ ok: false, message })
const full = refused(`A chain has ${MOST_CHAIN_STAGES} stages at most; take one out first.`)

function withStages(spec: ChainSpec, stages: readonly ChainStage[], stageId: string): StagesEdit {
  return { ok: true, spec: followed(spec, { ...spec, stages }), stageId }
}

/**
 * A new stage behind the chosen one where its kind may stand there, else as far down the chain as it may. Shaping where there is nothing
 * to integrate takes the first of the designs that can be linked.
 */
export function withStageAdded(
  spec: ChainSpec,
  kind: ChainStageKind,
  behindIndex: number,
  links: readonly DesignLink[] = [],
): StagesEdit {
  if (spec.stages.length >= MOST_CHAIN_STAGES) return full
  const places = placesFor(spec, kind)
  const index = places.includes(behindIndex + 1) ? behindIndex + 1 : places.at(-1)
  if (index === undefined) return refused(`A chain has one ${kind}.`)
  const [link] = links
  const stage = newStage(kind, spec, index) ?? (link ? linkedShape(spec, link) : null)
  if (!stage) {
    return refused(
      `There is nothing that ${unitAfter(spec, index - 1)} is integrated to, and no design with a version to shape by. Save a version of a design in this project first.`,
    )
  }
  return withStages(spec, [...spec.stages.slice(0, index), stage, ...spec.stages.slice(index)], stage.id)
}

const linkedShape = (spec: ChainSpec, link: DesignLink): ChainStage => ({
  id: freshStageId(spec),
  bypassed: false,
  kind: 'shape',
  filter: { type: 'design', link },
})

/** The stage at `from` moved to stand at `to`. */
export function withStageMoved(spec: ChainSpec, from: number, to: number): StagesEdit {
  const stage = spec.stages[from]
  if (!stage || to < 0 || to >= spec.stages.length) return refused('There is no place beyond the end of the chain.')
  if (stage.kind === 'sensor') return refused('The sensor is the first stage: that is where a chain begins.')
  if (stage.kind === 'converter') {
    return refused('The converter stands between the analog filters and the digital stages; move those instead.')
  }
  const rest = spec.stages.filter((_, index) => index !== from)
  if (!placesFor({ ...spec, stages: rest }, stage.kind).includes(to)) {
    return refused(
      stage.kind === 'analog'
        ? 'An analog filter stands between the sensor and the converter.'
        : 'A digital stage stands behind the converter.',
    )
  }
  return withStages(spec, [...rest.slice(0, to), stage, ...rest.slice(to)], stage.id)
}

export function withBypass(spec: ChainSpec, index: number, bypassed: boolean): StagesEdit {
  const stage = spec.stages[index]
  if (!stage) return refused('There is no such stage.')
  if (stage.kind === 'sensor' || stage.kind === 'converter') {
    return refused(`A chain can’t do without its ${stage.kind}; only filters can be bypassed.`)
  }
  return withStages(
    spec,
    spec.stages.map((one, at) => (at === index ? { ...stage, bypassed } : one)),
    stage.id,
  )
}

export function withStageDuplicated(spec: ChainSpec, index: number): StagesEdit {
  const stage = spec.stages[index]
  if (!stage) return refused('There is no such stage.')
  if (stage.kind === 'sensor' || stage.kind === 'converter') return refused(`A chain has one ${stage.kind}.`)
  if (spec.stages.length >= MOST_CHAIN_STAGES) return full
  const copy: ChainStage = { ...stage, id: freshStageId(spec) }
  const stages = [...spec.stages.slice(0, index + 1), copy, ...spec.stages.slice(index + 1)]
  // At the lower rate behind the first one the second needs edges of its own.
  const { toHz } = spec.kept
  const inRateHz = ratesOf({ ...spec, stages })[index + 1]?.inRateHz ?? null
  const at = stages[index + 1]
  if (at?.kind === 'decimate' && at.filter.type !== 'design' && inRateHz !== null) {
    const { type } = at.filter
    stages[index + 1] = { ...at, filter: type === 'cic' ? at.filter : usualFilter(type, { ...at, inRateHz, toHz }) }
  }
  return withStages(spec, stages, copy.id)
}

/** Without a stage; the one before it is looked at next. */
export function withoutStage(spec: ChainSpec, index: number): StagesEdit {
  const stage = spec.stages[index]
  if (!stage) return refused('There is no such stage.')
  if (stage.kind === 'sensor' || stage.kind === 'converter') {
    return refused(`A chain can’t do without its ${stage.kind}.`)
  }
  return withStages(
    spec,
    spec.stages.filter((_, at) => at !== index),
    spec.stages[index - 1]?.id ?? stage.id,
  )
}

/* What a stage is made of */

const family = (analog: AnalogSpec) => ({ ...defaultSpec, analog })

/** The analog filter of a stage, changed as a design's would be. */
export function withAnalogFamily(spec: ChainSpec, index: number, name: Family): ChainSpec {
  return withAnalogSpec(spec, index, (analog) => withFamily(family(analog), name).analog)
}

export function withAnalogResponse(spec: ChainSpec, index: number, response: ResponseKind): ChainSpec {
  return withAnalogSpec(spec, index, (analog) => withResponse(family(analog), response).analog)
}

function withAnalogSpec(spec: ChainSpec, index: number, change: (analog: AnalogSpec) => AnalogSpec): ChainSpec {
  const stage = spec.stages[index]
  if (stage?.kind !== 'analog' || stage.source.from !== 'here') return spec
  return withStage(spec, index, { ...stage, source: { from: 'here', analog: change(stage.source.analog) } })
}

/** An anti-alias stage tied to a design, or with a filter of its own again: the design's own where it is one of a family. */
export function withAnalogLink(spec: ChainSpec, index: number, link: DesignLink | null): ChainSpec {
  const stage = spec.stages[index]
  if (stage?.kind !== 'analog') return spec
  if (link) return withStage(spec, index, { ...stage, source: { from: 'design', link } })
  if (stage.source.from === 'here') return spec
  const { spec: linked } = stage.source.link
  const fresh = newStage('analog', spec, index)
  if ('analog' in linked) return withStage(spec, index, { ...stage, source: { from: 'here', analog: linked.analog } })
  return fresh?.kind === 'analog' ? withStage(spec, index, { ...stage, source: fresh.source }) : spec
}

/** A decimating filter of another type, begun with what the rates ask for. */
export function withDecimateType(
  spec: ChainSpec,
  index: number,
  type: Exclude<DecimateFilterType, 'design'>,
): ChainSpec {
  const stage = spec.stages[index]
  const inRateHz = ratesOf(spec)[index]?.inRateHz ?? null
  if (stage?.kind !== 'decimate' || stage.filter.type === type || inRateHz === null) return spec
  // Half-band means by two.
  const factor = type === 'half-band' ? 2 : stage.factor
  const next: DecimateStage = {
    ...stage,
    factor,
    filter: usualFilter(type, { toHz: spec.kept.toHz, inRateHz, factor }),
  }
  return followed(spec, withStage(spec, index, next))
}

/** A digital stage tied to a design; a shaping stage without one integrates. */
export function withDigitalLink(spec: ChainSpec, index: number, link: DesignLink | null): ChainSpec {
  const stage = spec.stages[index]
  if (stage?.kind === 'decimate' && link) {
    return withStage(spec, index, { ...stage, filter: { type: 'design', link } })
  }
  if (stage?.kind !== 'shape') return spec
  const filter = link ? { type: 'design' as const, link } : usualIntegration(spec, unitAfter(spec, index - 1))
  return filter ? withStage(spec, index, { ...stage, filter }) : spec
}

/** Integration once or twice, ending in a unit that there is for it; as it was where there is none. */
export function withIntegrationTimes(spec: ChainSpec, index: number, times: 1 | 2): ChainSpec {
  const stage = spec.stages[index]
  if (stage?.kind !== 'shape' || stage.filter.type !== 'integrate') return spec
  const units = integralUnits(unitAfter(spec, index - 1), times)
  const unit = units.find((one) => one === 'mm/s' || one === 'mm') ?? units[0]
  return unit ? withStage(spec, index, { ...stage, filter: { ...stage.filter, times, unit } }) : spec
}

/**
 * The sensor in another unit. Of the same quantity it stays the same sensor: its sensitivity is said in the new unit, and so are the
 * interferers' levels, which are given at the sensor.
 */
export function withSensorUnit(spec: ChainSpec, index: number, unit: ChainUnit): ChainSpec {
  const stage = spec.stages[index]
  if (stage?.kind !== 'sensor' || stage.unit === unit) return spec
  const [from, to] = [chainUnits[stage.unit], chainUnits[unit]]
  if (from.quantity !== to.quantity) return withStage(spec, index, { ...stage, unit })
  // To 13 digits, so that the way there and back ends where it began.
  const sensitivity = Number(((stage.sensitivity * to.si) / from.si).toPrecision(13))
  const interferers = spec.interferers.map((one) => ({
    ...one,
    level: Number(((one.level * from.si) / to.si).toPrecision(13)),
  }))
  return { ...withStage(spec, index, { ...stage, unit, sensitivity }), interferers }
}

/** A stage's link moved to another version, or to another design. */
export function withLink(spec: ChainSpec, index: number, link: DesignLink): ChainSpec {
  return spec.stages[index]?.kind === 'analog' ? withAnalogLink(spec, index, link) : withDigitalLink(spec, index, link)
}
