import { describe, expect, it } from 'vitest'
import { z } from 'zod'
import { bilinearTransform } from '@/dsp/discretise/bilinear'
import { matchedZ } from '@/dsp/discretise/matched-z'
import { fromHalf, halve, toHalf } from '@/dsp/forms/zeros-poles-gain'
import type { Complex, Filter } from '@/dsp'
import iec from '../reference/iec61672_weightings_acz.json'
import iso from '../reference/iso8041_human_vibration_weightings.json'
import { analogAt, decibels, digitalAt, size } from '../helpers/dsp'

/*
 * Filters that no family of ours makes, built from the poles and zeros that standards give and brought to a sampling rate by the same
 * transforms: published responses and their tolerances judge the transforms.
 */

const TWO_PI = 2 * Math.PI
const real = (hz: number): Complex => ({ re: -TWO_PI * hz, im: 0 })
const origin: Complex = { re: 0, im: 0 }

function analogFilter(
  zeros: readonly Complex[],
  poles: readonly Complex[],
  referenceHz: number,
  level: number,
): Filter<'s'> {
  const unit = fromHalf('s', { zeros: halve(zeros), poles: halve(poles), gain: 1 })
  return { ...unit, gain: level / size(analogAt(unit, referenceHz)) }
}

describe('A and C weighting (IEC 61672-1:2013, annex E and table 3)', () => {
  const constant = (name: string) => iec.annex_E.constants.find((entry) => entry.name === name)?.value ?? Number.NaN
  const [f1, f2, f3, f4] = [constant('f1'), constant('f2'), constant('f3'), constant('f4')]
  const filters = {
    A: analogFilter(
      [origin, origin, origin, origin],
      [real(f1), real(f1), real(f2), real(f3), real(f4), real(f4)],
      1000,
      1,
    ),
    C: analogFilter([origin, origin], [real(f1), real(f1), real(f4), real(f4)], 1000, 1),
  }
  const limits = z.object({ class1: z.tuple([z.number().nullable(), z.number().nullable()]) })

  it.each(['A', 'C'] as const)('%s: the analog filter has the design goals at every row', (weighting) => {
    for (const row of iec.table_3) {
      const level = decibels(analogAt(filters[weighting], row.exact_hz))
      expect(Math.abs(level - row.value[weighting])).toBeLessThan(0.051)
      expect(Math.abs(level - row.computed[weighting])).toBeLessThan(1e-3)
    }
  })

  it.each(['A', 'C'] as const)('%s: bilinear at 192 kHz is inside class 1 everywhere, re 1 kHz', (weighting) => {
    const rate = 192000
    const digital = bilinearTransform(filters[weighting], rate, 1000)
    const at = (hz: number) => decibels(digitalAt(digital, (TWO_PI * hz) / rate))
    for (const row of iec.table_3) {
      const [lower, upper] = limits.parse(row.tolerance).class1
      const error = at(row.exact_hz) - at(1000) - row.value[weighting]
      if (upper !== null) expect(error).toBeLessThan(upper)
      if (lower !== null) expect(error).toBeGreaterThan(lower)
    }
    expect(at(1000)).toBeCloseTo(0, 9)
  })

  it.each(['A', 'C'] as const)('%s: matched-z at 192 kHz is inside class 1 everywhere, re 1 kHz', (weighting) => {
    const rate = 192000
    const { zeros, poles, gain } = toHalf(filters[weighting])
    const perSample = (root: Complex) => ({ re: root.re / rate, im: root.im / rate })
    const excess = filters[weighting].poles.length - filters[weighting].zeros.length
    const scaled = { zeros: zeros.map(perSample), poles: poles.map(perSample), gain: gain / rate ** excess }
    const digital = fromHalf('z', matchedZ(scaled, (TWO_PI * 1000) / rate).form)
    const at = (hz: number) => decibels(digitalAt(digital, (TWO_PI * hz) / rate))
    for (const row of iec.table_3) {
      const [lower, upper] = limits.parse(row.tolerance).class1
      const error = at(row.exact_hz) - at(1000) - row.value[weighting]
      if (upper !== null) expect(error).toBeLessThan(upper)
      if (lower !== null) expect(error).toBeGreaterThan(lower)
    }
  })
})

