import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { buildSheet, type AnalogSpec, type BuildCircuit, type BuildPart, type Complex } from '@/dsp'
import { multipleFeedbackLowPass, sallenKeyHighPass, sallenKeyLowPass } from '@/dsp/chain/build-sheet-circuits'
import { seriesBetween } from '@/dsp/chain/e-series'
import { analogChain } from '../../helpers/analog-chain'
import { transferOf } from '../../helpers/nodal-analysis'
import published from '../../reference/adc_antialias_decimation.json'

const table = published.sallen_key_unity_gain_lowpass

type Four = readonly [number, number, number, number]

const partsOf = (row: (typeof table.rows)[number]): Four => [row.R1_ohm, row.R2_ohm, row.C1_feedback_F, row.C2_ground_F]

/** Published figures have nine digits, so that half a unit in the last is up to 5e-9. */
const expectRelative = (value: number, wanted: number, within = 5e-9) =>
  expect(Math.abs(value / wanted - 1)).toBeLessThan(within)

describe('closed forms of the circuits', () => {
  // Unity-gain Sallen–Key low-pass: f0, Q, sensitivities, extremes (tests/reference/adc_antialias_decimation.json).
  it.each(table.rows)('f0 and Q of $R1_ohm Ω, $R2_ohm Ω, $C1_feedback_F F, $C2_ground_F F', (row) => {
    const { f0Hz, q } = sallenKeyLowPass(...partsOf(row))
    expectRelative(f0Hz, row.value.f0_hz)
    expectRelative(q, row.value.Q)
  })

  it.each(table.rows)('sensitivities at $R1_ohm Ω, $R2_ohm Ω, $C1_feedback_F F, $C2_ground_F F', (row) => {
    const step = 1e-5
    const names = ['R1', 'R2', 'C1', 'C2'] as const
    names.forEach((name, k) => {
      const moved = (factor: number) => {
        const [r1, r2, c1, c2] = partsOf(row).map((part, at) => (at === k ? part * factor : part)) as unknown as Four
        return sallenKeyLowPass(r1, r2, c1, c2)
      }
      const [above, below] = [moved(1 + step), moved(1 - step)]
      expect(Math.log(above.f0Hz / below.f0Hz) / (2 * step)).toBeCloseTo(row.value.S_f0[name], 6)
      expect(Math.log(above.q / below.q) / (2 * step)).toBeCloseTo(row.value.S_Q[name], 6)
    })
  })

  it.each(table.rows)('extremes for R ± 1 % and C ± 5 % at $R1_ohm Ω, $C1_feedback_F F', (row) => {
    const nominal = sallenKeyLowPass(...partsOf(row))
    const corners = Array.from({ length: 16 }, (_, bits) => {
      const [r1, r2, c1, c2] = partsOf(row).map(
        (part, k) => part * (1 + (k < 2 ? 0.01 : 0.05) * (bits & (1 << k) ? 1 : -1)),
      ) as unknown as Four
      return sallenKeyLowPass(r1, r2, c1, c2)
    })
    const percent = (values: number[], by: number) =>
      [Math.min(...values), Math.max(...values)].map((v) => 100 * (v / by - 1))
    const f0 = percent(
      corners.map(({ f0Hz }) => f0Hz),
      nominal.f0Hz,
    )
    const q = percent(
      corners.map((corner) => corner.q),
      nominal.q,
    )
    f0.forEach((value, k) => expect(value).toBeCloseTo(row.value.f0_worst_case_R1pc_C5pc_percent[k]!, 5))
    q.forEach((value, k) => expect(value).toBeCloseTo(row.value.Q_worst_case_R1pc_C5pc_percent[k]!, 5))
  })

  it('high-pass and low-pass are dual: R and 1/C change places, and the frequency turns over', () => {
    const low = sallenKeyLowPass(8200, 18_000, 15e-9, 4.7e-9)
    const high = sallenKeyHighPass(1 / 15e-9, 1 / 4.7e-9, 1 / 8200, 1 / 18_000)
    expectRelative(high.q, low.q, 1e-14)
    expectRelative(2 * Math.PI * high.f0Hz * 2 * Math.PI * low.f0Hz, 1, 1e-14)
  })

  it('a multiple-feedback stage reaches its greatest Q for R1 = 2·R3, √(C1/C2)/(2√2)', () => {
    const qs = [0.5, 1, 1.9, 2, 2.1, 4].map((ratio) => multipleFeedbackLowPass(ratio * 1e4, 1e4, 8e-9, 1e-9).q)
    expect(Math.max(...qs)).toBe(qs[3])
    expectRelative(qs[3]!, Math.sqrt(8) / (2 * Math.SQRT2), 1e-14)
  })
})

