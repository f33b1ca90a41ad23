import { describe, expect, it } from 'vitest'
import { gainForUnityAtDc, readCoefficients, readRoots, writtenRoots } from '@/lib/targets/written-roots'

const valueOf = <Value>(read: { ok: true; value: Value } | { ok: false }): Value => {
  if (!read.ok) throw new Error('not read')
  return read.value
}

describe('roots as people write them', () => {
  it('reads reals, single complex roots and pairs', () => {
    const text = '-120\n\n −120 ± 300j \n -5+-2i\n -1.5 + j2\n.5e2j'.replace('.5e2j', '+.5e2j')
    expect(valueOf(readRoots(text, 'rad/s'))).toEqual([
      { re: -120, im: 0 },
      { re: -120, im: 300 },
      { re: -120, im: -300 },
      { re: -5, im: 2 },
      { re: -5, im: -2 },
      { re: -1.5, im: 2 },
      { re: 0, im: 50 },
    ])
  })

  it('takes Hz as turns a second', () => {
    expect(valueOf(readRoots('-10', 'Hz'))).toEqual([{ re: -20 * Math.PI, im: 0 }])
  })

  it('reads a decimal comma', () => {
    expect(valueOf(readRoots('-1,5 ± 2,25j', 'rad/s'))[0]).toEqual({ re: -1.5, im: 2.25 })
  })

  it('names the line of what it can’t read', () => {
    const read = readRoots('-1\nabout two\n3x', 'rad/s')
    expect(read.ok).toBe(false)
    if (!read.ok) expect(read.problems.map(({ line }) => line)).toEqual([2, 3])
  })

  it('writes what it reads', () => {
    const roots = valueOf(readRoots('-3\n-2 ± 5j\n-1 + 4j', 'rad/s'))
    expect(valueOf(readRoots(writtenRoots(roots, 'rad/s'), 'rad/s'))).toEqual(roots)
    expect(writtenRoots(roots, 'rad/s')).toBe('-3\n-2 ± 5j\n-1 + 4j')
  })
})

describe('coefficients as people write them', () => {
  it('reads rows with spaces, semicolons and decimal commas', () => {
    expect(valueOf(readCoefficients('1 2.5 −3e2'))).toEqual([1, 2.5, -300])
    expect(valueOf(readCoefficients('1; 2,5; 3'))).toEqual([1, 2.5, 3])
  })

  it('refuses what is no number, and nothing at all', () => {
    expect(readCoefficients('1 two 3').ok).toBe(false)
    expect(readCoefficients('  ').ok).toBe(false)
  })
})

describe('the gain for unity at DC', () => {
  it('is ω₀² for a pair without zeros', () => {
    const poles = valueOf(readRoots('-3 ± 4j', 'rad/s'))
    expect(gainForUnityAtDc([], poles)).toBe(25)
  })

  it('is not there with a zero at the origin', () => {
    expect(gainForUnityAtDc([{ re: 0, im: 0 }], [{ re: -1, im: 0 }])).toBeNull()
  })
})
