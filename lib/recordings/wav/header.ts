import { RecordingError } from '../errors'

/*
 * The header of a WAVE file: RIFF (Microsoft & IBM, Multimedia Programming Interface 1.0, 1991), WAVE_FORMAT_EXTENSIBLE
 * (Microsoft, "Multiple channel audio data and WAVE files", 2001), RF64 / BW64 with its ds64 chunk (EBU Tech 3306; ITU-R BS.2088).
 */

export interface WavFormat {
  readonly encoding: 'integer' | 'float'
  /** Bytes a sample takes in the file: 1–4 for integers, 4 or 8 for floats. */
  readonly containerBytes: 1 | 2 | 3 | 4 | 8
  /** Bits of it that carry the sample; integers are left-justified in their container. */
  readonly validBits: number
  readonly channelCount: number
  readonly sampleRateHz: number
  readonly littleEndian: boolean
}

export interface WavLayout extends WavFormat {
  readonly dataOffset: number
  readonly frames: number
  readonly notes: readonly string[]
}

/** More chunks than any real file has; a crafted file of empty chunks must not keep the reader busy. */
const MAX_CHUNKS = 4096
/** Bytes read at once while walking the chunks. */
const WINDOW = 65_536

const COMPRESSED: Readonly<Record<number, string>> = {
  0x0002: 'Microsoft ADPCM',
  0x0006: 'A-law',
  0x0007: 'µ-law',
  0x0011: 'IMA ADPCM',
  0x0016: 'G.723 ADPCM',
  0x0031: 'GSM 6.10',
  0x0040: 'G.721 ADPCM',
  0x0050: 'MPEG',
  0x0055: 'MPEG layer 3',
  0x00ff: 'AAC',
}

const EXTENSIBLE = 0xfffe
/** The fourteen bytes after the format code in every sub-format identifier that stands for a plain format code. */
const SUBFORMAT_TAIL = [0x00, 0x00, 0x00, 0x00, 0x10, 0x00, 0x80, 0x00, 0x00, 0xaa, 0x00, 0x38, 0x9b, 0x71]

/** Reads small pieces of a file through one cached window. */
class Peek {
  private window = new Uint8Array(0)
  private from = 0
  constructor(readonly file: Blob) {}

  /** Up to `length` bytes at `at`; fewer at the end of the file. */
  async bytes(at: number, length: number): Promise<DataView> {
    if (at < this.from || at + length > this.from + this.window.length) {
      this.window = new Uint8Array(await this.file.slice(at, at + Math.max(length, WINDOW)).arrayBuffer())
      this.from = at
    }
    const start = at - this.from
    const end = Math.min(start + length, this.window.length)
    return new DataView(this.window.buffer, start, Math.max(0, end - start))
  }
}

const idAt = (view: DataView, at: number): string =>
  String.fromCharCode(view.getUint8(at), view.getUint8(at + 1), view.getUint8(at + 2), view.getUint8(at + 3))

const looksLikeId = (view: DataView): boolean => {
  if (view.byteLength < 4) return false
  for (let i = 0; i < 4; i += 1) {
    const byte = view.getUint8(i)
    if (byte < 0x20 || byte > 0x7e) return false
  }
  return true
}

/**
 * Walks the chunks of a WAVE file and says where its samples are. What the header claims is held against what the file holds.
 *
 * @throws RecordingError 'truncated' | 'bad-header' | 'bad-rate' | 'compressed' | 'empty'
 */
