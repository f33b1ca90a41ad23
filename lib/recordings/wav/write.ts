import { createBreath } from '../breathe'
import { RecordingError } from '../errors'
import type { FrameSource, TaskControl } from '../types'

export type WavSampleFormat = 'float32' | 'float64' | 'int24'

const BYTES: Readonly<Record<WavSampleFormat, number>> = { float32: 4, float64: 8, int24: 3 }
/** Frames encoded at once. */
const BLOCK_FRAMES = 32_768
const UINT32_MAX = 0xffffffff

export interface WavWriting {
  readonly format: WavSampleFormat
  /** Every sample is multiplied by this on the way out; 1 leaves it as it is. */
  readonly scale: number
}

/**
 * Header of a WAVE file, up to its first sample. Float samples carry a fact chunk; more than two channels are written as
 * WAVE_FORMAT_EXTENSIBLE; more than 4 GiB as RF64 with a ds64 chunk (EBU Tech 3306).
 *
 * @throws RecordingError 'cannot-save' when WAV can't state the rate or the channel count
 */
export function wavHeader(
  format: WavSampleFormat,
  channelCount: number,
  sampleRateHz: number,
  frames: number,
): Uint8Array<ArrayBuffer> {
  const bytesPerSample = BYTES[format]
  const blockAlign = bytesPerSample * channelCount
  if (!Number.isInteger(sampleRateHz) || sampleRateHz < 1 || sampleRateHz > UINT32_MAX) {
    throw new RecordingError(
      'cannot-save',
      `A WAV file states its rate in whole hertz; this recording's is ${sampleRateHz} Hz. Save it as CSV.`,
    )
  }
  if (blockAlign > 0xffff) {
    throw new RecordingError(
      'cannot-save',
      `A WAV file can't hold ${channelCount} channels of ${bytesPerSample * 8} bits; ${Math.floor(0xffff / bytesPerSample)} at most.`,
    )
  }
  const isFloat = format !== 'int24'
  const extensible = channelCount > 2
  const formatBytes = extensible ? 40 : isFloat ? 18 : 16
  const factBytes = isFloat ? 12 : 0
  const dataBytes = blockAlign * frames
  const plainBytes = 12 + 8 + formatBytes + factBytes + 8
  const riffBytes = plainBytes - 8 + dataBytes + (dataBytes % 2)
  const wide = riffBytes > UINT32_MAX - 64
  const out = new DataView(new ArrayBuffer(plainBytes + (wide ? 36 : 0)))
  let at = 0
  const id = (text: string) => {
    for (let i = 0; i < 4; i += 1) out.setUint8(at++, text.charCodeAt(i))
  }
  const u16 = (value: number) => {
    out.setUint16(at, value, true)
    at += 2
  }
  const u32 = (value: number) => {
    out.setUint32(at, value, true)
    at += 4
  }
  const u64 = (value: number) => {
    out.setBigUint64(at, BigInt(value), true)
    at += 8
  }
  id(wide ? 'RF64' : 'RIFF')
  u32(wide ? UINT32_MAX : riffBytes)
  id('WAVE')
  if (wide) {
    id('ds64')
    u32(28)
    u64(riffBytes + 36)
    u64(dataBytes)
    u64(frames)
    u32(0)
  }
  id('fmt ')
  u32(formatBytes)
  const code = isFloat ? 3 : 1
  u16(extensible ? 0xfffe : code)
  u16(channelCount)
  u32(sampleRateHz)
  u32(Math.min(UINT32_MAX, sampleRateHz * blockAlign))
  u16(blockAlign)
  u16(bytesPerSample * 8)
  if (extensible) {
    u16(22)
    u16(bytesPerSample * 8)
    u32(0) // no loudspeaker positions: these are measurement channels
    u16(code)
    for (const byte of [0, 0, 0, 0, 0x10, 0, 0x80, 0, 0, 0xaa, 0, 0x38, 0x9b, 0x71]) out.setUint8(at++, byte)
  } else if (isFloat) {
    u16(0)
  }
  if (isFloat) {
    id('fact')
    u32(4)
    u32(Math.min(UINT32_MAX, frames))
  }
  id('data')
  u32(wide ? UINT32_MAX : dataBytes)
  return new Uint8Array(out.buffer)
}

/** Encodes one channel among interleaved ones. 24-bit samples are rounded half to even and must lie within full scale. */
function encodeChannel(
  out: DataView,
  writing: WavWriting,
  channel: number,
  channelCount: number,
  samples: Float64Array,
  frames: number,
): void {
  const bytes = BYTES[writing.format]
  const stride = bytes * channelCount
  const { scale } = writing
  let at = channel * bytes
  for (let i = 0; i < frames; i += 1, at += stride) {
    const value = (samples[i] ?? 0) * scale
    if (writing.format === 'float64') out.setFloat64(at, value, true)
    else if (writing.format === 'float32') out.setFloat32(at, value, true)
    else {
      const step = Math.max(-8_388_608, Math.min(8_388_607, roundHalfEven(value * 8_388_608)))
      out.setUint16(at, step & 0xffff, true)
      out.setInt8(at + 2, step >> 16)
    }
  }
}

function roundHalfEven(value: number): number {
  const rounded = Math.round(value)
  return rounded - value === 0.5 && rounded % 2 !== 0 ? rounded - 1 : rounded
}

/** Writes all channels of a source, block by block; the parts are handed to the browser as they are made, so memory stays small. */
export async function writeWav(
  source: FrameSource,
  sampleRateHz: number,
  writing: WavWriting,
  control: TaskControl,
): Promise<Blob> {
  const { frames, channelCount } = source
  const parts: Blob[] = [new Blob([wavHeader(writing.format, channelCount, sampleRateHz, frames)])]
  const channels = Array.from({ length: channelCount }, (_, channel) => channel)
  const blockFrames = Math.max(1, Math.min(BLOCK_FRAMES, Math.floor((1 << 22) / channelCount)))
  const breath = createBreath(control)
  for (let start = 0; start < frames; start += blockFrames) {
    const count = Math.min(blockFrames, frames - start)
    const outs = channels.map(() => new Float64Array(count))
    await source.read(start, channels, outs)
    const bytes = new ArrayBuffer(count * channelCount * BYTES[writing.format])
    const view = new DataView(bytes)
    outs.forEach((samples, channel) => encodeChannel(view, writing, channel, channelCount, samples, count))
    parts.push(new Blob([bytes]))
    await breath(start + count, frames)
  }
  if ((frames * channelCount * BYTES[writing.format]) % 2 === 1) parts.push(new Blob([new Uint8Array(1)]))
  return new Blob(parts, { type: 'audio/wav' })
}
