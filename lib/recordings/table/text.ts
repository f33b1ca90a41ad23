import { RecordingError } from '../errors'
import type { TextEncoding } from './plan'

/** Bytes of the beginning that detection looks at. */
export const SAMPLE_BYTES = 262_144

export interface EncodingFound {
  readonly encoding: TextEncoding
  /** Bytes of the byte order mark, to be skipped. */
  readonly markBytes: number
}

/**
 * Finds the encoding of a text by its byte order mark, or by where its zeros stand.
 *
 * @throws RecordingError 'not-text' when the bytes are no text
 */
export function findEncoding(head: Uint8Array): EncodingFound {
  if (head[0] === 0xef && head[1] === 0xbb && head[2] === 0xbf) return { encoding: 'utf-8', markBytes: 3 }
  if (head[0] === 0xff && head[1] === 0xfe) return { encoding: 'utf-16le', markBytes: 2 }
  if (head[0] === 0xfe && head[1] === 0xff) return { encoding: 'utf-16be', markBytes: 2 }
  const zeros = [0, 0]
  let controls = 0
  let firstControl = -1
  for (let i = 0; i < head.length; i += 1) {
    const byte = head[i] ?? 0
    if (byte === 0) zeros[i % 2] = (zeros[i % 2] ?? 0) + 1
    if (byte < 0x09 || (byte > 0x0d && byte < 0x20 && byte !== 0x1a)) {
      controls += 1
      if (firstControl < 0) firstControl = i
    }
  }
  const [even = 0, odd = 0] = zeros
  if (odd > head.length * 0.3 && even === 0) return { encoding: 'utf-16le', markBytes: 0 }
  if (even > head.length * 0.3 && odd === 0) return { encoding: 'utf-16be', markBytes: 0 }
  if (controls > 0) {
    throw new RecordingError(
      'not-text',
      'This is neither a WAV file nor text: it holds bytes that no text has. Choose a WAV, CSV or TSV file.',
      {
        byte: firstControl,
      },
    )
  }
  return { encoding: isUtf8(head) ? 'utf-8' : 'windows-1252', markBytes: 0 }
}

function isUtf8(head: Uint8Array): boolean {
  try {
    // streaming: a character cut off by the end of the sample is no mistake
    new TextDecoder('utf-8', { fatal: true }).decode(head, { stream: true })
    return true
  } catch (cause) {
    if (cause instanceof TypeError) return false
    throw cause
  }
}

export function decodeSample(head: Uint8Array, found: EncodingFound): string {
  return new TextDecoder(found.encoding).decode(head.subarray(found.markBytes), { stream: true })
}

/** Lines of a text; \r\n, \n and \r all end one. The last, unended line is left out when the text was cut off there. */
export function splitLines(text: string, cutOff: boolean): string[] {
  const lines = text.split(/\r\n|\n|\r/)
  if (cutOff || lines[lines.length - 1] === '') lines.pop()
  return lines
}
