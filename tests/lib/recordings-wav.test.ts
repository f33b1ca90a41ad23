import { describe, expect, it } from 'vitest'
import { RecordingError } from '@/lib/recordings/errors'
import { identify, openWav } from '@/lib/recordings/open'
import { arraysAsSource } from '@/lib/recordings/sample-store'
import { MAX_FILE_BYTES, QUIET } from '@/lib/recordings/types'
import { wavHeader, writeWav } from '@/lib/recordings/wav/write'
import { channelOf, makeWav, makeWavBytes } from '../helpers/recordings'

const refusal = async (file: Blob): Promise<RecordingError> => {
  const outcome = await openWav(file, 'x').then(
    () => null,
    (cause: unknown) => cause,
  )
  if (!(outcome instanceof RecordingError)) throw new Error(`expected a refusal, got ${String(outcome)}`)
  return outcome
}

describe('reading WAV', () => {
  const integers: readonly [number, readonly number[], readonly number[]][] = [
    [8, [0, 1, 127, 128, 129, 255], [-1, -127 / 128, -1 / 128, 0, 1 / 128, 127 / 128]],
    [16, [-32768, -1, 0, 1, 32767], [-1, -1 / 32768, 0, 1 / 32768, 32767 / 32768]],
    [
      24,
      [-8388608, -1, 0, 1, 8388607, 65536, -65537],
      [-1, -1 / 8388608, 0, 1 / 8388608, 8388607 / 8388608, 1 / 128, -65537 / 8388608],
    ],
    [32, [-2147483648, -1, 0, 1, 2147483647], [-1, -1 / 2147483648, 0, 1 / 2147483648, 2147483647 / 2147483648]],
  ]
  for (const bigEndian of [false, true]) {
    for (const extensible of [false, true]) {
      for (const [bits, raw, values] of integers) {
        it(`${bits}-bit integers${extensible ? ', extensible' : ''}${bigEndian ? ', big-endian' : ''}, to the last bit`, async () => {
          const recording = await openWav(
            makeWav({ frames: raw.map((x) => [x]), encoding: 'integer', bits, extensible, bigEndian }),
            'x',
          )
          expect(recording.storage).toBe(`${bits}-bit integer`)
          expect(recording.notes).toEqual([])
          expect(await channelOf(recording.source, 0)).toEqual(values)
        })
      }
      it(`floats${extensible ? ', extensible' : ''}${bigEndian ? ', big-endian' : ''}, past full scale as they are`, async () => {
        const values = [0.1, -2.5, 1e-40, 3e30]
        const narrow = await openWav(
          makeWav({ frames: values.map((x) => [x]), encoding: 'float', bits: 32, extensible, bigEndian }),
          'x',
        )
        expect(await channelOf(narrow.source, 0)).toEqual(values.map(Math.fround))
        const wide = await openWav(
          makeWav({ frames: values.map((x) => [x]), encoding: 'float', bits: 64, extensible, bigEndian }),
          'x',
        )
        expect(await channelOf(wide.source, 0)).toEqual(values)
      })
    }
  }

  it('any number of channels, each in its place', async () => {
    for (const count of [1, 2, 3, 7, 64]) {
      const frames = Array.from({ length: 5 }, (_, i) => Array.from({ length: count }, (_, k) => i * 100 + k))
      const recording = await openWav(makeWav({ frames, encoding: 'integer', bits: 24 }), 'x')
      expect(recording.channels).toHaveLength(count)
      for (const k of [0, count - 1])
        expect(await channelOf(recording.source, k)).toEqual(frames.map((f) => (f[k] ?? NaN) / 8388608))
    }
  })

  it('reads from the middle and across its own blocks', async () => {
    const frames = Array.from({ length: 300_000 }, (_, i) => [i % 30_000, -(i % 30_000)])
    const { source } = await openWav(makeWav({ frames, encoding: 'integer', bits: 16 }), 'x')
    const a = new Float64Array(290_000)
    const b = new Float64Array(290_000)
    await source.read(7, [1, 0], [b, a])
    for (const i of [0, 1, 131_064, 262_137, 289_999]) {
      expect(a[i]).toBe(((i + 7) % 30_000) / 32768)
      expect(b[i]).toBe(-((i + 7) % 30_000) / 32768)
    }
  })

  it('odd chunks before and after the samples, with and without padding', async () => {
    const remark = Uint8Array.from([65, 66, 67])
    for (const unpadded of [false, true]) {
      const file = makeWav({
        frames: [[1], [2], [3]],
        encoding: 'integer',
        bits: 8,
        before: [
          ['LIST', remark],
          ['junk', new Uint8Array(70_001)],
        ],
        after: [['note', remark]],
        unpadded,
      })
      const recording = await openWav(file, 'x')
      expect(await channelOf(recording.source, 0)).toEqual([-127 / 128, -126 / 128, -125 / 128])
    }
  })

  it('20-bit samples in 24 bits and 24 in 32 are left-justified, and it says so', async () => {
    const twenty = await openWav(
      makeWav({ frames: [[0x7ffff0]], encoding: 'integer', bits: 20, extensible: true, validBits: 20 }),
      'x',
    )
    expect(await channelOf(twenty.source, 0)).toEqual([0x7ffff0 / 8388608])
    expect(twenty.notes).toEqual(['20-bit samples in 24-bit places, read as left-justified.'])
    const loose = await openWav(
      makeWav({ frames: [[0x40000000]], encoding: 'integer', bits: 24, containerBytes: 4 }),
      'x',
    )
    expect(await channelOf(loose.source, 0)).toEqual([0.5])
  })

  it('RF64 takes its length from the size table', async () => {
    const recording = await openWav(makeWav({ frames: [[5], [6]], encoding: 'integer', bits: 16, rf64: true }), 'x')
    expect(recording.source.frames).toBe(2)
    expect(recording.notes).toEqual([])
  })

  it('a header that claims gigabytes is held to the file', async () => {
    const recording = await openWav(
      makeWav({ frames: [[1], [2], [3]], encoding: 'integer', bits: 16, claimedBytes: 3_900_000_000 }),
      'x',
    )
    expect(recording.source.frames).toBe(3)
    expect(recording.notes).toEqual(['The header claims 3.90 GB of samples; the file holds 6 bytes, which were read.'])
  })

  it('a header left open or never finished is read to the end of the file', async () => {
    const open = await openWav(
      makeWav({ frames: [[1], [2]], encoding: 'integer', bits: 16, claimedBytes: 0xffffffff }),
      'x',
    )
    expect([open.source.frames, open.notes]).toEqual([
      2,
      ['The header leaves the length open; everything to the end of the file was read.'],
    ])
    const unfinished = await openWav(
      makeWav({ frames: [[1], [2]], encoding: 'integer', bits: 16, claimedBytes: 0 }),
      'x',
    )
    expect(unfinished.source.frames).toBe(2)
    expect(unfinished.notes[0]).toMatch(/never finished/)
  })

  it('an odd size leaves the broken frame out and says so', async () => {
    const whole = makeWavBytes({
      frames: [
        [1, 2],
        [3, 4],
      ],
      encoding: 'integer',
      bits: 16,
    })
    const recording = await openWav(new Blob([whole.slice(0, -1)]), 'x')
    expect(recording.source.frames).toBe(1)
    expect(recording.notes).toContain("The last 3 bytes don't fill a frame of 4 and were left out.")
  })

  it('refuses compressed samples by name', async () => {
    for (const [code, name] of [
      [2, 'Microsoft ADPCM'],
      [6, 'A-law'],
      [7, 'µ-law'],
      [0x11, 'IMA ADPCM'],
      [0x55, 'MPEG layer 3'],
    ] as const) {
      for (const extensible of [false, true]) {
        const problem = await refusal(makeWav({ frames: [[1]], encoding: 'integer', bits: 8, code, extensible }))
        expect(problem.code).toBe('compressed')
        expect(problem.message).toBe(`This WAV is compressed (${name}). Save it as PCM or float samples.`)
      }
    }
    expect((await refusal(makeWav({ frames: [[1]], encoding: 'integer', bits: 8, code: 0x1234 }))).message).toContain(
      '0x1234',
    )
  })

  it('refuses impossible headers, each with its reason and place', async () => {
    const good = makeWavBytes({ frames: [[1], [2]], encoding: 'integer', bits: 16 })
    const changed = (at: number, ...bytes: number[]) => {
      const copy = good.slice()
      copy.set(bytes, at)
      return new Blob([copy])
    }
    const cases: readonly (readonly [Blob, string, RegExp])[] = [
      [changed(24, 0, 0, 0, 0), 'bad-rate', /0 Hz; at least 1 Hz/],
      [changed(22, 0, 0), 'bad-header', /no channels/],
      [changed(34, 0, 0), 'bad-header', /0-bit integer/],
      [changed(34, 64, 0), 'bad-header', /64-bit integer/],
      [changed(32, 1, 0), 'bad-header', /16-bit integer samples in frames of 1 bytes/],
      [new Blob([good.slice(0, 10)]), 'truncated', /inside the WAV header/],
      [new Blob([good.slice(0, 20)]), 'truncated', /format chunk/],
      [new Blob([good.slice(0, 36)]), 'truncated', /no data chunk/],
      [new Blob([good.slice(0, 44)]), 'empty', /holds no samples/],
      [new Blob([good.slice(0, 45)]), 'empty', /less than one sample/],
    ]
    for (const [file, code, message] of cases) {
      const problem = await refusal(file)
      expect([problem.code, problem.message]).toEqual([code, expect.stringMatching(message)])
      expect(problem.byte).toBeTypeOf('number')
    }
  })

  it('a crafted file of empty chunks does not keep the reader busy', async () => {
    const bytes = new Uint8Array(12 + 8 * 200_000)
    bytes.set([0x52, 0x49, 0x46, 0x46, 0, 0, 0, 0, 0x57, 0x41, 0x56, 0x45])
    for (let at = 12; at < bytes.length; at += 8) bytes.set([0x4a, 0x55, 0x4e, 0x4b, 0, 0, 0, 0], at)
    expect((await refusal(new Blob([bytes]))).code).toBe('bad-header')
  })
})

