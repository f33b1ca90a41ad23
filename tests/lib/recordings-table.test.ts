import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { RecordingError } from '@/lib/recordings/errors'
import { guessFile, identify, openWav, tryPlan } from '@/lib/recordings/open'
import { MemoryBudget } from '@/lib/recordings/sample-store'
import type { Settled } from '@/lib/recordings/table/guess'
import type { TablePlan } from '@/lib/recordings/table/plan'
import { readTable } from '@/lib/recordings/table/read'
import { TableScanner } from '@/lib/recordings/table/scan'
import { QUIET, type Recording } from '@/lib/recordings/types'
import { channelOf, makeTable, makeWavBytes, utf16 } from '../helpers/recordings'

const budget = () => new MemoryBudget(1e9)

async function read(file: Blob, settled: Settled = {}): Promise<Recording> {
  const { plan } = await guessFile(file, settled)
  return readTable(file, 'x', plan, budget(), QUIET)
}

const text = (content: string) => new Blob([content])

describe('what is detected', () => {
  const detect = async (content: string, settled: Settled = {}): Promise<TablePlan> =>
    (await guessFile(text(content), settled)).plan

  it('delimiter and decimal mark', async () => {
    const cases: readonly (readonly [string, string, string])[] = [
      ['0.1,1.5\n0.2,-2.5\n0.3,3\n', ',', '.'],
      ['0,1;1,5\n0,2;-2,5\n0,3;3\n', ';', ','],
      ['0.1;1.5\n0.2;-2.5\n', ';', '.'],
      ['0,1\t1,5\n0,2\t-2,5\n', '\t', ','],
      ['0.1|1.5\n0.2|-2.5\n', '|', '.'],
      ['  0,1   1,5\n  0,2  -2,5\n', ' ', ','],
      ['0.1, 1.5\n0.2, -2.5\n', ',', '.'],
      ['1;2;3\n4;5;6\n', ';', '.'],
      ['1,2,3\n4,5,6\n', ',', '.'],
      ['0,0125\n0,0131\n1,0007\n', ',', '.'],
    ]
    for (const [content, delimiter, decimal] of cases.slice(0, -1)) {
      const plan = await detect(content)
      expect([content, plan.delimiter, plan.decimal]).toEqual([content, delimiter, decimal])
    }
    const column = await detect('0,0125\n0,0131\n1,0007\n')
    expect([column.decimal, column.channels.length]).toEqual([',', 1])
  })

  it('a header with units, however they are written', async () => {
    const plan = await detect('Time [ms],acc x [m/s²],accel (g),force / kN,"level, dB"\n0,1,2,3,4\n1,1,2,3,4\n')
    expect(plan.headerLine).toBe(1)
    expect(plan.firstLine).toBe(2)
    expect(plan.time).toEqual({ column: 0, unit: 'ms' })
    expect(plan.channels).toEqual([
      { column: 1, name: 'acc x', unit: 'm/s²' },
      { column: 2, name: 'accel', unit: 'g' },
      { column: 3, name: 'force', unit: 'kN' },
      { column: 4, name: 'level', unit: 'dB' },
    ])
  })

  it('remarks, comment lines, a row of units, a commented header', async () => {
    const rich = await detect(
      'Pump hall, east bearing\nRate;nominal\n\n# made by the logger\nt;a\ns;m/s²\n0,0;1,5\n0,1;1,6\n0,2;1,7\n',
    )
    expect([rich.headerLine, rich.firstLine, rich.time, rich.channels]).toEqual([
      5,
      7,
      { column: 0, unit: 's' },
      [{ column: 1, name: 'a', unit: 'm/s²' }],
    ])
    const commented = await detect('# time [s], acc [g]\n0,1\n0.5,2\n1,3\n')
    expect([commented.headerLine, commented.time?.column, commented.channels[0]?.unit]).toEqual([1, 0, 'g'])
  })

  it('no header: a rising first column is time, a counter is not', async () => {
    expect((await detect('0.00,5\n0.01,6\n0.02,4\n')).time).toEqual({ column: 0, unit: 's' })
    const counted = await detect('0,5\n1,6\n2,4\n3,4\n')
    expect(counted.time).toBeNull()
    expect(counted.channels.map((c) => c.column)).toEqual([1])
    expect((await detect('1.25\n1.5\n')).channels).toHaveLength(1)
  })

  it('the unit of time by its size, where none is written', async () => {
    const at = async (start: number, step: number) =>
      (await detect(`time,a\n${[0, 1, 2, 3].map((i) => `${start + i * step},${i}`).join('\n')}\n`)).time?.unit
    expect(await at(0, 0.5)).toBe('s')
    expect(await at(1.7e9, 1)).toBe('s')
    expect(await at(1.7e12, 5)).toBe('ms')
    expect(await at(1.7e15, 500)).toBe('µs')
  })

  it('what the reader settles wins', async () => {
    const content = 'a;b\n1,5;2,5\n3,5;4,5\n'
    expect((await detect(content, { headerLine: null })).channels[0]?.name).toBe('column 1')
    expect((await detect(content, { delimiter: ',', decimal: '.' })).delimiter).toBe(',')
    expect((await detect(content, { time: { column: 0, unit: 'ms' } })).channels.map((c) => c.column)).toEqual([1])
    expect((await detect(content, { statedRateHz: 600 })).statedRateHz).toBe(600)
    await expect(detect(content, { delimiter: ',', decimal: ',' })).rejects.toThrow(/comma can’t be/)
  })
})

