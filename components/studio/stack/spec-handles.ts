import { clamped, steppedBy, steppedDigit } from '@/components/plot/handle'
import { valuePerPixel } from '@/components/plot/scale'
import { roundedStep, roundedTo } from '@/components/plot/ticks'
import { isFamilyDesign, isFirDesign, type DesignSpec, type FamilyDesign, type FirDesign } from '@/dsp'
import { withAnalog, withEdge, withHold, withRate } from '@/lib/designs/edits'
import { withBand } from '@/lib/designs/fir-edits'
import { lowestEdgeHz } from '@/lib/designs/outline'
import { formatDb, formatHz } from '@/lib/format/quantity'
import { sheetHandles } from '../sheet/sheet-handles'
import { frequencyUnder, type SpecHandle } from './handle-shape'

/*
 * The parts of a spec that can be taken hold of on the plots. Each is a slider: a value with bounds, steps for the keys, the value under
 * a dragging pointer (the scale's inverse) and the spec with that value put in.
 */

export type { Grab, HandleId, HandleLook, Point, SpecHandle } from './handle-shape'

/** An edge keeps this far below half the rate; the statement takes the rest. */
const HIGHEST_EDGE_PART = 0.495
const LEAST_HZ = 1e-6
/** Edges lie no lower than this part of the rate. */
const LEAST_PART_OF_RATE = 1e-6
const APART = 1.001

/** A bound with four digits, up or down to the safe side: no one wants to read 242.42424 Hz. */
function shortened(hz: number, direction: 1 | -1): number {
  const step = 10 ** (Math.floor(Math.log10(hz)) - 3)
  const count = direction > 0 ? Math.ceil(hz / step - 1e-9) : Math.floor(hz / step + 1e-9)
  return Number((count * step).toPrecision(4))
}

const highestEdgeHz = (sampleRateHz: number): number => shortened(sampleRateHz * HIGHEST_EDGE_PART, -1)

export const MOST_ORDER = 24

export function specHandles(spec: DesignSpec): readonly SpecHandle[] {
  const own = isFirDesign(spec)
    ? bandHandles(spec)
    : [...(isFamilyDesign(spec) ? familyHandles(spec) : []), ...methodHandles(spec)]
  return [...own, foldHandle(spec), ...sheetHandles(spec)]
}

function familyHandles(spec: FamilyDesign): SpecHandle[] {
  const { analog } = spec
  const handles: SpecHandle[] = [...edgeHandles(spec)]
  const hasRipple = analog.family === 'chebyshev1' || analog.family === 'elliptic'
  const hasAttenuation = analog.family === 'chebyshev2' || analog.family === 'elliptic'
  if (hasRipple && analog.rippleDb !== undefined) handles.push(rippleHandle(analog.rippleDb, analog.attenuationDb))
  if (hasAttenuation && analog.attenuationDb !== undefined)
    handles.push(attenuationHandle(analog.attenuationDb, analog.rippleDb))
  handles.push(orderHandle(analog.order))
  return handles
}

function methodHandles({ how, sampleRateHz }: Exclude<DesignSpec, { fir: unknown }>): SpecHandle[] {
  if (how.method === 'bilinear' && typeof how.hold === 'number') return [holdHandle(how.hold, sampleRateHz)]
  return how.method === 'fitted' ? [fitHandle(how.upToHz, sampleRateHz)] : []
}

/** Every edge of an FIR filter's bands that doesn't lie at 0 Hz or at half the rate. */
function bandHandles(spec: FirDesign): SpecHandle[] {
  const fold = spec.sampleRateHz / 2
  const { bands } = spec.fir
  return bands.flatMap((band, index) =>
    (['from', 'to'] as const).flatMap((end): SpecHandle[] => {
      const value = end === 'from' ? band.fromHz : band.toHz
      if (value === 0 || value >= fold) return []
      const below = end === 'from' ? (bands[index - 1]?.toHz ?? 0) : band.fromHz
      const above = end === 'from' ? band.toHz : (bands[index + 1]?.fromHz ?? fold)
      const bounds = {
        value,
        min: shortened(Math.max(below * APART, fold * 1e-4), 1),
        max: shortened(above / APART, -1),
      }
      return [
        {
          ...bounds,
          id: `band-${index}-${end}`,
          look: 'edge',
          label: `Band ${index + 1}, ${end === 'from' ? 'lower' : 'upper'} edge`,
          field: `fir.bands.${index}.${end}Hz`,
          orientation: 'horizontal',
          valueText: formatHz(value),
          next: (size, direction) => steppedDigit(bounds, size, direction),
          under: (point, grab, frame, fine) => clamped(frequencyUnder(point, grab, frame, fine), bounds),
          apply: (now, hz) => (isFirDesign(now) ? withBand(now, index, end === 'from' ? 'fromHz' : 'toHz', hz) : now),
        },
      ]
    }),
  )
}

