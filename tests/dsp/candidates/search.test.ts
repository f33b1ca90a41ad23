import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  candidateSteps,
  designFromSpec,
  DesignError,
  frequencyResponse,
  isOffered,
  minimumOrder,
  searchCandidates,
  sketchFrequencies,
  type CandidateRequest,
  type CandidateRow,
  type Family,
  type OfferedRow,
  type OrderRequirement,
  type Requirement,
  type RequirementSheet,
} from '@/dsp'
import textbook from '../../reference/textbook_examples.json'

const budget = { magnitudeDb: 0.1, phaseDegrees: 5, removeDelay: true }
const FAMILIES: readonly Family[] = [
  'butterworth',
  'chebyshev1',
  'chebyshev2',
  'elliptic',
  'bessel',
  'critically-damped',
]

function request(
  sheet: RequirementSheet,
  sampleRateHz: number,
  rest: Partial<CandidateRequest> = {},
): CandidateRequest {
  return { sheet, sampleRateHz, budget, spend: 'narrower', firKinds: [], ...rest }
}

function rowsOf(asked: CandidateRequest): CandidateRow[] {
  return [...candidateSteps(asked)].filter((row) => row !== null)
}

const offered = (rows: readonly CandidateRow[]): OfferedRow[] => rows.filter(isOffered)

/** An order requirement as a sheet. */
function sheetOf({ passHz, stopHz, rippleDb, attenuationDb }: OrderRequirement, foldHz: number): RequirementSheet {
  const pass = (fromHz: number, toHz: number): Requirement => ({ kind: 'pass', fromHz, toHz, withinDb: rippleDb })
  const stop = (fromHz: number, toHz: number): Requirement => ({ kind: 'stop', fromHz, toHz, attenuationDb })
  if (typeof passHz === 'number' && typeof stopHz === 'number') {
    return passHz < stopHz ? [pass(0, passHz), stop(stopHz, foldHz)] : [stop(0, stopHz), pass(passHz, foldHz)]
  }
  const [p1, p2] = passHz as readonly [number, number]
  const [s1, s2] = stopHz as readonly [number, number]
  return s1 < p1 ? [stop(0, s1), pass(p1, p2), stop(s2, foldHz)] : [pass(0, p1), stop(s1, s2), pass(p2, foldHz)]
}

const NEEDS: readonly OrderRequirement[] = [
  { passHz: 100, stopHz: 200, rippleDb: 0.5, attenuationDb: 40, sampleRateHz: 1000 },
  { passHz: 100, stopHz: 400, rippleDb: 2, attenuationDb: 22, sampleRateHz: 1000 },
  { passHz: 300, stopHz: 150, rippleDb: 1, attenuationDb: 30, sampleRateHz: 1000 },
  { passHz: [100, 200], stopHz: [60, 300], rippleDb: 1, attenuationDb: 25, sampleRateHz: 1000 },
  { passHz: [50, 450], stopHz: [120, 260], rippleDb: 2, attenuationDb: 20, sampleRateHz: 1000 },
]

/** Worst breach of pass and stop lines in dB on an even grid of many points, from the response alone. */
function breach(row: OfferedRow, sheet: RequirementSheet, points: number): number {
  const { digital } = designFromSpec(row.spec)
  const fold = digital.sampleRateHz / 2
  let worst = -Infinity
  for (const line of sheet) {
    if (line.kind !== 'pass' && line.kind !== 'stop') continue
    const toHz = line.toHz ?? fold
    const at = Float64Array.from({ length: points }, (_, n) => line.fromHz + ((toHz - line.fromHz) * n) / (points - 1))
    const { re, im } = frequencyResponse(digital, at)
    for (let n = 0; n < points; n++) {
      const db = 20 * Math.log10(Math.hypot(re[n]!, im[n]!))
      worst = Math.max(worst, line.kind === 'pass' ? Math.abs(db) - line.withinDb : db + line.attenuationDb)
    }
  }
  return worst
}

