import { describe, expect, it } from 'vitest'
import { MOST_MEASURED_ROWS } from '@/dsp'
import { parseMeasured } from '@/lib/targets/measured-file'

const good = (text: string, options = {}) => {
  const read = parseMeasured(text, options)
  if (!read.ok) throw new Error(JSON.stringify(read.problems))
  return read
}
const bad = (text: string) => {
  const read = parseMeasured(text)
  if (read.ok) throw new Error('The file was taken.')
  return read.problems
}

const ROWS = [
  [1, 0, 0],
  [10, -0.5, -12.25],
  [100, -3, -90],
  [1000, -40, -179.5],
]

describe('files that are taken', () => {
  it.each([
    ['commas and points', 'frequency,dB,degrees\n1,0,0\n10,-0.5,-12.25\n100,-3,-90\n1000,-40,-179.5\n'],
    [
      'semicolons and decimal commas',
      'Frequenz [Hz];Pegel [dB];Phase [°]\r\n1;0;0\r\n10;-0,5;-12,25\r\n100;-3,0;-90\r\n1000;-40;-179,5',
    ],
    ['tabs, no header', '1\t0\t0\n10\t-0.5\t-12.25\n100\t-3\t-90\n1e3\t-40\t-179.5'],
    ['spaces and remarks', '# shaker, run 3\n1 0 0\n10 -0.5 -12.25\n\n100 -3 -90\n1000 -40 -179.5\n'],
    ['columns in another order', 'phase (deg),f (Hz),level (dB)\n0,1,0\n-12.25,10,-0.5\n-90,100,-3\n-179.5,1000,-40'],
    ['kilohertz', 'f (kHz),dB,deg\n0.001,0,0\n0.01,-0.5,-12.25\n0.1,-3,-90\n1,-40,-179.5'],
  ])('%s', (_, text) => {
    const { rows } = good(text)
    expect(rows.length).toBe(4)
    rows.forEach((row, at) => row.forEach((value, column) => expect(value).toBeCloseTo(ROWS[at]![column]!, 12)))
  })

  it('takes gain and radians from the header, or as told', () => {
    const text = (header: string) => `${header}1,1,0\n2,0.5,-1\n3,0.1,-2\n4,0.01,-3\n`
    for (const { rows, columns } of [
      good(text('freq,gain,phase [rad]\n')),
      good(text(''), { magnitude: 'gain', phase: 'radians' }),
    ]) {
      expect(columns.magnitude.unit).toBe('gain')
      expect(columns.phase.unit).toBe('radians')
      expect(rows[3]![1]).toBeCloseTo(-40, 12)
      expect(rows[1]![2]).toBeCloseTo(-180 / Math.PI, 12)
    }
    expect(good(text('freq,gain (dB),phase\n')).columns.magnitude.unit).toBe('dB')
  })
})

describe('files that are refused', () => {
  it('names every bad row, its column and the reason', () => {
    const problems = bad('f,dB,deg\n1,0,0\n2,zero,0\n3,-1,\n2.5,-2,-20\n4,-2,-20\n4,-3,-30\n5,-3\n6,-4,-40\n7,-5,-50\n')
    expect(problems.map(({ row, column }) => [row, column])).toEqual([
      [3, 2],
      [4, 3],
      [7, 1],
      [8, null],
    ])
    expect(problems[0]!.reason).toContain('zero')
    expect(problems[1]!.reason).toContain('blank')
    expect(problems[2]!.reason).toMatch(/row before/)
    expect(problems[3]!.reason).toMatch(/2 cells/)
  })

  it('says which row falls back', () => {
    expect(bad('1,0,0\n3,0,0\n2,0,0\n4,0,0\n5,0,0\n')).toEqual([
      { row: 3, column: 1, reason: 'frequencies must rise from row to row' },
    ])
  })

  it.each([
    ['an empty file', '', /no lines/],
    ['words alone', 'hello\nworld\n', /No column of numbers/],
    ['two columns', '1,0\n2,0\n3,0\n4,0\n', /has two/],
    ['three rows', '1,0,0\n2,0,0\n3,0,0\n', /At least 4 rows/],
    [
      'too many rows',
      Array.from({ length: MOST_MEASURED_ROWS + 1 }, (_, k) => `${k + 1},0,0`).join('\n'),
      /At most 2000/,
    ],
  ])('%s', (_, text, reason) => {
    const [problem] = bad(text)
    expect(problem).toMatchObject({ row: null, column: null })
    expect(problem!.reason).toMatch(reason)
  })

  it('a gain of nothing and a negative frequency', () => {
    const problems = bad('f,gain,deg\n-1,1,0\n1,0,0\n2,1,0\n3,1,0\n4,1,0\n5,1,0\n')
    expect(problems.map(({ row, column }) => [row, column])).toEqual([
      [2, 1],
      [3, 2],
    ])
  })

  it('counts problems beyond the first twenty', () => {
    const text = Array.from({ length: 40 }, (_, k) =>
      k < 4 ? `${k + 1},0,0` : k % 2 === 0 ? `${k},x1,0` : `${k},0,0`,
    ).join('\n')
    const problems = bad(`f,dB,deg\n${text}${'\n41,?,0'.repeat(10)}`)
    expect(problems.length).toBe(21)
    expect(problems.at(-1)).toMatchObject({ row: null, reason: expect.stringMatching(/more rows/) as string })
  })
})
