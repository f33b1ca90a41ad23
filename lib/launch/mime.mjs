/*
 * Reads a mail message as far as the local mailbox needs it: headers (RFC 5322), words in them (RFC 2047), and the text and HTML parts of
 * nested multiparts (RFC 2045, RFC 2046). Attachments are passed over.
 */

/**
 * @typedef {object} MailPart
 * @property {Map<string, string>} headers names in lower case, unfolded
 * @property {Buffer} body
 */

/**
 * @param {Buffer} raw
 * @returns {MailPart}
 */
function splitPart(raw) {
  // Bytes as characters one to one, so that offsets are byte offsets.
  const text = raw.toString('latin1')
  const gap = /\r?\n\r?\n/.exec(text)
  const startsEmpty = /^\r?\n/.exec(text)
  const headEnd = startsEmpty ? 0 : (gap?.index ?? text.length)
  const bodyStart = startsEmpty ? startsEmpty[0].length : gap ? gap.index + gap[0].length : text.length
  const headers = new Map()
  for (const line of raw
    .subarray(0, headEnd)
    .toString('utf8')
    .replace(/\r?\n[ \t]+/g, ' ')
    .split(/\r?\n/)) {
    const colon = line.indexOf(':')
    if (colon > 0) headers.set(line.slice(0, colon).trim().toLowerCase(), line.slice(colon + 1).trim())
  }
  return { headers, body: raw.subarray(bodyStart) }
}

/**
 * @param {Buffer} bytes
 * @param {string} charset
 */
function decodeCharset(bytes, charset) {
  try {
    return new TextDecoder(charset || 'utf-8').decode(bytes)
  } catch (error) {
    // An unknown character set: its letters may be wrong, but the message is still readable.
    if (error instanceof RangeError) return bytes.toString('latin1')
    throw error
  }
}

/** @param {string} text quoted-printable without soft line breaks */
const unquote = (text) =>
  Buffer.from(
    text.replace(/=([0-9A-Fa-f]{2})/g, (_, hex) => String.fromCharCode(Number.parseInt(hex, 16))),
    'latin1',
  )

/**
 * Decodes the words of a header that were encoded for having other letters than ASCII's.
 * @param {string} text
 */
export function decodeWords(text) {
  return text
    .replace(/(\?=)[ \t]+(=\?)/g, '$1$2') // blanks between two such words belong to neither
    .replace(/=\?([^?*]+)(?:\*[^?]*)?\?([bq])\?([^?]*)\?=/gi, (_, charset, kind, word) =>
      decodeCharset(
        kind.toLowerCase() === 'b' ? Buffer.from(word, 'base64') : unquote(word.replaceAll('_', ' ')),
        charset,
      ),
    )
}

/**
 * @param {string} header
 * @param {string} name
 */
function parameter(header, name) {
  const found = new RegExp(`;\\s*${name}="?([^";]+)"?`, 'i').exec(header)
  return found?.[1]?.trim()
}

/** @param {MailPart} part */
function decodeBody({ headers, body }) {
  const charset = parameter(headers.get('content-type') ?? '', 'charset') ?? 'utf-8'
  const encoding = (headers.get('content-transfer-encoding') ?? '7bit').toLowerCase()
  if (encoding === 'base64') return decodeCharset(Buffer.from(body.toString('latin1'), 'base64'), charset)
  if (encoding === 'quoted-printable')
    return decodeCharset(unquote(body.toString('latin1').replace(/=[ \t]*\r?\n/g, '')), charset)
  return decodeCharset(body, charset)
}

/**
 * @param {MailPart} part
 * @param {{ text?: string, html?: string }} found
 * @param {number} depth
 */
function collect(part, found, depth) {
  const type = part.headers.get('content-type') ?? 'text/plain'
  if (/^attachment/i.test(part.headers.get('content-disposition') ?? '')) return
  const boundary = /^multipart\//i.test(type) ? parameter(type, 'boundary') : undefined
  if (boundary !== undefined && depth < 8) {
    const pieces = `\n${part.body.toString('latin1')}`.split(
      new RegExp(`\\r?\\n--${boundary.replace(/[^\w]/g, '\\$&')}`),
    )
    // The first piece is before the first boundary; the one that begins with two dashes closes the part.
    for (const piece of pieces.slice(1)) {
      if (piece.startsWith('--')) break
      collect(splitPart(Buffer.from(piece.replace(/^[ \t]*\r?\n/, ''), 'latin1')), found, depth + 1)
    }
  } else if (/^text\/html/i.test(type)) found.html ??= decodeBody(part)
  else if (/^text\/plain/i.test(type)) found.text ??= decodeBody(part)
}

/**
 * @param {Buffer} raw a message as it came over SMTP
 * @returns {{ from: string, to: string, subject: string, text: string, html: string }} empty where the message has none
 */
export function readMail(raw) {
  const message = splitPart(raw)
  /** @type {{ text?: string, html?: string }} */
  const found = {}
  collect(message, found, 0)
  const header = (/** @type {string} */ name) => decodeWords(message.headers.get(name) ?? '')
  return {
    from: header('from'),
    to: header('to'),
    subject: header('subject'),
    text: found.text ?? '',
    html: found.html ?? '',
  }
}
