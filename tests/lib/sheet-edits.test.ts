import { describe, expect, it } from 'vitest'
import {
  checkSheet,
  contradictions,
  designFromSpec,
  designSpecSchema,
  requirementSchema,
  type DesignSpec,
  type FamilyDesign,
  type Requirement,
} from '@/dsp'
import { defaultSpec, withFamily, withRate, withResponse } from '@/lib/designs/edits'
import {
  lineOptions,
  sheetOf,
  usualLine,
  withField,
  withLine,
  withLineAdded,
  withLineMoved,
  withoutLine,
  withSheet,
} from '@/lib/designs/sheet-edits'
import type { LineField } from '@/lib/designs/requirement-words'

const kinds = requirementSchema.options.map((option) => option.shape.kind.value)

const pass: Requirement = { kind: 'pass', fromHz: 10, toHz: 120, withinDb: 0.5 }
const stop: Requirement = { kind: 'stop', fromHz: 180, attenuationDb: 60 }
const tone: Requirement = { kind: 'keep-tone', hz: 50, withinDb: 0.1 }
const three = withSheet(defaultSpec, [pass, stop, tone])

const high: FamilyDesign = {
  ...withResponse(defaultSpec, 'highpass'),
  analog: { family: 'butterworth', response: 'highpass', order: 2, edgesHz: [2] },
}
const designs: readonly (readonly [string, DesignSpec])[] = [
  ['low-pass', defaultSpec],
  ['low-pass hard against half the rate', withRate(defaultSpec, 245)],
  ['high-pass', high],
  ['band-pass', withResponse(defaultSpec, 'bandpass')],
  ['band-stop', withResponse(defaultSpec, 'bandstop')],
]

describe('the lines of a sheet', () => {
  it('are added, changed, moved and removed, and nothing else changes', () => {
    const others = (spec: DesignSpec) => ({ ...spec, sheet: undefined })
    const moved = withLineMoved(three, 2, -1)
    expect(sheetOf(moved)).toEqual([pass, tone, stop])
    expect(others(moved)).toEqual(others(three))
    expect(withLineMoved(three, 0, -1)).toBe(three)
    expect(withLineMoved(three, 2, 1)).toBe(three)
    expect(sheetOf(withoutLine(three, 1))).toEqual([pass, tone])
    expect(sheetOf(withLine(three, 1, tone))).toEqual([pass, tone, tone])
    expect(sheetOf(withLineAdded(three, 'cost'))).toHaveLength(4)
  })

  it('leave no empty sheet behind', () => {
    expect(withoutLine(withSheet(defaultSpec, [pass]), 0)).toEqual(defaultSpec)
    expect('sheet' in withSheet(three, [])).toBe(false)
  })

  it('stop at forty', () => {
    let spec: DesignSpec = defaultSpec
    for (let count = 0; count < 45; count += 1) spec = withLineAdded(spec, 'cost')
    expect(sheetOf(spec)).toHaveLength(40)
    expect(designSpecSchema.safeParse(spec).success).toBe(true)
  })

  it('stay when the family, the response or the rate changes', () => {
    expect(withFamily(three, 'elliptic').sheet).toEqual(three.sheet)
    expect(withResponse(three, 'bandpass').sheet).toEqual(three.sheet)
    expect(withRate(three, 4000).sheet).toEqual(three.sheet)
  })
})

describe('a new line', () => {
  it.each(designs)(
    'of any kind suits the %s: well formed, below half the rate, judged without a reason against it',
    (_, spec) => {
      for (const kind of kinds) {
        const line = usualLine(kind, spec)
        expect(requirementSchema.safeParse(line).success, kind).toBe(true)
        const [result] = checkSheet(designFromSpec(spec), [line])
        expect(Number.isNaN(result?.value), kind).toBe(false)
        expect(contradictions([line], spec.sampleRateHz), kind).toEqual([])
      }
    },
  )

  it('keeps and loses bands that don’t contradict each other', () => {
    for (const [name, spec] of designs) {
      const sheet = [usualLine('pass', spec), usualLine('stop', spec)]
      expect(contradictions(sheet, spec.sampleRateHz), name).toEqual([])
    }
  })
})