describe('least orders', () => {
  it('are 14, 8, 8, 6 for the comparison of Oppenheim & Schafer', () => {
    // tests/reference/textbook_examples.json, os_order_comparison: 0.99…1.01 to 0.4π, 0.001 from 0.6π.
    const example = textbook.examples.find(({ id }) => id === 'os_order_comparison')
    const inputs = example?.inputs as Record<string, number>
    const sheet: RequirementSheet = [
      { kind: 'pass', fromHz: 0, toHz: 400, withinDb: inputs.ripple_db! },
      { kind: 'stop', fromHz: 600, attenuationDb: inputs.attenuation_db! },
    ]
    const families = ['butterworth', 'chebyshev1', 'chebyshev2', 'elliptic'] as const
    const rows = offered(rowsOf(request(sheet, 2000, { families, methods: ['bilinear'] })))
    expect(rows.map(({ size }) => size)).toEqual([14, 8, 8, 6])
  })

  it('is 6 for the bilinear Butterworth example of Oppenheim & Schafer', () => {
    // os_bilinear_butterworth: 0.89125 at 0.2π, 0.17783 at 0.3π.
    const sheet: RequirementSheet = [
      { kind: 'pass', fromHz: 0, toHz: 0.1, withinDb: -20 * Math.log10(0.89125) },
      { kind: 'stop', fromHz: 0.15, attenuationDb: -20 * Math.log10(0.17783) },
    ]
    const [row] = offered(
      rowsOf(request(sheet, 1, { families: ['butterworth'], methods: ['bilinear'], spend: 'flatter' })),
    )
    expect(row?.size).toBe(6)
    // Their design meets the stop edge exactly, with its corner at 0.76623096 rad before warping.
    const corner = row !== undefined && 'analog' in row.spec ? row.spec.analog.edgesHz[0]! : 0
    expect(2 * Math.tan(Math.PI * corner)).toBeCloseTo(0.76623096, 2)
    expect(2 * Math.tan(Math.PI * corner)).toBeLessThanOrEqual(0.76623096 + 1e-8)
  })

  it.each(NEEDS)('by the bilinear transform are those of the order formulas: $passHz / $stopHz Hz', (need) => {
    const sheet = sheetOf(need, 500)
    for (const family of FAMILIES) {
      const [row] = rowsOf(request(sheet, 1000, { families: [family], methods: ['bilinear'] }))
      let least: number | null = null
      try {
        least = minimumOrder(family, need).order
      } catch (error) {
        if (!(error instanceof DesignError)) throw error
      }
      expect(row !== undefined && isOffered(row) ? row.size : null, family).toBe(least)
    }
  })
})

describe('what is offered', () => {
  it('meets the sheet on a grid ten times finer than it was judged on', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 20, max: 150, noNaN: true }),
        fc.double({ min: 1.5, max: 3, noNaN: true }),
        fc.double({ min: 0.1, max: 2, noNaN: true }),
        fc.double({ min: 20, max: 70, noNaN: true }),
        fc.boolean(),
        fc.constantFrom('narrower', 'flatter', 'less-delay' as const),
        (edge, ratio, withinDb, attenuationDb, isHigh, spend) => {
          const sheet: RequirementSheet = isHigh
            ? [
                { kind: 'stop', fromHz: 0, toHz: edge, attenuationDb },
                { kind: 'pass', fromHz: edge * ratio, toHz: 490, withinDb },
              ]
            : [
                { kind: 'pass', fromHz: 0, toHz: edge, withinDb },
                { kind: 'stop', fromHz: edge * ratio, attenuationDb },
              ]
          const rows = offered(
            rowsOf(request(sheet, 1000, { spend, methods: ['bilinear', 'matched-z', 'step-invariant'] })),
          )
          for (const row of rows) {
            expect(row.results.every(({ met }) => met)).toBe(true)
            expect(breach(row, sheet, 3000), row.id).toBeLessThan(1e-7)
          }
        },
      ),
      { numRuns: 4 },
    )
  })

  it('carries its results, its figures and a drawing', () => {
    const sheet: RequirementSheet = [
      { kind: 'pass', fromHz: 0, toHz: 100, withinDb: 0.5 },
      { kind: 'stop', fromHz: 200, attenuationDb: 40 },
      { kind: 'cost', atMostMultiplies: 30 },
    ]
    const rows = offered(rowsOf(request(sheet, 1000, { families: ['elliptic'], methods: ['bilinear'] })))
    expect(rows).toHaveLength(1)
    const [row] = rows
    expect(row?.results.map(({ requirement }) => requirement)).toEqual(sheet)
    expect(row?.figures.multiplies).toBe(row?.results[2]?.value)
    const room = row?.results.map(({ margin, limit }) => margin / limit) ?? []
    expect(row?.figures.marginParts).toBe(Math.min(...room))
    const at = sketchFrequencies(sheet, 1000)
    expect(row?.sketch).toHaveLength(at.length)
    expect(row?.sketch[0]).toBeGreaterThan(-0.51)
    expect(row?.sketch[at.length - 1]).toBeLessThan(-39.9)
    expect(row?.spec.sheet).toEqual(sheet)
  })

  it('spends its room as asked', () => {
    const sheet: RequirementSheet = [
      { kind: 'pass', fromHz: 0, toHz: 100, withinDb: 1 },
      { kind: 'stop', fromHz: 260, attenuationDb: 40 },
    ]
    const by = (spend: CandidateRequest['spend'], family: Family): OfferedRow =>
      offered(rowsOf(request(sheet, 1000, { spend, families: [family], methods: ['bilinear'] })))[0]!
    const corner = ({ spec }: OfferedRow) => ('analog' in spec ? spec.analog.edgesHz[0]! : 0)
    for (const family of ['butterworth', 'chebyshev1', 'chebyshev2', 'elliptic'] as const) {
      const [narrow, flat, quick] = [by('narrower', family), by('flatter', family), by('less-delay', family)]
      expect(narrow.size).toBe(flat.size)
      expect(flat.results[0]!.margin, family).toBeGreaterThan(narrow.results[0]!.margin)
      expect(corner(narrow)).toBeLessThan(corner(flat) + 1e-9)
      expect(quick.figures.delaySeconds).toBeLessThanOrEqual(
        Math.min(narrow.figures.delaySeconds, flat.figures.delaySeconds) * 1.05,
      )
      // Narrower: the pass edge is met all but exactly.
      if (family === 'butterworth') expect(narrow.results[0]!.margin).toBeLessThan(0.01)
    }
  })

  it('keeps tones and loses tones', () => {
    const sheet: RequirementSheet = [
      { kind: 'keep-tone', hz: 80, withinDb: 1 },
      { kind: 'lose-tone', hz: 50, attenuationDb: 30 },
      { kind: 'lose-tone', hz: 150, attenuationDb: 30 },
    ]
    const rows = offered(rowsOf(request(sheet, 1000, { methods: ['bilinear'] })))
    expect(rows.length).toBeGreaterThan(3)
    for (const row of rows) {
      const { re, im } = frequencyResponse(designFromSpec(row.spec).digital, [80, 50, 150])
      const db = Array.from(re, (x, n) => 20 * Math.log10(Math.hypot(x, im[n]!)))
      expect(Math.abs(db[0]!)).toBeLessThan(1 + 1e-8)
      expect(Math.max(db[1]!, db[2]!)).toBeLessThan(-30 + 1e-7)
    }
  })
})

