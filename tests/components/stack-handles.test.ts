import { describe, expect, it } from 'vitest'
import { sliderKey, steppedBy, steppedDigit } from '@/components/plot/handle'
import { placedHandles } from '@/components/studio/stack/handle-places'
import { orderFinder } from '@/components/studio/stack/slope'
import { specHandles, type SpecHandle } from '@/components/studio/stack/spec-handles'
import { designFromSpec, designAnalog, magnitudeDb, type FamilyDesign } from '@/dsp'
import { ellipticSpec, plainSpec, stackOf } from './stack-fixture'

const handleOf = (spec: FamilyDesign, id: string): SpecHandle => {
  const found = specHandles(spec).find((handle) => handle.id === id)
  if (!found) throw new Error(`no handle ${id}`)
  return found
}
const grabAt = (handle: SpecHandle, x: number, y: number) => ({
  point: { x, y },
  offset: { x: 0, y: 0 },
  value: handle.value,
})

const kinds: readonly FamilyDesign[] = [
  plainSpec,
  ellipticSpec,
  {
    ...plainSpec,
    analog: { family: 'chebyshev1', response: 'highpass', order: 5, edgesHz: [0.5], rippleDb: 1 },
    sampleRateHz: 200,
  },
  {
    ...plainSpec,
    analog: { family: 'chebyshev2', response: 'bandstop', order: 3, edgesHz: [45, 55], attenuationDb: 40 },
    sampleRateHz: 1000,
  },
  {
    ...plainSpec,
    analog: { family: 'bessel', response: 'lowpass', order: 6, edgesHz: [80], normalization: 'delay' },
    how: { method: 'impulse-invariant' },
  },
]

describe('handles of a spec', () => {
  it('are those parts that the family has', () => {
    const ids = (spec: FamilyDesign) => specHandles(spec).map(({ id }) => id)
    expect(ids(plainSpec)).toEqual(['edge-0', 'order', 'fold'])
    expect(ids(ellipticSpec)).toEqual(['edge-0', 'edge-1', 'ripple', 'attenuation', 'order', 'hold', 'fold'])
  })

  it('put their own value back unchanged', () => {
    for (const spec of kinds)
      for (const handle of specHandles(spec)) expect(handle.apply(spec, handle.value)).toEqual(spec)
  })

  it('have bounds that still make a design', () => {
    for (const spec of kinds) {
      for (const handle of specHandles(spec)) {
        if (handle.id === 'order') continue
        for (const value of [handle.min, handle.max]) {
          expect(() => designFromSpec(handle.apply(spec, value)), `${handle.id} at ${value}`).not.toThrow()
        }
      }
    }
  })

  it('step to other values inside their bounds, up and down', () => {
    for (const spec of kinds) {
      for (const handle of specHandles(spec)) {
        for (const size of ['fine', 'plain', 'coarse'] as const) {
          const up = handle.next(size, 1)
          const down = handle.next(size, -1)
          expect(up).toBeGreaterThanOrEqual(handle.value)
          expect(up).toBeLessThanOrEqual(handle.max)
          expect(down).toBeLessThanOrEqual(handle.value)
          expect(down).toBeGreaterThanOrEqual(handle.min)
          expect(up).toBeGreaterThan(down)
        }
      }
    }
  })

  it('speak their unit', () => {
    const said = specHandles(ellipticSpec).map(({ valueText }) => valueText.replaceAll('\u2009', ' '))
    expect(said).toEqual([
      '400 Hz',
      '900 Hz',
      'ripple 0.50 dB',
      '50.0 dB down',
      'order 3',
      'held at 600 Hz',
      'sampled at 4 kHz, folds at 2 kHz',
    ])
  })
})

describe('dragging by the inverse scale', () => {
  const { frame } = stackOf(plainSpec)

  it('puts the edge under the pointer, rounded to what a pixel can tell', () => {
    const edge = handleOf(plainSpec, 'edge-0')
    const x = frame.x.toPixel(87.3)
    expect(edge.under({ x, y: 0 }, grabAt(edge, 0, 0), frame, false)).toBeCloseTo(87.2, 0)
    const fine = edge.under({ x, y: 0 }, grabAt(edge, 0, 0), frame, true) ?? 0
    expect(Math.abs(fine - 87.3)).toBeLessThan(0.05)
  })

  it('stops the edge below half the rate and the fold line above the edge', () => {
    const edge = handleOf(plainSpec, 'edge-0')
    expect(edge.under({ x: 5000, y: 0 }, grabAt(edge, 0, 0), frame, false)).toBe(297)
    const fold = handleOf(plainSpec, 'fold')
    expect(fold.under({ x: -500, y: 0 }, grabAt(fold, 0, 0), frame, false)).toBe(242.5)
  })

  it('doubles the rate when the fold line is pulled to twice its frequency', () => {
    const fold = handleOf(plainSpec, 'fold')
    const x = frame.x.toPixel(400)
    expect(fold.under({ x, y: 0 }, grabAt(fold, 0, 0), frame, false)).toBe(800)
  })

  it('moves the stop-band level with the pointer, and the ripple by a lever', () => {
    const { frame: elliptic } = stackOf(ellipticSpec)
    const level = handleOf(ellipticSpec, 'attenuation')
    const y = elliptic.y.magnitude.toPixel(-36)
    expect(level.under({ x: 0, y }, grabAt(level, 0, y), elliptic, false)).toBeCloseTo(-36, 0)
    const ripple = handleOf(ellipticSpec, 'ripple')
    expect(ripple.under({ x: 0, y: 136 }, grabAt(ripple, 0, 100), elliptic, false)).toBeCloseTo(-1, 6)
    expect(ripple.under({ x: 0, y: 64 }, grabAt(ripple, 0, 100), elliptic, false)).toBeCloseTo(-0.25, 6)
  })
})