export async function readWavLayout(file: Blob): Promise<WavLayout> {
  const peek = new Peek(file)
  const riff = await peek.bytes(0, 12)
  if (riff.byteLength < 12)
    throw new RecordingError('truncated', 'The file ends inside the WAV header.', { byte: riff.byteLength })
  const container = idAt(riff, 0)
  const littleEndian = container !== 'RIFX'
  let wideDataBytes: number | null = null
  let format: WavFormat | null = null
  let data: { offset: number; claimed: number } | null = null
  let at = 12
  for (let chunk = 0; !(format && data); chunk += 1) {
    const head = await peek.bytes(at, 8)
    if (head.byteLength < 8) break
    if (chunk === MAX_CHUNKS) {
      throw new RecordingError('bad-header', `No samples among the first ${MAX_CHUNKS} chunks of the file.`, {
        byte: at,
      })
    }
    const id = idAt(head, 0)
    let size = head.getUint32(4, littleEndian)
    const body = at + 8
    if (id === 'ds64') {
      const sizes = await peek.bytes(body, 24)
      if (sizes.byteLength < 24)
        throw new RecordingError('truncated', 'The file ends inside its size table.', { byte: body })
      wideDataBytes = Number(sizes.getBigUint64(8, littleEndian))
    } else if (id === 'fmt ') {
      format = readFormat(await peek.bytes(body, Math.min(size, 40)), littleEndian, body)
    } else if (id === 'data') {
      if (size === 0xffffffff && wideDataBytes !== null) size = wideDataBytes
      data = { offset: body, claimed: size }
    }
    at = await nextChunk(peek, body, size)
  }
  if (!format) {
    const sentence = data
      ? 'The file has samples, but no format chunk that says what they are.'
      : 'The file ends before its format chunk.'
    throw new RecordingError(data ? 'bad-header' : 'truncated', sentence, { byte: Math.min(at, file.size) })
  }
  if (!data)
    throw new RecordingError('truncated', 'The file ends before its samples: there is no data chunk.', {
      byte: file.size,
    })
  return { ...format, ...(await measureData(peek, format, data)) }
}

const COMMON_IDS = new Set(['fmt ', 'data', 'fact', 'LIST', 'bext', 'cue ', 'JUNK', 'junk', 'iXML', 'smpl', 'PEAK'])

/** Chunks begin at even bytes; some writers forget the padding, which shows by a chunk's name standing in its place. */
async function nextChunk(peek: Peek, body: number, size: number): Promise<number> {
  const end = body + size
  if (size % 2 === 0) return end
  const follows = await peek.bytes(end, 4)
  return follows.byteLength === 4 && COMMON_IDS.has(idAt(follows, 0)) ? end : end + 1
}

function readFormat(view: DataView, littleEndian: boolean, byte: number): WavFormat {
  if (view.byteLength < 16)
    throw new RecordingError('truncated', 'The format chunk is too short: 16 bytes are needed.', { byte })
  let code = view.getUint16(0, littleEndian)
  const channelCount = view.getUint16(2, littleEndian)
  const sampleRateHz = view.getUint32(4, littleEndian)
  const blockAlign = view.getUint16(12, littleEndian)
  const bits = view.getUint16(14, littleEndian)
  let validBits = bits
  if (code === EXTENSIBLE) {
    if (view.byteLength < 40)
      throw new RecordingError('truncated', 'The extended format chunk is too short: 40 bytes are needed.', { byte })
    const stated = view.getUint16(18, littleEndian)
    if (stated > 0 && stated <= bits) validBits = stated
    code = view.getUint16(24, littleEndian)
    if (SUBFORMAT_TAIL.some((expected, i) => view.getUint8(26 + i) !== expected)) {
      throw new RecordingError(
        'compressed',
        'The sample format of this WAV is neither integer nor float. Save it as PCM or float samples.',
        { byte: byte + 24 },
      )
    }
  }
  if (code !== 1 && code !== 3) {
    const codec = COMPRESSED[code]
    const sentence = codec
      ? `This WAV is compressed (${codec}). Save it as PCM or float samples.`
      : `This WAV has the sample format 0x${code.toString(16).padStart(4, '0')}; only integer (PCM) and float samples can be read.`
    throw new RecordingError('compressed', sentence, { byte })
  }
  if (channelCount === 0)
    throw new RecordingError('bad-header', 'The header states no channels; at least 1 is needed.', { byte: byte + 2 })
  if (sampleRateHz === 0)
    throw new RecordingError('bad-rate', 'The header states a rate of 0 Hz; at least 1 Hz is needed.', {
      byte: byte + 4,
    })
  const containerBytes = containerOf(blockAlign, channelCount, bits)
  const encoding = code === 1 ? 'integer' : 'float'
  if (containerBytes === null || (encoding === 'float' ? containerBytes < 4 : containerBytes > 4)) {
    const wanted = encoding === 'integer' ? '8, 16, 24 or 32' : '32 or 64'
    throw new RecordingError(
      'bad-header',
      `The header states ${bits}-bit ${encoding} samples in frames of ${blockAlign} bytes for ${channelCount} channels; ${wanted} bits can be read.`,
      { byte: byte + 12 },
    )
  }
  return { encoding, containerBytes, validBits, channelCount, sampleRateHz, littleEndian }
}

