import { describe, expect, it } from 'vitest'
import { designSpecSchema, isFirDesign, type FirDesign } from '@/dsp'
import { optionsFor, withQuantity } from '@/components/studio/statement/apply'
import { defaultSpec, withFamily, withOwn, withRate } from '@/lib/designs/edits'
import { firChoices, withFir, withFirResponse } from '@/lib/designs/fir-edits'
import { firName } from '@/lib/designs/fir-statement'
import { statementText } from '@/lib/designs/statement'
import { changedParts } from '@/lib/designs/statement-changes'

const plain = (spec: Parameters<typeof statementText>[0]) => statementText(spec).replace(/[\u2009\u00a0]/g, ' ')
const kaiser = withFir(defaultSpec, { kind: 'windowed', window: 'kaiser' })

describe('the statement of an FIR filter', () => {
  it('says what each band becomes, and leaves out ends that go without saying', () => {
    expect(plain(kaiser)).toBe(
      'A low-pass Kaiser-windowed FIR of 63 taps, passing to 120 Hz and stopping from 180 Hz, side lobes 60 dB down, run at 1.2 kHz.',
    )
  })

  it('weighs errors where the kind does', () => {
    expect(plain(withFir(kaiser, { kind: 'equiripple' }))).toContain(', weighted 1 : 1, run at 1.2 kHz.')
    expect(plain(withFir(kaiser, { kind: 'windowed', window: 'hann' }))).not.toContain('weighted')
  })

  it('names gains where bands have different ones', () => {
    const several = withFirResponse(withFir(kaiser, { kind: 'equiripple' }), 'multiband')
    expect(plain(several)).toMatch(/gain 1 to 75 Hz, gain 0 from 120 Hz to 300 Hz and gain 0.5 from 360 Hz/)
    expect(plain(withFirResponse(several, 'differentiator'))).toContain('times 1 per second to 480 Hz')
  })

  it('is a spec that can be kept, for every kind and response', () => {
    for (const choice of firChoices) {
      const spec = withFir(defaultSpec, choice)
      expect(designSpecSchema.safeParse(spec).success, firName(choice)).toBe(true)
      for (const option of optionsFor('fir.response', spec).options)
        expect(designSpecSchema.safeParse(option.apply(spec)).success, `${firName(choice)} ${option.value}`).toBe(true)
    }
  })
})

describe('edits of an FIR filter', () => {
  it('set a band’s edge, the taps and the attenuation', () => {
    expect((withQuantity(kaiser, 'fir.bands.0.toHz', 100) as FirDesign).fir.bands[0]?.toHz).toBe(100)
    expect((withQuantity(kaiser, 'fir.taps', 91) as FirDesign).fir.taps).toBe(91)
    expect((withQuantity(kaiser, 'fir.attenuationDb', 80) as FirDesign).fir.attenuationDb).toBe(80)
  })

  it('take the last band along to half of another rate', () => {
    const faster = withRate(kaiser, 2000)
    expect(faster.fir.bands.map(({ toHz }) => toHz)).toEqual([120, 1000])
  })

  it('keep the edges of a half-band filter mirrored about a quarter of the rate', () => {
    const half = withFir(defaultSpec, { kind: 'half-band' })
    const moved = withQuantity(half, 'fir.bands.0.toHz', 200) as FirDesign
    expect(moved.fir.bands.map(({ fromHz, toHz }) => [fromHz, toHz])).toEqual([
      [0, 200],
      [400, 600],
    ])
  })

  it('lead back to a family with its edge, and keep rate, budget and sheet', () => {
    const sheet = [{ kind: 'cost', atMostMultiplies: 40 }] as const
    const back = withFamily({ ...kaiser, sheet }, 'elliptic')
    expect(back).toMatchObject({ analog: { family: 'elliptic', edgesHz: [120] }, sampleRateHz: 1200, sheet })
    expect(back.budget).toBe(defaultSpec.budget)
  })
})

describe('originals of one’s own', () => {
  const rows = [1, 10, 100, 200, 300].map((hz) => [hz, -hz / 100, -hz / 2] as const)
  it('are fitted where they are measured, and keep a fit where they are given by roots', () => {
    const measured = withOwn(defaultSpec, { given: 'measured', name: 'Mount 3', rows })
    expect(measured.how).toEqual({ method: 'fitted', upToHz: 300, order: 4 })
    expect(plain(measured)).toBe(
      'The response “Mount 3”, given as measured, run at 1.2 kHz by the fitted method with 4 poles up to 300 Hz, delay kept.',
    )
    const roots = { given: 'roots', name: 'Geophone', zeros: [], poles: [{ re: -3, im: 0 }], gain: 3 } as const
    // A fit stays one, with as many poles as the roots have; an edge to hold there is none any more.
    expect(withOwn(measured, roots).how).toEqual({ method: 'fitted', upToHz: 300 })
    expect(withOwn(defaultSpec, roots).how).toEqual({ method: 'bilinear', hold: 'none' })
  })

  it('count as changes', () => {
    const measured = withOwn(defaultSpec, { given: 'measured', name: 'Mount 3', rows })
    const other = withOwn(measured, { given: 'measured', name: 'Mount 3', rows: rows.slice(0, 4) })
    expect(changedParts(measured, other)).toContain('response of its own')
    expect(changedParts(kaiser, { ...kaiser, sheet: [{ kind: 'cost', atMostMultiplies: 9 }] })).toEqual([
      'requirement sheet',
    ])
    expect(isFirDesign(kaiser)).toBe(true)
  })
})
