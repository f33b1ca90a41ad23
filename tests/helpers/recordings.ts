import type { FrameSource } from '@/lib/recordings/types'

/* Recordings for tests, made sample by sample: independent of the code that reads them. */

export interface WavOptions {
  /** Interleaved frames as raw integers for 'integer', as values for 'float'. */
  readonly frames: readonly (readonly number[])[]
  readonly encoding: 'integer' | 'float'
  readonly bits: number
  readonly sampleRateHz?: number
  readonly extensible?: boolean
  readonly validBits?: number
  readonly bigEndian?: boolean
  /** Format code to state instead of the true one. */
  readonly code?: number
  /** Bytes the data chunk claims instead of the true count. */
  readonly claimedBytes?: number
  /** Chunks between the header and the format chunk: [id, bytes]. */
  readonly before?: readonly (readonly [string, Uint8Array])[]
  readonly after?: readonly (readonly [string, Uint8Array])[]
  /** Leave out the padding byte after odd chunks, as careless writers do. */
  readonly unpadded?: boolean
  readonly rf64?: boolean
  /** Bytes a sample takes in the file, when more than its bits need. */
  readonly containerBytes?: number
}

const SUBFORMAT_TAIL = [0, 0, 0, 0, 0x10, 0, 0x80, 0, 0, 0xaa, 0, 0x38, 0x9b, 0x71]

export function makeWavBytes(options: WavOptions): Uint8Array<ArrayBuffer> {
  const little = !options.bigEndian
  const channelCount = options.frames[0]?.length ?? 1
  const sampleBytes = options.containerBytes ?? Math.ceil(options.bits / 8)
  const out: number[] = []
  const ascii = (text: string) => [...text].map((c) => c.charCodeAt(0))
  const number = (value: number, bytes: number) => {
    const list = Array.from({ length: bytes }, (_, k) => Math.floor(value / 256 ** k) % 256)
    return little ? list : list.reverse()
  }
  const chunk = (id: string, body: ArrayLike<number>, claimed = body.length) => {
    out.push(...ascii(id), ...number(claimed, 4))
    for (let i = 0; i < body.length; i += 1) out.push(body[i] ?? 0)
    if (body.length % 2 === 1 && !options.unpadded) out.push(0)
  }
  const data: number[] = []
  for (const frame of options.frames)
    for (const value of frame) data.push(...encodeSample(value, options, sampleBytes, little))
  out.push(...ascii(options.rf64 ? 'RF64' : little ? 'RIFF' : 'RIFX'), 0xff, 0xff, 0xff, 0xff, ...ascii('WAVE'))
  if (options.rf64)
    chunk('ds64', [...number(0, 8), ...number(data.length, 8), ...number(options.frames.length, 8), ...number(0, 4)])
  for (const [id, body] of options.before ?? []) chunk(id, body)
  const code = options.code ?? (options.encoding === 'float' ? 3 : 1)
  const rate = options.sampleRateHz ?? 8000
  const blockAlign = sampleBytes * channelCount
  const format = [
    ...number(options.extensible ? 0xfffe : code, 2),
    ...number(channelCount, 2),
    ...number(rate, 4),
    ...number((rate * blockAlign) % 2 ** 32, 4),
    ...number(blockAlign, 2),
    ...number(options.extensible ? sampleBytes * 8 : options.bits, 2),
  ]
  if (options.extensible)
    format.push(
      ...number(22, 2),
      ...number(options.validBits ?? options.bits, 2),
      ...number(0, 4),
      ...number(code, 2),
      ...SUBFORMAT_TAIL,
    )
  chunk('fmt ', format)
  chunk('data', data, options.rf64 ? 0xffffffff : (options.claimedBytes ?? data.length))
  for (const [id, body] of options.after ?? []) chunk(id, body)
  return Uint8Array.from(out)
}

function encodeSample(value: number, options: WavOptions, bytes: number, little: boolean): number[] {
  const view = new DataView(new ArrayBuffer(8))
  if (options.encoding === 'float') {
    if (options.bits === 32) view.setFloat32(0, value, little)
    else view.setFloat64(0, value, little)
    return Array.from({ length: options.bits / 8 }, (_, k) => view.getUint8(k))
  }
  // two's complement, 8-bit samples as they are (unsigned)
  const wrapped = value < 0 ? value + 256 ** bytes : value
  const list = Array.from({ length: bytes }, (_, k) => Math.floor(wrapped / 256 ** k) % 256)
  return little ? list : list.reverse()
}

export const makeWav = (options: WavOptions): Blob => new Blob([makeWavBytes(options)])

/** Joins rows of cells to a text file. */
export const makeTable = (rows: readonly (readonly (string | number)[])[], delimiter = ',', lineEnd = '\n'): Blob =>
  new Blob([rows.map((row) => row.join(delimiter)).join(lineEnd) + lineEnd])

/** UTF-16 text, little-endian, with its byte order mark. */
export function utf16(text: string): Blob {
  const units = new Uint8Array(2 + 2 * text.length)
  units.set([0xff, 0xfe])
  for (let i = 0; i < text.length; i += 1) {
    units[2 + 2 * i] = text.charCodeAt(i) & 0xff
    units[3 + 2 * i] = text.charCodeAt(i) >> 8
  }
  return new Blob([units])
}

/** All samples of one channel. */
export async function samplesOf(source: FrameSource, channel: number): Promise<Float64Array> {
  const out = new Float64Array(source.frames)
  await source.read(0, [channel], [out])
  return out
}

export const channelOf = async (source: FrameSource, channel: number): Promise<number[]> => [
  ...(await samplesOf(source, channel)),
]

/** Index of the first sample whose bits differ, −1 when none does; quicker on long signals than a deep comparison. */
export function firstDifference(a: Float64Array, b: Float64Array): number {
  if (a.length !== b.length) return Math.min(a.length, b.length)
  return a.findIndex((value, i) => !Object.is(value, b[i]))
}