/** Bytes a sample takes: from the frame size where it is stated, else from the bits. Null when they contradict each other. */
function containerOf(blockAlign: number, channelCount: number, bits: number): WavFormat['containerBytes'] | null {
  const fromBits = Math.ceil(bits / 8)
  const bytes = blockAlign === 0 ? fromBits : blockAlign / channelCount
  if (bits === 0 || bytes < fromBits) return null
  return bytes === 1 || bytes === 2 || bytes === 3 || bytes === 4 || bytes === 8 ? bytes : null
}

async function measureData(
  peek: Peek,
  format: WavFormat,
  data: { offset: number; claimed: number },
): Promise<{ dataOffset: number; frames: number; notes: string[] }> {
  const notes: string[] = []
  const held = Math.max(0, peek.file.size - data.offset)
  const frameBytes = format.containerBytes * format.channelCount
  let bytes = data.claimed
  if (bytes === 0 && held >= frameBytes && !(await isChunk(peek, data.offset, format.littleEndian))) {
    bytes = held
    notes.push(
      'The header was never finished (it states 0 bytes of samples); everything to the end of the file was read.',
    )
  } else if (bytes > held) {
    bytes = held
    const unstated = data.claimed >= 0xfffffff0
    if (unstated) notes.push('The header leaves the length open; everything to the end of the file was read.')
    else
      notes.push(
        `The header claims ${megabytes(data.claimed)} of samples; the file holds ${megabytes(held)}, which were read.`,
      )
  }
  const frames = Math.floor(bytes / frameBytes)
  if (frames === 0) {
    throw new RecordingError(
      'empty',
      bytes === 0 ? 'The file holds no samples.' : 'The file holds less than one sample a channel.',
      {
        byte: data.offset,
      },
    )
  }
  if (bytes % frameBytes !== 0)
    notes.push(`The last ${bytes % frameBytes} bytes don't fill a frame of ${frameBytes} and were left out.`)
  if (format.validBits !== format.containerBytes * 8) {
    notes.push(`${format.validBits}-bit samples in ${format.containerBytes * 8}-bit places, read as left-justified.`)
  }
  return { dataOffset: data.offset, frames, notes }
}

/** Whether a sensible chunk stands at `at`, so that a data chunk of 0 bytes really is empty. */
async function isChunk(peek: Peek, at: number, littleEndian: boolean): Promise<boolean> {
  const head = await peek.bytes(at, 8)
  return head.byteLength === 8 && looksLikeId(head) && at + 8 + head.getUint32(4, littleEndian) <= peek.file.size
}

export const megabytes = (bytes: number): string =>
  bytes < 1e3
    ? `${bytes} bytes`
    : bytes < 1e6
      ? `${(bytes / 1e3).toPrecision(3)} kB`
      : bytes < 1e9
        ? `${(bytes / 1e6).toPrecision(3)} MB`
        : `${(bytes / 1e9).toPrecision(3)} GB`

export const describeFormat = (format: WavFormat): string =>
  format.encoding === 'float' ? `${format.containerBytes * 8}-bit float` : `${format.validBits}-bit integer`