/** The plain response that a circuit is said to have. */
function plainAt({ f0Hz, q }: Pick<BuildCircuit, 'f0Hz' | 'q'>, isLow: boolean, hz: number): Complex {
  const x = hz / f0Hz
  const [a, b] = q === null ? [1, x] : [1 - x * x, x / q]
  const [re, im] = isLow ? [1, 0] : q === null ? [0, x] : [-x * x, 0]
  const power = a * a + b * b
  return { re: (re * a + im * b) / power, im: (im * a - re * b) / power }
}

function expectCircuit(circuit: BuildCircuit, isLow: boolean): void {
  const sign = circuit.circuit === 'multiple-feedback' ? -1 : 1
  for (const ratio of [0.01, 0.3, 0.9, 1, 1.1, 3, 100]) {
    const hz = circuit.f0Hz * ratio
    const solved = transferOf(circuit.parts, hz)
    const plain = plainAt(circuit, isLow, hz)
    const size = Math.hypot(plain.re, plain.im)
    expect(Math.hypot(solved.re - sign * plain.re, solved.im - sign * plain.im)).toBeLessThan(1e-9 * size)
  }
}

const filter = (analog: Partial<AnalogSpec>): AnalogSpec => ({
  family: 'butterworth',
  response: 'lowpass',
  order: 4,
  edgesHz: [1000],
  ...analog,
})

const ohmsOf = (parts: readonly BuildPart[]) => parts.flatMap(({ ohms }) => (ohms === undefined ? [] : [ohms]))
const faradsOf = (parts: readonly BuildPart[]) => parts.flatMap(({ farads }) => (farads === undefined ? [] : [farads]))