describe('reading tables', () => {
  it('every dialect gives the same samples', async () => {
    const rows = [
      ['0', '1.5', '-2.25e-3'],
      ['0.001', '-0', '1e22'],
      ['0.002', '.5', '+7.'],
    ]
    const expected = [
      [1.5, -0, 0.5],
      [-2.25e-3, 1e22, 7],
    ]
    for (const delimiter of [',', ';', '\t', '|', ' ']) {
      for (const lineEnd of ['\n', '\r\n', '\r']) {
        for (const decimal of delimiter === ',' ? ['.'] : ['.', ',']) {
          const cells = rows.map((row) => row.map((cell) => cell.replace('.', decimal)))
          const recording = await read(
            makeTable(
              [['time', 'a [V]', 'b'].map((c) => (delimiter === ' ' ? c.replace(' ', '') : c)), ...cells],
              delimiter,
              lineEnd,
            ),
          )
          expect(recording.sampleRateHz).toBe(1000)
          expect(await channelOf(recording.source, 0)).toEqual(expected[0])
          expect(await channelOf(recording.source, 1)).toEqual(expected[1])
        }
      }
    }
  })

  it('byte order marks and UTF-16', async () => {
    const content = 'time,Beschl. [m/s²]\r\n0,1.5\r\n0.5,2.5\r\n1,−3\r\n'
    const plain = await read(text(content))
    const marked = await read(text(`\ufeff${content}`))
    const wide = await read(utf16(content))
    for (const recording of [plain, marked, wide]) {
      expect(recording.channels).toEqual([{ name: 'Beschl.', unit: 'm/s²' }])
      expect(recording.sampleRateHz).toBe(2)
      expect(await channelOf(recording.source, 0)).toEqual([1.5, 2.5, -3])
    }
    const latin = new Blob([
      Uint8Array.from(
        [...'t,a [m/s']
          .map((c) => c.charCodeAt(0))
          .concat(0xb2, ...[...']\n0,1\n1,2\n3,4\n'].map((c) => c.charCodeAt(0))),
      ),
    ])
    expect((await guessFile(latin)).plan.channels[0]?.unit).toBe('m/s²')
  })

  it('quoted cells and trailing spaces', async () => {
    const recording = await read(text('"time";"a; left [g]"\n"0,0";"1,5" \n"0,1";  "2,5"\n0,2 ; 3,5 \n'))
    expect(recording.channels).toEqual([{ name: 'a; left', unit: 'g' }])
    expect(await channelOf(recording.source, 0)).toEqual([1.5, 2.5, 3.5])
  })

  it('blank, missing and broken cells are kept as gaps, with line and reason', async () => {
    const recording = await read(text('time,a,b\n0,1,2\n1,,3\n2,NaN,4\n# remark\n3,abc,5\n4,1e999,6\n5,7\n6,8,9\n'))
    expect(await channelOf(recording.source, 0)).toEqual([1, NaN, NaN, NaN, NaN, 7, 8])
    expect(recording.flaws).toEqual([
      { row: 3, frame: 1, channel: 0, reason: 'blank cell' },
      { row: 4, frame: 2, channel: 0, reason: '“NaN” stands for no value' },
      { row: 6, frame: 3, channel: 0, reason: '“abc” is not a number' },
      { row: 7, frame: 4, channel: 0, reason: '“1e999” is beyond the largest double' },
      { row: 8, frame: 5, channel: 1, reason: 'the row has 2 cells; this column is number 3' },
    ])
    expect([recording.rowOf(0), recording.rowOf(2), recording.rowOf(3), recording.rowOf(6)]).toEqual([2, 4, 6, 9])
  })

  it('rows without a number keep their place inside, and are left out at the end', async () => {
    const recording = await read(text('a\n1\nx\n\n2\n5\n6\n7\n8\nend of record\nbye\n'), { statedRateHz: 10 })
    expect(await channelOf(recording.source, 0)).toEqual([1, NaN, 2, 5, 6, 7, 8])
    expect(recording.flawCount).toBe(1)
    expect(recording.flaws).toEqual([{ row: 3, frame: 1, channel: 0, reason: '“x” is not a number' }])
    expect(recording.notes[0]).toMatch(/^2 lines hold no number/)
  })

  it('thousands marks and the other decimal mark are named, not guessed', async () => {
    const plan = (await guessFile(text('1;2\n1,5;2\n'), { delimiter: ';', decimal: ',' })).plan
    const recording = await readTable(
      text('1;2\n1.5;2\n1.234,5;2\n'),
      'x',
      { ...plan, statedRateHz: 1, time: null, channels: [0, 1].map((column) => ({ column, name: 'a', unit: '' })) },
      budget(),
      QUIET,
    )
    expect(recording.flaws.map((f) => f.reason)).toEqual([
      '“1.5” has the other decimal mark',
      '“1.234,5” has marks between its thousands',
    ])
  })

  it('numbers to the last bit, whatever their length', async () => {
    const check = (values: readonly string[]) => {
      const plan: TablePlan = {
        encoding: 'utf-8',
        delimiter: ';',
        decimal: '.',
        headerLine: null,
        firstLine: 1,
        channels: [{ column: 0, name: 'a', unit: '' }],
        time: null,
        timeResolutionSeconds: 0,
        statedRateHz: 1,
      }
      const found: number[] = []
      const scanner = new TableScanner(plan, ([column]) => found.push(...(column ?? [])))
      scanner.push(new TextEncoder().encode(values.map((v) => `${v};x\n`).join('')))
      scanner.finish()
      expect(found).toEqual(values.map(Number))
    }
    // halfway cases and the edges of the exact path
    check([
      '9007199254740993',
      '9007199254740992',
      '9007199254740991',
      '1e23',
      '8.5e22',
      '0.1e-22',
      '123456789012345678901234567890',
      '5e-324',
      '2.2250738585072011e-308',
      '1.7976931348623157e308',
      '0.30000000000000004',
      '-0',
      '+.5e+1',
    ])
    fc.assert(
      fc.property(fc.array(fc.double({ noNaN: true, noDefaultInfinity: true }), { minLength: 1 }), (xs) =>
        check(xs.map(String)),
      ),
    )
    const decimal = fc.tuple(
      fc.bigInt({ min: 0n, max: 10n ** 25n }),
      fc.integer({ min: 0, max: 30 }),
      fc.integer({ min: -40, max: 40 }),
    )
    fc.assert(
      fc.property(fc.array(decimal, { minLength: 1 }), (xs) =>
        check(
          xs.map(([digits, places, exponent]) => {
            const padded = String(digits).padStart(places + 1, '0')
            return `${padded.slice(0, padded.length - places)}.${padded.slice(padded.length - places)}e${exponent}`
          }),
        ),
      ),
    )
  })

  it('where the file is cut into pieces changes nothing', async () => {
    const content = new TextEncoder().encode(
      'time;a;b\r\n0,0;1,25;x\r\n# remark\r\n0,1;"2,5";-3e-4\r\n\r\n0,2;3;4\r\n0,3;3,5;',
    )
    const { plan } = await guessFile(new Blob([content]))
    const scan = (cuts: readonly number[]) => {
      const rows: number[][] = []
      const scanner = new TableScanner(plan, (columns) =>
        columns[0]?.forEach((_, i) => rows.push(columns.map((c) => c[i] ?? NaN))),
      )
      const edges = [0, ...[...cuts].sort((a, b) => a - b), content.length]
      for (let k = 1; k < edges.length; k += 1) scanner.push(content.slice(edges[k - 1], edges[k]))
      scanner.finish()
      return { rows, flaws: scanner.flaws, count: scanner.flawCount }
    }
    const whole = scan([])
    expect(whole.rows).toHaveLength(4)
    fc.assert(
      fc.property(fc.array(fc.integer({ min: 0, max: content.length }), { maxLength: 12 }), (cuts) => {
        expect(scan(cuts)).toEqual(whole)
      }),
    )
  })
})