describe('the slope', () => {
  it('gives the order whose curve passes through the pointer', () => {
    for (const spec of kinds) {
      const find = orderFinder(spec)
      for (const order of [2, 5, 9]) {
        const { edgesHz, response } = spec.analog
        const hz =
          response === 'highpass'
            ? (edgesHz[0] ?? 1) * 0.6
            : response === 'bandstop'
              ? 46.5
              : Math.max(...edgesHz) * 1.4
        const db = magnitudeDb(designAnalog({ ...spec.analog, order }), [hz])[0] ?? 0
        const found =
          magnitudeDb(designAnalog({ ...spec.analog, order: find(hz, db, spec.analog.order) }), [hz])[0] ?? 0
        // Where levels coincide, any order on the level will do.
        expect(Math.abs(found - db)).toBeLessThan(0.05)
      }
    }
  })

  it('steepens when it is pulled down', () => {
    const find = orderFinder(plainSpec)
    const orders = [-5, -10, -20, -40, -80].map((db) => find(240, db, 4))
    expect(orders).toEqual([1, 2, 3, 7, 13])
  })
})

describe('places of the handles', () => {
  it('are on the sheet for every kind of design, by log and linear axis, wide and narrow', () => {
    for (const spec of kinds) {
      for (const logFrequency of [true, false]) {
        for (const width of [946, 358]) {
          const { traces, frame } = stackOf(spec, { logFrequency, fromHz: logFrequency ? 0.1 : 0 }, width)
          const placed = placedHandles(specHandles(spec), spec, traces, frame)
          expect(placed).toHaveLength(specHandles(spec).length)
          for (const { handle, place } of placed) {
            expect(place.x, handle.id).toBeGreaterThanOrEqual(frame.layout.plots.magnitude.left)
            expect(place.x, handle.id).toBeLessThanOrEqual(width)
            expect(place.y, handle.id).toBeGreaterThan(0)
            expect(place.y, handle.id).toBeLessThan(frame.layout.height)
          }
        }
      }
    }
  })

  it('put the corner on the analog curve, 3 dB down', () => {
    const { spec, traces, frame } = stackOf(plainSpec)
    const [corner] = placedHandles(specHandles(spec), spec, traces, frame)
    expect(corner?.place.x).toBeCloseTo(frame.x.toPixel(120), 1)
    expect(corner?.place.y).toBeCloseTo(frame.y.magnitude.toPixel(-10 * Math.log10(2)), 1)
  })

  it('wait at the side when their value is out of view, and say which', () => {
    const { spec, traces, frame } = stackOf(plainSpec, { fromHz: 1, toHz: 60 })
    const outside = Object.fromEntries(
      placedHandles(specHandles(spec), spec, traces, frame).map(({ handle, place }) => [handle.id, place.outside]),
    )
    expect(outside).toMatchObject({ 'edge-0': 'right', fold: 'right' })
  })
})

describe('keys of a slider', () => {
  it('follow the ARIA pattern', () => {
    const none = { shift: false, alt: false }
    expect(sliderKey('ArrowUp', none)).toEqual({ kind: 'step', direction: 1, size: 'plain' })
    expect(sliderKey('ArrowLeft', { shift: true, alt: false })).toEqual({ kind: 'step', direction: -1, size: 'coarse' })
    expect(sliderKey('ArrowDown', { shift: false, alt: true })).toEqual({ kind: 'step', direction: -1, size: 'fine' })
    expect(sliderKey('PageUp', none)).toEqual({ kind: 'step', direction: 1, size: 'coarse' })
    expect(sliderKey('Home', none)).toEqual({ kind: 'end', which: 'min' })
    expect(sliderKey('a', none)).toBeNull()
  })

  it('step in the third digit and meet round values', () => {
    const at = (value: number) => ({ value, min: 0.001, max: 1e6 })
    expect(steppedDigit(at(120), 'plain', 1)).toBe(121)
    expect(steppedDigit(at(120), 'coarse', -1)).toBe(110)
    expect(steppedDigit(at(120), 'fine', 1)).toBe(120.1)
    expect(steppedDigit(at(123.4), 'plain', 1)).toBe(124)
    expect(steppedDigit(at(100), 'plain', -1)).toBe(99.9)
    expect(steppedDigit(at(100), 'plain', 1)).toBe(101)
    expect(steppedBy({ value: -50.3, min: -200, max: -3 }, 1, 'plain', 1)).toBe(-50)
    expect(steppedBy({ value: -3.2, min: -200, max: -3 }, 1, 'coarse', 1)).toBe(-3)
  })
})