function edgeHandles(spec: FamilyDesign): SpecHandle[] {
  const { edgesHz } = spec.analog
  const highest = highestEdgeHz(spec.sampleRateHz)
  const lowest = Math.max(LEAST_HZ, shortened(spec.sampleRateHz * LEAST_PART_OF_RATE * 1.001, 1))
  return edgesHz.map((value, index) => {
    const other = edgesHz.length < 2 ? null : (edgesHz[1 - index] ?? null)
    const bounds = {
      value,
      min: index === 1 && other !== null ? shortened(other * APART, 1) : lowest,
      max: index === 0 && other !== null ? Math.min(shortened(other / APART, -1), highest) : highest,
    }
    const label = other === null ? 'Corner frequency' : index === 0 ? 'Lower band edge' : 'Upper band edge'
    return {
      ...bounds,
      id: index === 0 ? 'edge-0' : 'edge-1',
      look: 'edge',
      label,
      field: `analog.edgesHz.${index}`,
      orientation: 'horizontal',
      valueText: formatHz(value),
      next: (size, direction) => steppedDigit(bounds, size, direction),
      under: (point, grab, frame, fine) => clamped(frequencyUnder(point, grab, frame, fine), bounds),
      apply: (now, hz) => (isFamilyDesign(now) ? withEdge(now, index === 0 ? 0 : 1, hz) : now),
    }
  })
}

/** Dragging ripple by the inverse scale would be a matter of two pixels; a lever doubles it every so many pixels instead. */
const LEVER_PIXELS = 36

function rippleHandle(rippleDb: number, attenuationDb: number | undefined): SpecHandle {
  const most = attenuationDb === undefined ? 12 : Math.min(12, attenuationDb * 0.9)
  const bounds = { value: -rippleDb, min: -most, max: -0.001 }
  return {
    ...bounds,
    id: 'ripple',
    look: 'pass-level',
    label: 'Pass-band ripple',
    field: 'analog.rippleDb',
    orientation: 'vertical',
    valueText: `ripple ${formatDb(rippleDb, rippleDb < 0.1 ? 3 : 2)}`,
    next: (size, direction) => steppedBy(bounds, 0.1, size, direction),
    under: (point, grab, _frame, fine) => {
      const lever = fine ? LEVER_PIXELS * 10 : LEVER_PIXELS
      const value = grab.value * 2 ** ((point.y - grab.point.y) / lever)
      return clamped(roundedTo(value, roundedStep(Math.abs(value) / 50)), bounds)
    },
    apply: (now, level) => (isFamilyDesign(now) ? withAnalog(now, { rippleDb: -level }) : now),
  }
}

function attenuationHandle(attenuationDb: number, rippleDb: number | undefined): SpecHandle {
  const bounds = { value: -attenuationDb, min: -200, max: -Math.max(3.1, (rippleDb ?? 0) * 1.1) }
  return {
    ...bounds,
    id: 'attenuation',
    look: 'stop-level',
    label: 'Stop-band level',
    field: 'analog.attenuationDb',
    orientation: 'vertical',
    valueText: `${formatDb(attenuationDb, 1)} down`,
    next: (size, direction) => steppedBy(bounds, 1, size, direction),
    under: (point, grab, frame, fine) => {
      const y = frame.y.magnitude
      const at = point.y - grab.offset.y
      const step = roundedStep(valuePerPixel(y, at)) * (fine ? 0.1 : 1)
      return clamped(roundedTo(y.toValue(at), step), bounds)
    },
    apply: (now, level) => (isFamilyDesign(now) ? withAnalog(now, { attenuationDb: -level }) : now),
  }
}