describe('rate and jitter', () => {
  const stamps = (list: readonly number[], digits = 6) =>
    text(`time,a\n${list.map((t, i) => `${t.toFixed(digits)},${i % 7}`).join('\n')}\n`)

  it('even stamps give the even rate, though they are decimals', async () => {
    for (const rate of [1, 100, 256, 600, 2000, 44_100, 48_000, 51_200]) {
      const recording = await read(
        stamps(
          Array.from({ length: 2000 }, (_, i) => i / rate),
          9,
        ),
      )
      expect(recording.sampleRateHz).toBe(rate)
      expect(recording.timing.jitterPercent).toBeLessThan(0.01)
    }
  })

  it('stamps rounded to milliseconds: the mean rate is taken, and the jitter still shown', async () => {
    const recording = await read(
      stamps(
        Array.from({ length: 3001 }, (_, i) => Math.round((i / 600) * 1000) / 1000),
        3,
      ),
    )
    expect(recording.timing.basis).toBe('mean step')
    expect(recording.sampleRateHz).toBe(600)
    expect(recording.timing.jitterSeconds).toBeCloseTo(1 / 1500, 6)
    expect(recording.timing.jitterPercent).toBeCloseTo(40, 1)
  })

  it('one late sample: 1 / median step, and the worst deviation with its line', async () => {
    const list = Array.from({ length: 101 }, (_, i) => i * 0.01 + (i >= 50 ? 0.0025 : 0))
    const { timing, rowOf } = await read(stamps(list))
    expect([timing.basis, timing.sampleRateHz]).toEqual(['median step', 100])
    expect(timing.jitterSeconds).toBeCloseTo(0.0025, 9)
    expect(timing.jitterPercent).toBeCloseTo(25, 5)
    expect(rowOf(timing.worstFrame)).toBe(52)
  })

  it('rounded stamps with a late sample: the rate is freed of the rounding', async () => {
    const { timing } = await read(stamps(Array.from({ length: 6000 }, (_, i) => i / 600 + (i >= 3000 ? 0.0005 : 0))))
    expect([timing.basis, timing.sampleRateHz]).toEqual(['median step', 600])
    expect(timing.jitterPercent).toBeCloseTo(30, 0)
  })

  it('truly uneven stamps: 1 / median step', async () => {
    const list = [0]
    for (let i = 1; i < 200; i += 1) list.push((list[i - 1] ?? 0) + 0.01 * (1 + 0.2 * Math.sin(i * i)))
    const steps = list
      .slice(1)
      .map((t, i) => t - (list[i] ?? 0))
      .sort((a, b) => a - b)
    const { timing } = await read(stamps(list, 12))
    expect(timing.sampleRateHz).toBeCloseTo(1 / (steps[99] ?? 1), 6)
    expect(timing.jitterPercent).toBeGreaterThan(15)
  })

  it('ISO stamps, with zones, over midnight, and the time of day alone', async () => {
    const iso = await read(
      text(
        'stamp,a\n2026-02-28T23:59:59.990Z,1\n2026-03-01T00:00:00.000Z,2\n2026-03-01T01:00:00.010+01:00,3\n2026-03-01 00:00:00.020Z,4\n',
      ),
    )
    expect(iso.timing.missingStamps).toBe(0)
    expect(iso.sampleRateHz).toBe(100)
    const clock = await read(text('clock;a\n23:59:59,5;1,5\n00:00:00,0;2\n00:00:00,5;3\n00:00:01,0;4\n'))
    expect([clock.sampleRateHz, clock.timing.backwardSteps]).toEqual([2, 0])
  })

  it('milliseconds since 1970 keep their microseconds', async () => {
    const recording = await read(
      text(`time,a\n${Array.from({ length: 500 }, (_, i) => `${1_760_000_000_000 + i * 5},${i}`).join('\n')}\n`),
    )
    expect([recording.sampleRateHz, recording.timing.jitterSeconds < 1e-12]).toEqual([200, true])
  })

  it('time that falls back, or never goes forward, is told with its line', async () => {
    const { timing } = await read(text('time,a\n0,1\n1,1\n2,1\n1.5,1\n3,1\n4,1\n5,1\n'))
    expect(timing.backwardSteps).toBe(1)
    await expect(read(text('time,a\n3,1\n2,1\n1,1\n0,1\n'))).rejects.toMatchObject({ code: 'time-order', row: 3 })
    await expect(read(text('time,a\n3,1\n'))).rejects.toMatchObject({ code: 'bad-rate' })
  })

  it('a stated rate wins over the column; without either it is asked for', async () => {
    expect((await read(text('time,a\n0,1\n1,2\n2,3\n'), { statedRateHz: 50 })).timing).toMatchObject({
      sampleRateHz: 50,
      basis: 'stated',
    })
    await expect(read(text('1\n2\n5\n'))).rejects.toMatchObject({
      code: 'bad-rate',
      message: expect.stringMatching(/State the sampling rate/),
    })
  })

  it('the preview of a long file answers from its beginning', async () => {
    const file = stamps(Array.from({ length: 60_000 }, (_, i) => i / 500))
    const { plan } = await guessFile(file)
    const sample = await tryPlan(file, 'x', plan, budget())
    expect(sample.sampleRateHz).toBe(500)
    expect(sample.source.frames).toBeLessThan(60_000)
    expect(sample.source.frames).toBeGreaterThan(10_000)
  })
})