describe('type by content', () => {
  it('tells WAV and text apart, and names what it can not read', async () => {
    expect(await identify(makeWav({ frames: [[1]], encoding: 'integer', bits: 8 }))).toBe('wav')
    expect(await identify(new Blob(['1,2\n3,4\n']))).toBe('table')
    for (const [bytes, word] of [
      ['fLaC....', /FLAC/],
      ['PK\x03\x04....', /ZIP/],
      ['RIFF\0\0\0\0AVI ', /AVI/],
      ['%PDF-1.7', /PDF/],
    ] as const) {
      await expect(identify(new Blob([bytes]))).rejects.toThrow(word)
    }
    await expect(identify(new Blob([]))).rejects.toThrow('The file is empty.')
  })

  it('refuses more than 500 MB with a sentence, before reading', async () => {
    const huge = new Blob(['x'])
    Object.defineProperty(huge, 'size', { value: MAX_FILE_BYTES + 1 })
    await expect(identify(huge)).rejects.toMatchObject({
      code: 'too-large',
      message: expect.stringMatching(/^The file has 500 MB; 500 MB at most/),
    })
  })
})

describe('writing WAV', () => {
  const left = Float64Array.from([0.1, -0.25, 1 / 3, -1])
  const right = Float64Array.from([0, 0.5, -0.75, 1e-9])
  const source = arraysAsSource([left, right])

  it('float samples come back as they were', async () => {
    const wide = await openWav(await writeWav(source, 600, { format: 'float64', scale: 1 }, QUIET), 'x')
    expect([wide.sampleRateHz, wide.storage, wide.notes]).toEqual([600, '64-bit float', []])
    expect(await channelOf(wide.source, 0)).toEqual([...left])
    expect(await channelOf(wide.source, 1)).toEqual([...right])
    const narrow = await openWav(await writeWav(source, 600, { format: 'float32', scale: 2 }, QUIET), 'x')
    expect(await channelOf(narrow.source, 1)).toEqual([...right].map((x) => Math.fround(2 * x)))
  })

  it('24-bit samples are rounded half to even', async () => {
    const steps = arraysAsSource([
      Float64Array.from([0.5, 1.5, 2.5, -0.5, -1.5, 8388607, -8388608, 100.4]).map((x) => x / 8388608),
    ])
    const back = await openWav(await writeWav(steps, 48_000, { format: 'int24', scale: 1 }, QUIET), 'x')
    expect((await channelOf(back.source, 0)).map((x) => x * 8388608)).toEqual(
      [0, 2, 2, -0, -2, 8388607, -8388608, 100].map((x) => x + 0),
    )
  })

  it('an odd number of bytes is padded, three channels are written as extensible', async () => {
    const mono = await writeWav(arraysAsSource([Float64Array.of(0.5)]), 8000, { format: 'int24', scale: 1 }, QUIET)
    expect(mono.size).toBe(44 + 4)
    const three = await writeWav(arraysAsSource([left, right, left]), 8000, { format: 'float32', scale: 1 }, QUIET)
    expect(new DataView(await three.arrayBuffer()).getUint16(20, true)).toBe(0xfffe)
    expect((await openWav(three, 'x')).channels).toHaveLength(3)
  })

  it('more than 4 GiB becomes RF64 with the true sizes', async () => {
    const frames = 600_000_000
    const header = wavHeader('float64', 1, 1000, frames)
    const view = new DataView(header.buffer)
    expect(String.fromCharCode(...header.slice(0, 4), ...header.slice(12, 16))).toBe('RF64ds64')
    expect(Number(view.getBigUint64(28, true))).toBe(frames * 8)
    expect(Number(view.getBigUint64(20, true))).toBe(header.length - 8 + frames * 8)
    expect(Number(view.getBigUint64(36, true))).toBe(frames)
  })

  it('refuses what WAV can not state', () => {
    expect(() => wavHeader('float32', 1, 12.5, 10)).toThrow(/whole hertz; this recording's is 12.5 Hz/)
    expect(() => wavHeader('float64', 9000, 1000, 10)).toThrow(/8191 at most/)
  })
})