describe('FIR filters', () => {
  const finite = (sheet: RequirementSheet, sampleRateHz: number, rest: Partial<CandidateRequest> = {}) =>
    rowsOf(request(sheet, sampleRateHz, { families: [], ...rest }))

  it('of equal ripple take 28 taps for the example of Oppenheim & Schafer', () => {
    // os_parks_mcclellan_lowpass: M = 26 fails and M = 27 meets 0.01 to 0.4π and 0.001 from 0.6π; 28 taps.
    const sheet: RequirementSheet = [
      { kind: 'pass', fromHz: 0, toHz: 400, withinDb: -20 * Math.log10(0.99) },
      { kind: 'stop', fromHz: 600, attenuationDb: 60 },
    ]
    const [row] = offered(finite(sheet, 2000, { firKinds: ['equiripple'], spend: 'less-delay' }))
    expect(row?.size).toBe(28)
    expect(row?.figures).toMatchObject({ multiplies: 14, delaySpreadSeconds: 0 })
    expect(row?.figures.delaySeconds).toBeCloseTo(13.5 / 2000, 12)
  })

  it('meet the sheet on a finer grid, each kind of them, or say what stops it', () => {
    const sheet: RequirementSheet = [
      { kind: 'pass', fromHz: 0, toHz: 200, withinDb: 0.3 },
      { kind: 'stop', fromHz: 300, attenuationDb: 40 },
    ]
    const rows = finite(sheet, 1000, {
      firKinds: ['windowed', 'equiripple', 'least-squares', 'half-band', 'minimum-phase'],
    })
    expect(offered(rows).length).toBeGreaterThanOrEqual(7)
    for (const row of offered(rows)) expect(breach(row, sheet, 8000), row.id).toBeLessThan(1e-7)
    for (const row of rows) if (!isOffered(row)) expect(row.refused.reason.length).toBeGreaterThan(20)
  })

  it('of a window take no more taps than the best cut and attenuation need', () => {
    const sheet: RequirementSheet = [
      { kind: 'pass', fromHz: 0, toHz: 200, withinDb: 0.1 },
      { kind: 'stop', fromHz: 400, attenuationDb: 70 },
      { kind: 'delay-spread', fromHz: 0, toHz: 200, atMostSeconds: 300e-6 },
    ]
    // One tap fewer misses at every cut in steps of 0.5 Hz and, for Kaiser and Dolph–Chebyshev, a grid of attenuations (not Hamming, whose
    // need isn't monotone in the taps); cut in the middle of the room the first three take 50, 106 and 55, and Hamming's misses with 400.
    const least: Readonly<Record<string, number>> = {
      'windowed:kaiser': 41,
      'windowed:hann': 69,
      'windowed:blackman': 48,
      'windowed:dolph-chebyshev': 40,
      'windowed:hamming': 234,
    }
    for (const spend of ['narrower', 'flatter', 'less-delay'] as const) {
      const rows = finite(sheet, 2000, { firKinds: ['windowed'], spend })
      expect(rows).toHaveLength(5)
      for (const row of rows) {
        expect(isOffered(row) ? row.size : Infinity, `${row.id}, ${spend}`).toBeLessThanOrEqual(least[row.id]!)
        if (isOffered(row)) expect(breach(row, sheet, 20_000), row.id).toBeLessThan(1e-7)
      }
    }
  })

  it('that no number of taps helps say how many were looked at', () => {
    const sheet: RequirementSheet = [
      { kind: 'pass', fromHz: 0, toHz: 200, withinDb: 0.1 },
      { kind: 'stop', fromHz: 203, attenuationDb: 70 },
    ]
    const [row] = finite(sheet, 2000, { firKinds: ['windowed'] })
    expect(row !== undefined && !isOffered(row) && row.refused.reason).toMatch(/taps; up to 400 are looked at\.$/)
  })

  it('alone have several bands', () => {
    const sheet: RequirementSheet = [
      { kind: 'pass', fromHz: 0, toHz: 50, withinDb: 1 },
      { kind: 'stop', fromHz: 100, toHz: 150, attenuationDb: 30 },
      { kind: 'pass', fromHz: 200, toHz: 250, withinDb: 1 },
      { kind: 'stop', fromHz: 300, attenuationDb: 30 },
    ]
    const rows = rowsOf(
      request(sheet, 1000, { families: ['elliptic'], methods: ['bilinear'], firKinds: ['equiripple'] }),
    )
    const [elliptic, equiripple] = rows
    expect(elliptic !== undefined && !isOffered(elliptic) && elliptic.refused.reason).toMatch(/FIR/)
    expect(equiripple !== undefined && isOffered(equiripple) && breach(equiripple, sheet, 4000)).toBeLessThan(1e-7)
  })
})

