import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { contradictions, requirementTemplates, sheetSchema, DesignError, type Requirement } from '@/dsp'
import practice from '../../reference/adc_antialias_decimation.json'

const RATE = 1000
const pass: Requirement = { kind: 'pass', fromHz: 0, toHz: 100, withinDb: 1 }

const between = (low: number, high: number) => fc.double({ min: low, max: high, noNaN: true })

describe('contradictions', () => {
  it('names a pass and a stop band that overlap, and where', () => {
    const [found, ...rest] = contradictions([pass, { kind: 'stop', fromHz: 80, attenuationDb: 40 }], RATE)
    expect(rest).toEqual([])
    expect(found).toMatchObject({ first: 0, second: 1 })
    expect(found?.reason).toBe(
      'Line 1 (pass 0 … 100 Hz within ±1 dB) and line 2 (stop 80 Hz … half the rate by 40 dB) both speak of 80 … 100 Hz: no filter is within 1 dB of 0 dB and 40 dB down there.',
    )
  })

  it('names bands that touch, since a response doesn’t jump', () => {
    const found = contradictions([{ kind: 'stop', fromHz: 100, toHz: 200, attenuationDb: 40 }, pass], RATE)
    expect(found).toHaveLength(1)
    expect(found[0]?.reason).toMatch(/meet at 100 Hz with no room/)
  })

  it('names tones in the wrong bands and tones on tones', () => {
    const sheet: Requirement[] = [
      pass,
      { kind: 'stop', fromHz: 200, attenuationDb: 40 },
      { kind: 'lose-tone', hz: 50, attenuationDb: 30 },
      { kind: 'keep-tone', hz: 300, withinDb: 1 },
      { kind: 'keep-tone', hz: 150, withinDb: 1 },
      { kind: 'lose-tone', hz: 150, attenuationDb: 30 },
    ]
    expect(contradictions(sheet, RATE).map(({ first, second }) => [first, second])).toEqual([
      [0, 2],
      [1, 3],
      [4, 5],
    ])
  })

  it('names a line beyond half the rate alone', () => {
    const sheet: Requirement[] = [
      { kind: 'phase-departure', upToHz: 501, withinDegrees: 1, removeDelay: true },
      { kind: 'stop', fromHz: 500, attenuationDb: 40 },
      { kind: 'delay', fromHz: 30, toHz: 30, atMostSeconds: 1 },
      { kind: 'delay-spread', fromHz: 30, toHz: 30, atMostSeconds: 1 },
    ]
    const found = contradictions(sheet, RATE)
    expect(found.map(({ first, second }) => [first, second])).toEqual([
      [0, null],
      [1, null],
      [3, null],
    ])
    expect(found[0]?.reason).toMatch(/501 Hz.*500 Hz/)
  })

  it('lets stand what can be met: loose bands on one another, and bands with room between', () => {
    const loose: Requirement[] = [
      { kind: 'pass', fromHz: 0, toHz: 100, withinDb: 6 },
      { kind: 'stop', fromHz: 50, toHz: 80, attenuationDb: 3 },
    ]
    expect(contradictions(loose, RATE)).toEqual([])
    expect(contradictions([pass, { kind: 'stop', fromHz: 100.001, attenuationDb: 80 }], RATE)).toEqual([])
  })

  it('names the very two lines that overlap, wherever they stand among lines that agree', () => {
    fc.assert(
      fc.property(
        between(20, 200),
        between(1.2, 2),
        between(0, 1),
        fc.shuffledSubarray([0, 1, 2, 3, 4], { minLength: 5, maxLength: 5 }),
        (edge, room, part, order) => {
          const lines: Requirement[] = [
            { kind: 'pass', fromHz: 0, toHz: edge, withinDb: 1 },
            { kind: 'stop', fromHz: edge * room, attenuationDb: 40 },
            { kind: 'overshoot', atMostPercent: 10 },
            { kind: 'keep-tone', hz: edge / 2, withinDb: 0.5 },
            { kind: 'lose-tone', hz: part * edge || edge, attenuationDb: 20 },
          ]
          const sheet = order.map((index) => lines[index]!)
          const wrong = [order.indexOf(0), order.indexOf(4)].sort((a, b) => a - b)
          const found = contradictions(sheet, RATE).map(({ first, second }) => [first, second])
          expect(found).toContainEqual(wrong)
          expect(found.every((pair) => pair.includes(order.indexOf(4)))).toBe(true)
        },
      ),
      { numRuns: 60 },
    )
  })
})

describe('templates', () => {
  it('are sheets without contradictions at the rates they are for', () => {
    for (const template of requirementTemplates) {
      for (const sampleRateHz of [2560, 10_240, 51_200]) {
        const sheet = template.sheet({ sampleRateHz })
        expect(sheetSchema.safeParse(sheet).success, template.id).toBe(true)
        expect(contradictions(sheet, sampleRateHz), template.id).toEqual([])
      }
      expect(template.note).toMatch(/licensed practice/)
      expect(template.source.length).toBeGreaterThan(10)
    }
  })

  it('ask of an N-bit converter what quantisation noise asks, at the first frequency that folds onto the band', () => {
    const template = requirementTemplates.find(({ id }) => id === 'anti-alias')
    for (const { bits, value } of practice.attenuation_needed_at_fs_minus_fmax) {
      const [, stop] = template?.sheet({ sampleRateHz: 51_200, bandHz: 1000, bits }) ?? []
      expect(stop).toMatchObject({ kind: 'stop', fromHz: 1560 })
      expect(stop?.kind === 'stop' ? stop.attenuationDb : 0).toBeCloseTo(
        value.full_scale_alias_below_quantisation_noise_db,
        5,
      )
    }
  })

  it('refuse a rate or a band that leaves no room, with the nearest that does', () => {
    const of = (id: string) => requirementTemplates.find((each) => each.id === id)!
    const nearest = (run: () => unknown) => {
      try {
        run()
      } catch (error) {
        if (error instanceof DesignError) return error.nearest
      }
      return undefined
    }
    expect(nearest(() => of('velocity').sheet({ sampleRateHz: 1000 }))).toBe(2560)
    const band = nearest(() => of('structural-modes').sheet({ sampleRateHz: 100, bandHz: 50 }))
    expect(contradictions(of('structural-modes').sheet({ sampleRateHz: 100, bandHz: Number(band) }), 100)).toEqual([])
  })
})
