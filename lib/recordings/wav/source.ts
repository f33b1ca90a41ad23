import { RecordingError } from '../errors'
import type { FrameSource } from '../types'
import type { WavLayout } from './header'

/** Bytes read and decoded at once. */
const BLOCK_BYTES = 1 << 20

/**
 * Decodes one channel out of interleaved samples. Integers become fractions of full scale, exactly: x / 2^(bits − 1), 8-bit
 * samples being unsigned around 128.
 */
function decodeChannel(
  bytes: DataView,
  layout: WavLayout,
  channel: number,
  out: Float64Array,
  from: number,
  frames: number,
): void {
  const { containerBytes, channelCount, littleEndian } = layout
  const stride = containerBytes * channelCount
  let at = channel * containerBytes
  const end = from + frames
  if (layout.encoding === 'float') {
    if (containerBytes === 4)
      for (let i = from; i < end; i += 1, at += stride) out[i] = bytes.getFloat32(at, littleEndian)
    else for (let i = from; i < end; i += 1, at += stride) out[i] = bytes.getFloat64(at, littleEndian)
  } else if (containerBytes === 1) {
    for (let i = from; i < end; i += 1, at += stride) out[i] = (bytes.getUint8(at) - 128) / 128
  } else if (containerBytes === 2) {
    for (let i = from; i < end; i += 1, at += stride) out[i] = bytes.getInt16(at, littleEndian) / 32_768
  } else if (containerBytes === 3) {
    const low = littleEndian ? 0 : 1
    const high = littleEndian ? 2 : 0
    for (let i = from; i < end; i += 1, at += stride) {
      out[i] = (bytes.getInt8(at + high) * 65_536 + bytes.getUint16(at + low, littleEndian)) / 8_388_608
    }
  } else {
    for (let i = from; i < end; i += 1, at += stride) out[i] = bytes.getInt32(at, littleEndian) / 2_147_483_648
  }
}

/** The samples of a WAVE file, read from the file whenever they are asked for: the file itself is the store. */
export function wavSource(file: Blob, layout: WavLayout): FrameSource {
  const stride = layout.containerBytes * layout.channelCount
  const blockFrames = Math.max(1, Math.floor(BLOCK_BYTES / stride))
  return {
    frames: layout.frames,
    channelCount: layout.channelCount,
    async read(startFrame, channels, outs) {
      const total = outs[0]?.length ?? 0
      for (let done = 0; done < total; done += blockFrames) {
        const frames = Math.min(blockFrames, total - done)
        const offset = layout.dataOffset + (startFrame + done) * stride
        const bytes = new DataView(await sliceOf(file, offset, frames * stride))
        for (const [position, channel] of channels.entries()) {
          const out = outs[position]
          if (out) decodeChannel(bytes, layout, channel, out, done, frames)
        }
      }
    },
  }
}

async function sliceOf(file: Blob, offset: number, length: number): Promise<ArrayBuffer> {
  let buffer: ArrayBuffer
  try {
    buffer = await file.slice(offset, offset + length).arrayBuffer()
  } catch (cause) {
    throw new RecordingError(
      'truncated',
      'The file can no longer be read. Was it moved or changed? Choose it again.',
      { byte: offset },
      cause,
    )
  }
  if (buffer.byteLength < length)
    throw new RecordingError('truncated', 'The file ends inside its samples.', { byte: offset + buffer.byteLength })
  return buffer
}