describe('what is refused', () => {
  it('names the line that stops it, and by how much', () => {
    const sheet: RequirementSheet = [
      { kind: 'pass', fromHz: 0, toHz: 100, withinDb: 0.5 },
      { kind: 'stop', fromHz: 200, attenuationDb: 40 },
      { kind: 'delay', fromHz: 0, toHz: 100, atMostSeconds: 1e-4 },
    ]
    for (const row of rowsOf(request(sheet, 1000, { families: ['butterworth', 'elliptic'], methods: ['bilinear'] }))) {
      expect(isOffered(row)).toBe(false)
      if (isOffered(row)) continue
      expect(row.refused.requirementIndex).toBe(2)
      expect(row.refused.reason).toMatch(/misses line 3 \(delay at most 100 µs over 0 … 100 Hz\) by .* ms at order \d+/)
    }
  })

  it('gives the method’s own reason', () => {
    const sheet: RequirementSheet = [
      { kind: 'stop', fromHz: 0, toHz: 10, attenuationDb: 40 },
      { kind: 'pass', fromHz: 50, toHz: 400, withinDb: 1 },
    ]
    const [row] = rowsOf(request(sheet, 1000, { families: ['butterworth'], methods: ['impulse-invariant'] }))
    expect(row !== undefined && !isOffered(row) && row.refused).toMatchObject({
      requirementIndex: null,
      reason: expect.stringMatching(/high-pass/),
    })
  })

  it('lists the contradictions of a sheet instead of searching', async () => {
    const sheet: RequirementSheet = [
      { kind: 'pass', fromHz: 0, toHz: 100, withinDb: 1 },
      { kind: 'overshoot', atMostPercent: 5 },
      { kind: 'stop', fromHz: 90, attenuationDb: 20 },
    ]
    const rows: CandidateRow[] = []
    const outcome = await searchCandidates(request(sheet, 1000), (row) => rows.push(row))
    expect(rows).toEqual([])
    expect(outcome.contradictions).toMatchObject([{ first: 0, second: 2 }])
  })

  it('says what a sheet leaves open', async () => {
    const outcome = await searchCandidates(request([{ kind: 'overshoot', atMostPercent: 5 }], 1000), () => undefined)
    expect(outcome.unclear).toMatch(/kept/)
  })

  it('stops when it is told to, with the rows so far', async () => {
    const sheet: RequirementSheet = [
      { kind: 'pass', fromHz: 0, toHz: 100, withinDb: 1 },
      { kind: 'stop', fromHz: 200, attenuationDb: 40 },
    ]
    const rows: CandidateRow[] = []
    const outcome = await searchCandidates(
      request(sheet, 1000),
      (row) => rows.push(row),
      async () => rows.length === 2,
    )
    expect(outcome).toMatchObject({ isCancelled: true })
    expect(rows).toHaveLength(2)
  })
})