describe('the build sheet', () => {
  it('has both circuits for every low-pass section, and they do what they say by nodal analysis', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 9 }),
        fc.double({ min: 0.3, max: 4.7, noNaN: true }),
        fc.constantFrom('E24', 'E96'),
        fc.constantFrom<AnalogSpec['family']>('butterworth', 'bessel', 'critically-damped'),
        (order, decade, series, family) => {
          const chain = analogChain({ analog: [filter({ family, order, edgesHz: [10 ** decade] })] })
          const sheet = buildSheet(chain, { series })
          expect(sheet).toHaveLength(Math.ceil(order / 2))
          for (const section of sheet) {
            expect(section.reason).toBeUndefined()
            expect(section.circuits.map(({ circuit }) => circuit)).toEqual(
              section.order === 1 ? ['rc'] : ['sallen-key', 'multiple-feedback'],
            )
            for (const circuit of section.circuits) {
              expectCircuit(circuit, true)
              expect(circuit.f0Hz / section.f0Hz - 1).toBeCloseTo(circuit.f0ErrorPercent / 100, 12)
              if (section.q !== null) expect(circuit.q! / section.q - 1).toBeCloseTo(circuit.qErrorPercent! / 100, 12)
              expect(circuit.note).toMatch(/confirmed by a circuit designer/u)
            }
          }
        },
      ),
      { numRuns: 25 },
    )
  })

  it('takes standard values alone, of the series asked for', () => {
    for (const series of ['E24', 'E96'] as const) {
      for (const capacitors of ['E12', 'E24'] as const) {
        const chain = analogChain({
          analog: [filter({ order: 7, edgesHz: [22_000] })],
          highPass: { cornerHz: 2, order: 3 },
        })
        const parts = buildSheet(chain, { series, capacitors }).flatMap(({ circuits }) =>
          circuits.flatMap((one) => one.parts),
        )
        expect(parts.length).toBeGreaterThan(30)
        const [ohms, farads] = [seriesBetween(series, 1e3, 1e6), seriesBetween(capacitors, 100e-12, 1e-6)]
        for (const value of ohmsOf(parts)) expect(ohms).toContain(value)
        for (const value of faradsOf(parts)) expect(farads).toContain(value)
      }
    }
  })

  it('misses f0 and Q by less than the parts do', () => {
    const chain = analogChain({ analog: [filter({ order: 8, edgesHz: [22_000] })] })
    for (const [series, atMost] of [
      ['E24', 0.6],
      ['E96', 0.25],
    ] as const) {
      for (const circuit of buildSheet(chain, { series }).flatMap(({ circuits }) => circuits)) {
        expect(Math.hypot(circuit.f0ErrorPercent, circuit.qErrorPercent!)).toBeLessThan(atMost)
      }
    }
  })

  it('chooses nothing that a search through every combination would better', () => {
    const ohms = seriesBetween('E24', 1e3, 1e6)
    const farads = seriesBetween('E12', 100e-12, 1e-6)
    const chain = analogChain({ analog: [filter({ order: 2, edgesHz: [3400] })] })
    const [chosen] = buildSheet(chain, { series: 'E24' })[0]!.circuits
    let least = Infinity
    for (const c1 of farads) {
      for (const c2 of farads) {
        if (c1 < 1.9 * c2) continue
        for (const r1 of ohms) {
          // Given three parts, the fourth that sets f0 is known; its neighbours are the only ones worth a look.
          const r2 = 1 / ((2 * Math.PI * 3400) ** 2 * c1 * c2 * r1)
          for (const near of ohms.filter((value) => Math.abs(Math.log(value / r2)) < 0.1)) {
            const { f0Hz, q } = sallenKeyLowPass(r1, near, c1, c2)
            least = Math.min(least, Math.hypot(f0Hz / 3400 - 1, q / Math.SQRT1_2 - 1))
          }
        }
      }
    }
    const error = Math.hypot(chosen!.f0ErrorPercent, chosen!.qErrorPercent!) / 100
    expect(error).toBeLessThanOrEqual(least + 5e-4 + 1e-12)
  })

  it('has the dual for high-pass sections, and R and C for first-order ones', () => {
    const sheet = buildSheet(analogChain({ highPass: { cornerHz: 0.5, order: 3 } }), { series: 'E96' })
    expect(sheet.map(({ circuits }) => circuits.map(({ circuit }) => circuit))).toEqual([['rc'], ['sallen-key']])
    for (const { circuits } of sheet) for (const circuit of circuits) expectCircuit(circuit, false)
    const [first, second] = sheet
    expect(first!.circuits[0]!.parts.map(({ name, place }) => `${name} ${place}`)).toEqual([
      'R output to ground',
      'C input to output',
    ])
    expect(Math.abs(second!.circuits[0]!.f0ErrorPercent)).toBeLessThan(1)
  })

  it('says why there is no circuit', () => {
    const reasonOf = (analog: Partial<AnalogSpec>) =>
      buildSheet(analogChain({ analog: [filter(analog)] }), { series: 'E24' }).map(({ circuits, reason }) => [
        circuits.length,
        reason ?? '',
      ])
    expect(reasonOf({ family: 'elliptic', order: 4, rippleDb: 0.1, attenuationDb: 60 })).toEqual([
      [0, expect.stringMatching(/zeros at .* Hz/u)],
      [0, expect.stringMatching(/zeros at .* Hz/u)],
    ])
    // Q of the last factor at 1 dB: 14.2405 (handbook tables, tests/reference/proto_chebyshev.json).
    expect(reasonOf({ family: 'chebyshev1', order: 8, rippleDb: 1 }).at(-1)).toEqual([
      0,
      expect.stringMatching(/Q = 14\.2405 is above 10/u),
    ])
    expect(reasonOf({ order: 1, edgesHz: [0.01] })).toEqual([[0, expect.stringMatching(/0\.01 Hz is out of reach/u)]])
    expect(reasonOf({ order: 2, edgesHz: [5e6] })).toEqual([[0, expect.stringMatching(/out of reach/u)]])
    expect(reasonOf({ order: 2, response: 'bandpass', edgesHz: [900, 1100] })[0]).toEqual([
      0,
      expect.stringMatching(/band-pass/u),
    ])
  })

  it('says which level unity gain leaves out', () => {
    const [first, second] = buildSheet(analogChain({ analog: [filter({ family: 'chebyshev1', rippleDb: 1 })] }), {
      series: 'E96',
    })
    expect(first!.circuits[0]!.note).toMatch(/factor of 0\.891251/u)
    expect(second!.circuits[0]!.note).not.toMatch(/factor/u)
  })
})
