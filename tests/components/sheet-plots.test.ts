import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { groundMarks } from '@/components/plot/ground'
import { placedHandles } from '@/components/studio/stack/handle-places'
import { specHandles, type SpecHandle } from '@/components/studio/stack/spec-handles'
import { leastDrawnDelay, sheetGrounds } from '@/components/studio/sheet/sheet-grounds'
import { designSpecSchema, groupDelay, type DesignSpec, type Requirement } from '@/dsp'
import { withSheet } from '@/lib/designs/sheet-edits'
import { plainSpec, stackOf } from './stack-fixture'

const view = { departureUnit: 'degrees', removeDelay: false } as const
const noDelay = () => null
const grounds = (...lines: Requirement[]) => sheetGrounds(lines, view, noDelay)

describe('the grounds of a sheet', () => {
  it('leave a pass band its tolerance and take the rest of it', () => {
    expect(grounds({ kind: 'pass', fromHz: 10, toHz: 120, withinDb: 0.5 })).toEqual([
      { plot: 'magnitude', kind: 'limit', fromHz: 10, toHz: 120, fromY: 0.5, toY: Infinity },
      { plot: 'magnitude', kind: 'limit', fromHz: 10, toHz: 120, fromY: -Infinity, toY: -0.5 },
    ])
  })
  it('lie over the level of a stop band, without an end where it has none', () => {
    expect(grounds({ kind: 'stop', fromHz: 180, attenuationDb: 60 })).toEqual([
      { plot: 'magnitude', kind: 'limit', fromHz: 180, toHz: Infinity, fromY: -60, toY: Infinity },
    ])
  })
  it('are narrow about a tone', () => {
    const [above, below] = grounds({ kind: 'keep-tone', hz: 100, withinDb: 1 })
    expect(above).toMatchObject({ fromHz: 99, toHz: 101, fromY: 1 })
    expect(below).toMatchObject({ fromHz: 99, toHz: 101, toY: -1 })
    expect(grounds({ kind: 'lose-tone', hz: 100, attenuationDb: 30 })).toHaveLength(1)
  })
  it('show departures in their own unit and treatment of delay alone', () => {
    const phase: Requirement = { kind: 'phase-departure', upToHz: 100, withinDegrees: 2, removeDelay: true }
    const level: Requirement = { kind: 'magnitude-departure', upToHz: 100, withinDb: 0.2 }
    const seen = (departureUnit: 'db' | 'degrees' | 'microseconds', removeDelay: boolean) =>
      sheetGrounds([phase, level], { departureUnit, removeDelay }, noDelay).map(({ fromY, toY }) => [fromY, toY])
    expect(seen('degrees', false)).toEqual([])
    expect(seen('degrees', true)).toEqual([
      [2, Infinity],
      [-Infinity, -2],
    ])
    expect(seen('db', true)).toEqual([
      [0.2, Infinity],
      [-Infinity, -0.2],
    ])
    expect(seen('microseconds', true)).toEqual([])
  })
  it('stand over the least delay drawn in the band of a spread', () => {
    const spread: Requirement = { kind: 'delay-spread', fromHz: 20, toHz: 100, atMostSeconds: 1e-3 }
    const { traces, versions } = stackOf(plainSpec)
    const [ground] = sheetGrounds([spread], view, (from, to) => leastDrawnDelay(traces, from, to))
    const filter = versions.digital.find(({ stated }) => stated)?.filter
    if (!filter) throw new Error('nothing is stated')
    // The delay of this low-pass rises over the band: it is least where the band begins.
    const least = groupDelay(filter, [20])[0] ?? Number.NaN
    expect(ground?.plot).toBe('group-delay')
    expect(Number(ground?.fromY)).toBeCloseTo(least + 1e-3, 6)
    expect(sheetGrounds([spread], view, noDelay)).toEqual([])
  })
  it('are none for what no plot shows', () => {
    expect(
      grounds(
        { kind: 'overshoot', atMostPercent: 5 },
        { kind: 'settling', atMostSeconds: 1, withinPercent: 2 },
        { kind: 'cost', atMostMultiplies: 9 },
        { kind: 'word-length', bits: 16, withinDb: 0.1 },
      ),
    ).toEqual([])
  })
  it('are drawn from 0 Hz on over a logarithmic axis, with their upright end', () => {
    const { frame } = stackOf(plainSpec)
    const [above] = grounds({ kind: 'pass', fromHz: 0, toHz: 60, withinDb: 0.5 })
    if (!above) throw new Error('no ground')
    const marks = JSON.stringify(groundMarks(above, frame.layout.plots.magnitude, frame.x, frame.y.magnitude))
    expect(marks).toContain('hatch')
    expect(marks).not.toContain('null')
  })
})

const masked = withSheet(plainSpec, [
  { kind: 'pass', fromHz: 0, toHz: 60, withinDb: 0.5 },
  { kind: 'cost', atMostMultiplies: 20 },
  { kind: 'stop', fromHz: 200, attenuationDb: 30 },
  { kind: 'stop', fromHz: 12, toHz: 20, attenuationDb: 20 },
  { kind: 'keep-tone', hz: 50, withinDb: 0.1 },
])
const limits = (spec: DesignSpec): readonly SpecHandle[] =>
  specHandles(spec).filter(({ id }) => id.startsWith('sheet-'))