describe('malformed files', () => {
  const settle = async (file: Blob): Promise<void> => {
    try {
      const recording =
        (await identify(file)) === 'wav' ? await openWav(file, 'x') : await read(file, { statedRateHz: 100 })
      const first = new Float64Array(Math.min(64, recording.source.frames))
      await recording.source.read(0, [0], [first])
      expect(recording.sampleRateHz).toBeGreaterThan(0)
      expect(recording.source.frames).toBeGreaterThan(0)
    } catch (cause) {
      if (!(cause instanceof RecordingError)) throw cause
      expect(cause.code).not.toBe('unexpected')
      expect(cause.message).toMatch(/[.?]$/)
    }
  }

  it('random bytes: a recording or a typed refusal', async () => {
    await fc.assert(
      fc.asyncProperty(fc.uint8Array({ maxLength: 400 }), (bytes) => settle(new Blob([Uint8Array.from(bytes)]))),
      { numRuns: 400 },
    )
  })

  it('WAV with any bytes changed or cut off', async () => {
    const good = makeWavBytes({
      frames: [
        [1, 2],
        [3, 4],
        [5, 6],
      ],
      encoding: 'integer',
      bits: 16,
      extensible: true,
      before: [['LIST', Uint8Array.of(1, 2, 3)]],
    })
    const change = fc.tuple(fc.integer({ min: 12, max: good.length - 1 }), fc.integer({ min: 0, max: 255 }))
    await fc.assert(
      fc.asyncProperty(
        fc.array(change, { maxLength: 6 }),
        fc.integer({ min: 0, max: good.length }),
        (changes, length) => {
          const bytes = good.slice(0, length)
          for (const [at, value] of changes) if (at < length) bytes[at] = value
          return settle(new Blob([bytes]))
        },
      ),
      { numRuns: 800 },
    )
  })

  it('tables of odd cells', async () => {
    const cell = fc.constantFrom(
      '1',
      '2.5',
      '-3e4',
      '',
      'NaN',
      'x',
      '"',
      '"a',
      '1,5',
      ' ',
      '#',
      '//',
      '\t',
      '1e',
      '.',
      '-',
      '∞',
      '2026-01-01',
      '10:00:00',
    )
    const row = fc.array(cell, { maxLength: 5 })
    await fc.assert(
      fc.asyncProperty(
        fc.array(row, { maxLength: 12 }),
        fc.constantFrom(',', ';', '\t', ' ', '|'),
        fc.constantFrom('\n', '\r\n', '\r'),
        (rows, delimiter, end) => settle(text(rows.map((r) => r.join(delimiter)).join(end))),
      ),
      { numRuns: 800 },
    )
  })

  it('binary and endless lines are refused with a place', async () => {
    await expect(read(new Blob([Uint8Array.of(49, 44, 0, 1, 2, 3)]))).rejects.toMatchObject({
      code: 'not-text',
      byte: 2,
    })
    await expect(read(text('1,'.repeat(400_000)))).rejects.toMatchObject({ code: 'line-too-long' })
    await expect(read(text(`1\n2\n${'3'.repeat(3_000_000)}`), { statedRateHz: 1 })).rejects.toMatchObject({
      code: 'line-too-long',
      row: 3,
    })
    await expect(read(text('one\ntwo\n'))).rejects.toMatchObject({ code: 'no-numbers', row: 1 })
  })

  it('a wrong plan on a long file is given up early, with the first reason', async () => {
    const file = text('1;5\n'.repeat(1_500_000))
    const plan = (await guessFile(file)).plan
    const wrong: TablePlan = {
      ...plan,
      delimiter: '\t',
      time: null,
      statedRateHz: 1,
      channels: [{ column: 0, name: 'a', unit: '' }],
    }
    await expect(readTable(file, 'x', wrong, budget(), QUIET)).rejects.toMatchObject({ code: 'no-numbers' })
  })

  it('cancels between pieces and gives its memory back', async () => {
    const file = makeTable(Array.from({ length: 900_000 }, (_, i) => [i / 100, i % 13, (i % 7) - 3]))
    const { plan } = await guessFile(file)
    let pieces = 0
    const stop = { progress: () => void (pieces += 1), cancelled: () => true }
    const own = budget()
    await expect(readTable(file, 'x', plan, own, stop)).rejects.toMatchObject({ code: 'cancelled' })
    expect(pieces).toBe(1)
    expect(own.take(1e9)).toBe(true)
  })
})