describe('a number of a line', () => {
  const refusedAt = (line: Requirement, field: LineField, value: number) => {
    const edit = withField(line, field, value, 600)
    if (edit.ok) throw new Error(`${field} ${value} was taken`)
    return edit
  }

  it('is set where it can be', () => {
    expect(withField(pass, 'toHz', 200, 600)).toEqual({ ok: true, line: { ...pass, toHz: 200 } })
    expect(withField(pass, 'fromHz', 0, 600)).toEqual({ ok: true, line: { ...pass, fromHz: 0 } })
    expect(withField(pass, 'toHz', 600, 600).ok).toBe(true)
    const delay: Requirement = { kind: 'delay', fromHz: 10, toHz: 10, atMostSeconds: 0.005 }
    expect(withField(delay, 'fromHz', 20, 600)).toEqual({ ok: true, line: { ...delay, fromHz: 20, toHz: 20 } })
  })

  it.each<[string, Requirement, LineField, number]>([
    ['an upper edge beyond half the rate', pass, 'toHz', 700],
    ['an upper edge below the lower', pass, 'toHz', 5],
    ['a lower edge above the upper', pass, 'fromHz', 130],
    ['a lower edge below nothing', pass, 'fromHz', -1],
    ['a stop band from half the rate on', stop, 'fromHz', 600],
    ['a tone beyond half the rate', tone, 'hz', 601],
    ['a tone at nothing', tone, 'hz', 0],
    ['no tolerance', pass, 'withinDb', 0],
    ['too much attenuation', stop, 'attenuationDb', 1000],
    ['three bits', { kind: 'word-length', bits: 16, withinDb: 0.1 }, 'bits', 3],
    ['half a bit', { kind: 'word-length', bits: 16, withinDb: 0.1 }, 'bits', 12.5],
    ['a negative overshoot', { kind: 'overshoot', atMostPercent: 5 }, 'atMostPercent', -1],
    ['a settling band of everything', { kind: 'settling', atMostSeconds: 1, withinPercent: 2 }, 'withinPercent', 80],
    ['no time at all', { kind: 'settling', atMostSeconds: 1, withinPercent: 2 }, 'atMostSeconds', 0],
    ['nothing to multiply', { kind: 'cost', atMostMultiplies: 20 }, 'atMostMultiplies', 0],
  ])('is refused for %s, and the nearest value is taken', (_, line, field, value) => {
    const { message, nearest, nearestText } = refusedAt(line, field, value)
    expect(message).toMatch(/\.$|\)$|edge$/)
    expect(nearestText).toBeTruthy()
    const again = withField(line, field, nearest ?? Number.NaN, 600)
    expect(again.ok).toBe(true)
    if (again.ok) expect(requirementSchema.safeParse(again.line).success).toBe(true)
  })
})

describe('a word of a line', () => {
  it('opens and closes a stop band', () => {
    const [open, closed] = lineOptions(stop, 'reach', 600).options
    expect(open?.line).toEqual(stop)
    expect(closed?.line).toEqual({ ...stop, toHz: 360 })
    const back = closed && lineOptions(closed.line, 'reach', 600).options[0]
    expect(back?.line).toEqual(stop)
  })
  it('asks a delay at one frequency or over a band', () => {
    const delay: Requirement = { kind: 'delay', fromHz: 10, toHz: 10, atMostSeconds: 0.005 }
    const { current, options } = lineOptions(delay, 'span', 600)
    expect(current).toBe('at')
    expect(options[1]?.line).toEqual({ ...delay, fromHz: 0 })
  })
  it('takes the best delay off or leaves it in', () => {
    const line: Requirement = { kind: 'phase-departure', upToHz: 100, withinDegrees: 1, removeDelay: true }
    expect(lineOptions(line, 'removeDelay', 600).options[1]?.line).toEqual({ ...line, removeDelay: false })
    expect(lineOptions(pass, 'removeDelay', 600).options).toEqual([])
  })
})