const handleOf = (spec: DesignSpec, id: string): SpecHandle => {
  const found = limits(spec).find((handle) => handle.id === id)
  if (!found) throw new Error(`no handle ${id}`)
  return found
}
const grabAt = (handle: SpecHandle, y = 0) => ({ point: { x: 0, y }, offset: { x: 0, y: 0 }, value: handle.value })

describe('the handles of a sheet', () => {
  it('are the edges and the levels that have a place on the magnitude plot, after all others', () => {
    expect(limits(masked).map(({ id }) => id)).toEqual([
      'sheet-0-to',
      'sheet-0-level',
      'sheet-2-from',
      'sheet-2-level',
      'sheet-3-from',
      'sheet-3-to',
      'sheet-3-level',
      'sheet-4-to',
      'sheet-4-level',
    ])
    const order = specHandles(masked).map(({ id }) => id)
    expect(order.indexOf('fold')).toBe(order.indexOf('sheet-0-to') - 1)
    expect(specHandles(plainSpec).map(({ id }) => id)).toEqual(order.slice(0, order.indexOf('fold') + 1))
  })

  it('say their line, what they do and how far', () => {
    expect(limits(masked).map(({ valueText }) => valueText.replaceAll('\u2009', ' '))).toEqual([
      'requirement 1: keep up to 60 Hz',
      'requirement 1: keep within 0.50 dB',
      'requirement 3: lose from 200 Hz',
      'requirement 3: lose by 30.0 dB',
      'requirement 4: lose from 12 Hz',
      'requirement 4: lose up to 20 Hz',
      'requirement 4: lose by 20.0 dB',
      'requirement 5: keep the tone at 50 Hz',
      'requirement 5: keep within 0.10 dB',
    ])
  })

  it('put their own value back unchanged, and make a well-formed sheet of any step or end', () => {
    for (const handle of limits(masked)) {
      expect(handle.apply(masked, handle.value)).toEqual(masked)
      const values = [handle.min, handle.max, ...([1, -1] as const).map((way) => handle.next('coarse', way))]
      for (const value of values) {
        const next = handle.apply(masked, value)
        expect(next, `${handle.id} at ${value}`).not.toEqual(masked)
        expect(designSpecSchema.safeParse(next).success).toBe(true)
      }
    }
  })

  it('follow the pointer by the inverse scale, a tolerance by a lever', () => {
    const { frame } = stackOf(masked)
    const edge = handleOf(masked, 'sheet-0-to')
    expect(edge.under({ x: frame.x.toPixel(87.3), y: 0 }, grabAt(edge), frame, false)).toBeCloseTo(87.2, 0)
    // A band can't end below where it begins, nor above half the rate.
    const upper = handleOf(masked, 'sheet-3-to')
    expect(upper.under({ x: -500, y: 0 }, grabAt(upper), frame, false)).toBe(12.01)
    expect(upper.under({ x: 9000, y: 0 }, grabAt(upper), frame, false)).toBe(300)
    const level = handleOf(masked, 'sheet-2-level')
    const y = frame.y.magnitude.toPixel(-42)
    expect(level.under({ x: 0, y }, grabAt(level, y), frame, false)).toBeCloseTo(-42, 0)
    const tolerance = handleOf(masked, 'sheet-0-level')
    expect(tolerance.under({ x: 0, y: 136 }, grabAt(tolerance, 100), frame, false)).toBeCloseTo(-1, 6)
  })

  it('are gone with what a lower rate leaves behind, while the sheet itself stays', () => {
    const slow = { ...masked, sampleRateHz: 360 }
    expect(limits(slow).map(({ id }) => id)).not.toContain('sheet-2-from')
    expect(slow.sheet).toHaveLength(5)
  })

  it('stand on the sheet, clear of each other', () => {
    fc.assert(
      fc.property(
        fc.array(fc.double({ min: 1, max: 290, noNaN: true }), { minLength: 1, maxLength: 4 }),
        fc.constantFrom(946, 500),
        (tones, width) => {
          const spec = withSheet(
            plainSpec,
            tones.map((hz) => ({ kind: 'keep-tone', hz, withinDb: 0.5 }) as const),
          )
          const { traces, frame } = stackOf(spec, {}, width)
          const edges = placedHandles(specHandles(spec), spec, traces, frame).filter(
            ({ handle }) => handle.look === 'limit-edge',
          )
          const box = frame.layout.plots.magnitude
          for (const { place } of edges) {
            expect(place.y).toBeGreaterThan(box.top)
            expect(place.y).toBeLessThan(box.bottom)
          }
          const pairs = edges.flatMap((one, at) =>
            edges.slice(at + 1).map((other) => [one.place, other.place] as const),
          )
          for (const [one, other] of pairs) {
            expect(Math.max(Math.abs(one.x - other.x), Math.abs(one.y - other.y))).toBeGreaterThanOrEqual(24)
          }
        },
      ),
      { numRuns: 20 },
    )
  })
})