function orderHandle(order: number): SpecHandle {
  const bounds = { value: order, min: 1, max: MOST_ORDER }
  return {
    ...bounds,
    id: 'order',
    look: 'slope',
    label: 'Order, by the slope',
    field: 'analog.order',
    orientation: 'vertical',
    valueText: `order ${order}`,
    next: (size, direction) => clamped(order + direction * (size === 'coarse' ? 4 : 1), bounds),
    under: () => null,
    apply: (now, value) => (isFamilyDesign(now) ? withAnalog(now, { order: Math.round(value) }) : now),
  }
}

function holdHandle(holdHz: number, sampleRateHz: number): SpecHandle {
  const bounds = { value: holdHz, min: LEAST_HZ, max: highestEdgeHz(sampleRateHz) }
  return {
    ...bounds,
    id: 'hold',
    look: 'hold',
    label: 'Held frequency',
    field: 'how.hold',
    orientation: 'horizontal',
    valueText: `held at ${formatHz(holdHz)}`,
    next: (size, direction) => steppedDigit(bounds, size, direction),
    under: (point, grab, frame, fine) => clamped(frequencyUnder(point, grab, frame, fine), bounds),
    apply: (now, hz) => (isFirDesign(now) ? now : withHold(now, hz)),
  }
}

/** Up to where the fitted version is fitted. */
function fitHandle(upToHz: number, sampleRateHz: number): SpecHandle {
  const bounds = { value: upToHz, min: shortened(sampleRateHz * 1e-3, 1), max: highestEdgeHz(sampleRateHz) }
  return {
    ...bounds,
    id: 'fit',
    look: 'fit',
    label: 'Fitted up to',
    field: 'how.upToHz',
    orientation: 'horizontal',
    valueText: `fitted up to ${formatHz(upToHz)}`,
    next: (size, direction) => steppedDigit(bounds, size, direction),
    under: (point, grab, frame, fine) => clamped(frequencyUnder(point, grab, frame, fine), bounds),
    apply: (now, hz) =>
      isFirDesign(now) || now.how.method !== 'fitted' ? now : { ...now, how: { ...now.how, upToHz: hz } },
  }
}

/** The fold line stands at half the sampling rate; the slider's value is the rate itself. */
function foldHandle(spec: DesignSpec): SpecHandle {
  const { sampleRateHz } = spec
  const least = shortened(highestTurn(spec) / HIGHEST_EDGE_PART, 1)
  const bounds = {
    value: sampleRateHz,
    min: least,
    max: shortened(lowestEdgeHz(spec) / LEAST_PART_OF_RATE / 1.001, -1),
  }
  return {
    ...bounds,
    id: 'fold',
    look: 'fold',
    label: 'Sampling rate, by the fold line at half of it',
    field: 'sampleRateHz',
    orientation: 'horizontal',
    valueText: `sampled at ${formatHz(sampleRateHz)}, folds at ${formatHz(sampleRateHz / 2)}`,
    next: (size, direction) => steppedDigit(bounds, size, direction),
    under: (point, grab, frame, fine) => clamped(2 * frequencyUnder(point, grab, frame, fine), bounds),
    apply: withRate,
  }
}

/** The highest frequency of the statement that must stay below half the rate. */
function highestTurn(spec: DesignSpec): number {
  if (isFirDesign(spec)) return spec.fir.kind === 'half-band' ? spec.sampleRateHz * 1e-3 : highestFirEdge(spec)
  const { how } = spec
  const held = how.method === 'bilinear' && typeof how.hold === 'number' ? how.hold : 0
  const fitted = how.method === 'fitted' ? how.upToHz : 0
  return Math.max(isFamilyDesign(spec) ? Math.max(...spec.analog.edgesHz) : 0, held, fitted, spec.sampleRateHz * 1e-3)
}

const highestFirEdge = ({ fir, sampleRateHz }: FirDesign): number =>
  Math.max(...fir.bands.flatMap(({ fromHz, toHz }) => [fromHz, toHz]).filter((hz) => hz < sampleRateHz / 2))