describe('human-vibration weightings (ISO 8041-1:2017, tables 3, 5 and B.1–B.9)', () => {
  const parameters = z
    .object({
      f1: z.number(),
      Q1: z.number(),
      f2: z.number(),
      Q2: z.number(),
      f3: z.number().nullable(),
      f4: z.number().nullable(),
      Q4: z.number(),
      f5: z.number().nullable(),
      Q5: z.number(),
      f6: z.number().nullable(),
      Q6: z.number(),
      K: z.number(),
    })
    .strict()

  /** Roots of 1 + s/(Q·ω) + (s/ω)². */
  function resonance(hz: number, q: number): Complex[] {
    const omega = TWO_PI * hz
    const re = -omega / (2 * q)
    const square = omega * omega - re * re
    if (square < 0)
      return [
        { re: re + Math.sqrt(-square), im: 0 },
        { re: re - Math.sqrt(-square), im: 0 },
      ]
    return [
      { re, im: Math.sqrt(square) },
      { re, im: -Math.sqrt(square) },
    ]
  }

  function weighting(row: (typeof iso.table_3_parameters)[number]): Filter<'s'> {
    const p = parameters.parse(row.value)
    const zeros: Complex[] = [origin, origin]
    const poles = [...resonance(p.f1, p.Q1), ...resonance(p.f2, p.Q2)]
    // Hh → s²/(s² + …): gain 1; Hl: gain ω₂².
    let gain = p.K * (TWO_PI * p.f2) ** 2
    if (p.f4 !== null) {
      poles.push(...resonance(p.f4, p.Q4))
      gain *= (TWO_PI * p.f4) ** 2
      if (p.f3 !== null) {
        zeros.push(real(p.f3))
        gain /= TWO_PI * p.f3
      }
    }
    if (p.f5 !== null && p.f6 !== null) {
      zeros.push(...resonance(p.f5, p.Q5))
      poles.push(...resonance(p.f6, p.Q6))
      // (ω₆/ω₅)² of the quadratics against (ω₅/ω₆)² of the definition.
    }
    return fromHalf('s', { zeros: halve(zeros), poles: halve(poles), gain })
  }

  const goals = z.record(
    z.string(),
    z.array(
      z.object({
        n: z.number(),
        exact_hz: z.number(),
        value: z.number(),
        computed: z.number(),
        tolerance: z.tuple([z.number().nullable(), z.number()]),
      }),
    ),
  )

  it.each(iso.table_3_parameters.map((row) => [row.weighting, row] as const))(
    '%s: analog goals to four digits, digital inside the limits',
    (name, row) => {
      const analog = weighting(row)
      const rate = 16000
      const digital = bilinearTransform(analog, rate, 'none')
      const rows = goals.parse(iso.annex_B)[name] ?? []
      expect(rows.length).toBeGreaterThan(20)
      for (const goal of rows) {
        const factor = size(analogAt(analog, goal.exact_hz))
        expect(Math.abs(factor / goal.computed - 1)).toBeLessThan(2e-6)
        expect(Math.abs(factor / goal.value - 1)).toBeLessThan(6e-4)
        const error = 100 * (size(digitalAt(digital, (TWO_PI * goal.exact_hz) / rate)) / goal.value - 1)
        const [lower, upper] = goal.tolerance
        expect(error).toBeLessThan(upper)
        if (lower !== null) expect(error).toBeGreaterThan(lower)
        if (goal.exact_hz < rate / 100) expect(Math.abs(error)).toBeLessThan(1)
      }
    },
  )
})
