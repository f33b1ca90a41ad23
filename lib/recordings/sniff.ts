import { RecordingError } from './errors'

/** What a file is by its first bytes; its name is never asked. */
export type FileKind = 'wav' | 'table'

/** Known beginnings of files that can't be read here, with what to do instead. */
const OTHERS: readonly (readonly [signature: string, at: number, sentence: string])[] = [
  ['fLaC', 0, 'This is FLAC, a compressed sound file. Save it as WAV.'],
  ['OggS', 0, 'This is an Ogg sound file. Save it as WAV.'],
  [
    'ID3',
    0,
    'This is an MPEG sound file. Save it as WAV from the uncompressed original: the compression has changed the signal.',
  ],
  ['ftyp', 4, 'This is an MPEG-4 file. Save its sound as WAV.'],
  ['FORM', 0, 'This is an AIFF sound file. Save it as WAV.'],
  ['PK\x03\x04', 0, 'This is a ZIP file or a spreadsheet. Unpack it, or export the sheet as CSV.'],
  ['\x1f\x8b', 0, 'This is a gzip file. Unpack it first.'],
  ['%PDF', 0, 'This is a PDF. Export the samples as CSV or WAV.'],
  ['\x89HDF', 0, 'This is an HDF5 file. Export the samples as CSV or WAV.'],
  ['\x89PNG', 0, 'This is a picture. Choose a WAV or CSV file.'],
  ['\xff\xd8\xff', 0, 'This is a picture. Choose a WAV or CSV file.'],
  ['riff', 0, 'This is a 64-bit wave file of another layout. Save it as WAV or RF64.'],
]

const textAt = (bytes: Uint8Array, at: number, length: number): string =>
  String.fromCharCode(...bytes.subarray(at, at + length))

export function sniff(head: Uint8Array): FileKind {
  if (head.length === 0) throw new RecordingError('empty', 'The file is empty.')
  const first = textAt(head, 0, 4)
  if (first === 'RIFF' || first === 'RF64' || first === 'RIFX' || first === 'BW64') {
    if (head.length < 12)
      throw new RecordingError('truncated', 'The file ends inside the WAV header.', { byte: head.length })
    const form = textAt(head, 8, 4)
    if (form === 'WAVE') return 'wav'
    throw new RecordingError(
      'unknown-type',
      `This is a RIFF file, but it holds ${printable(form)}, not WAVE samples.`,
      { byte: 8 },
    )
  }
  for (const [signature, at, sentence] of OTHERS) {
    if (textAt(head, at, signature.length) === signature) throw new RecordingError('unknown-type', sentence)
  }
  return 'table'
}

const printable = (text: string): string => `“${text.replace(/[^\x20-\x7e]/g, '·')}”`
