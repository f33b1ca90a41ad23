import { clamped, steppedBy, steppedDigit } from '@/components/plot/handle'
import { valuePerPixel } from '@/components/plot/scale'
import { roundedStep, roundedTo } from '@/components/plot/ticks'
import type { DesignSpec, Requirement } from '@/dsp'
import { frequencyBounds, numberOf, sheetOf, withField, withLine } from '@/lib/designs/sheet-edits'
import type { LineField } from '@/lib/designs/requirement-words'
import { formatDb, formatHz } from '@/lib/format/quantity'
import { frequencyUnder, type SpecHandle } from '../stack/handle-shape'

/*
 * The edges and levels of a requirement sheet's grounds on the magnitude plot, as sliders. Lines that have no ground there are edited in
 * their words alone.
 */

/** More marks than this on one plot can't be told apart; further lines are edited in their words. */
const MOST_HANDLES = 24

type Masked = Extract<Requirement, { kind: 'pass' | 'stop' | 'keep-tone' | 'lose-tone' }>

const isMask = (line: Requirement): line is Masked =>
  line.kind === 'pass' || line.kind === 'stop' || line.kind === 'keep-tone' || line.kind === 'lose-tone'

const keeps = (line: Masked): line is Extract<Masked, { withinDb: number }> =>
  line.kind === 'pass' || line.kind === 'keep-tone'

export function sheetHandles(spec: DesignSpec): readonly SpecHandle[] {
  return sheetOf(spec)
    .flatMap((line, index) => (isMask(line) ? lineHandles(line, index, spec) : []))
    .slice(0, MOST_HANDLES)
}

function lineHandles(line: Masked, index: number, spec: DesignSpec): readonly SpecHandle[] {
  const fold = spec.sampleRateHz / 2
  const edges = edgeFields(line).flatMap(({ field, end }) => {
    const handle = edgeHandle(line, index, field, end, fold)
    return handle ? [handle] : []
  })
  return [...edges, levelHandle(line, index, fold)]
}

/** The numbers of a line that stand at an end of its ground; an end at 0 Hz has nowhere to be taken hold of. */
function edgeFields(line: Masked): readonly { readonly field: LineField; readonly end: 'from' | 'to' }[] {
  if (line.kind === 'keep-tone' || line.kind === 'lose-tone') return [{ field: 'hz', end: 'to' }]
  return [
    ...(line.fromHz > 0 ? [{ field: 'fromHz', end: 'from' } as const] : []),
    ...(line.toHz === undefined ? [] : [{ field: 'toHz', end: 'to' } as const]),
  ]
}

const valueOf = (line: Masked, field: LineField): number => numberOf(line, field) ?? 0
const levelOf = (line: Masked): number => (keeps(line) ? -line.withinDb : -line.attenuationDb)

/** Edges are held beside their corner, inside the ground, where the level's own mark doesn't stand. */
const BESIDE_CORNER_DB = 9

function edgeHandle(
  line: Masked,
  index: number,
  field: LineField,
  end: 'from' | 'to',
  fold: number,
): SpecHandle | null {
  const value = valueOf(line, field)
  const { least, most } = frequencyBounds(line, field, fold)
  // Left behind by a lower rate: its words still take another value, but there is no ground to hold.
  if (value > fold) return null
  const bounds = { value, min: Math.min(field === 'fromHz' && least === 0 ? fold * 1e-6 : least, value), max: most }
  const isTone = field === 'hz'
  return {
    ...bounds,
    id: `sheet-${index}-${end}`,
    look: 'limit-edge',
    across: levelOf(line) + (keeps(line) ? -BESIDE_CORNER_DB : BESIDE_CORNER_DB),
    label: `Requirement ${index + 1}, ${isTone ? 'tone' : end === 'from' ? 'lower edge' : 'upper edge'}`,
    field: `sheet.${index}.${field}`,
    orientation: 'horizontal',
    valueText: `requirement ${index + 1}: ${edgeWords(line, field)} ${formatHz(value)}`,
    next: (size, direction) => steppedDigit(bounds, size, direction),
    under: (point, grab, frame, fine) => clamped(frequencyUnder(point, grab, frame, fine), bounds),
    apply: (now, hz) => withNumber(now, index, field, hz),
  }
}

function edgeWords(line: Masked, field: LineField): string {
  const verb = keeps(line) ? 'keep' : 'lose'
  if (field === 'hz') return `${verb} the tone at`
  return field === 'fromHz' ? `${verb} from` : `${verb} up to`
}

/** A tolerance of a tenth of a decibel is less than a pixel: it is pulled by a lever, which doubles it every so many pixels. */
const LEVER_PIXELS = 36
const MOST_TOLERANCE_DB = 40
const MOST_ATTENUATION_DB = 200

function levelHandle(line: Masked, index: number, fold: number): SpecHandle {
  const level = levelOf(line)
  const field = keeps(line) ? 'withinDb' : 'attenuationDb'
  const span = line.kind === 'pass' || line.kind === 'stop' ? ([line.fromHz, line.toHz ?? fold] as const) : null
  const common = {
    id: `sheet-${index}-level`,
    look: 'limit-level',
    across: span === null ? valueOf(line, 'hz') : span,
    label: `Requirement ${index + 1}, ${keeps(line) ? 'tolerance' : 'attenuation'}`,
    field: `sheet.${index}.${field}`,
    orientation: 'vertical',
    apply: (now: DesignSpec, db: number) => withNumber(now, index, field, -db),
  } as const
  if (keeps(line)) {
    const bounds = {
      value: level,
      min: -Math.max(MOST_TOLERANCE_DB, line.withinDb),
      max: -Math.min(0.001, line.withinDb),
    }
    return {
      ...common,
      ...bounds,
      valueText: `requirement ${index + 1}: keep within ${formatDb(line.withinDb, line.withinDb < 0.1 ? 3 : 2)}`,
      next: (size, direction) => steppedBy(bounds, 0.1, size, direction),
      under: (point, grab, _frame, fine) => {
        const lever = fine ? LEVER_PIXELS * 10 : LEVER_PIXELS
        const pulled = grab.value * 2 ** ((point.y - grab.point.y) / lever)
        return clamped(roundedTo(pulled, roundedStep(Math.abs(pulled) / 50)), bounds)
      },
    }
  }
  const bounds = { value: level, min: Math.min(-MOST_ATTENUATION_DB, level), max: Math.max(-1, level) }
  return {
    ...common,
    ...bounds,
    valueText: `requirement ${index + 1}: lose by ${formatDb(line.attenuationDb, 1)}`,
    next: (size, direction) => steppedBy(bounds, 1, size, direction),
    under: (point, grab, frame, fine) => {
      const y = frame.y.magnitude
      const at = point.y - grab.offset.y
      const step = roundedStep(valuePerPixel(y, at)) * (fine ? 0.1 : 1)
      return clamped(roundedTo(y.toValue(at), step), bounds)
    },
  }
}

/** A value that the line can't have leaves the spec as it was: a hand stops at the bound. */
function withNumber(spec: DesignSpec, index: number, field: LineField, value: number): DesignSpec {
  const line = sheetOf(spec)[index]
  if (!line || !(field in line)) return spec
  const edit = withField(line, field, value, spec.sampleRateHz / 2)
  return edit.ok ? withLine(spec, index, edit.line) : spec
}
