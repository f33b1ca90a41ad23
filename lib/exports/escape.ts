/*
 * User text inside files that machines read. A title is data wherever it lands: it can end no comment, continue no line, open no
 * string and start no formula.
 */

const transliterations: Readonly<Record<string, string>> = {
  '−': '-',
  '–': '-',
  '—': '-',
  '‘': "'",
  '’': "'",
  '“': '"',
  '”': '"',
  '…': '...',
  '×': 'x',
  '·': '*',
  '°': ' deg',
  µ: 'u',
  μ: 'u',
  Ω: 'ohm',
  ß: 'ss',
  æ: 'ae',
  ø: 'o',
  ł: 'l',
}

/** One line of text: every run of blanks, line ends and control characters becomes one space. */
function oneLine(text: string): string {
  return text.replace(/[\s\p{Cc}\u2028\u2029]+/gu, ' ').trim()
}

/**
 * Printable ASCII on one line, for tools that expect nothing else. Known signs are transliterated, accents dropped, anything else is
 * written `<U+4E2D>`: readable, reversible, and free of direction overrides.
 */
export function asciiLine(text: string): string {
  let result = ''
  for (const character of oneLine(text)) {
    if (/^[\x20-\x7e]$/.test(character)) result += character
    else if (/^\p{Zs}$/u.test(character)) result += ' '
    else result += transliterations[character] ?? withoutAccent(character)
  }
  return result.replace(/ {2,}/g, ' ').trim()
}

function withoutAccent(character: string): string {
  const bare = character.normalize('NFKD').replace(/\p{Mn}/gu, '')
  if (/^[\x20-\x7e]+$/.test(bare)) return bare
  return codePointMark(character)
}

function codePointMark(character: string): string {
  const code = character.codePointAt(0) ?? 0
  return `<U+${code.toString(16).toUpperCase().padStart(4, '0')}>`
}

/**
 * Text for the inside of a C block comment. Comment marks are parted with a space, so are the question marks a trigraph would need
 * (C99 5.2.1.1), and a backslash, which could splice a line (5.1.1.2) and so join a star to a slash, is written as its code point.
 */
export function cComment(text: string): string {
  return asciiLine(text)
    .replace(/\\/g, codePointMark)
    .replace(/\*(?=\/)/g, '* ')
    .replace(/\/(?=\*)/g, '/ ')
    .replace(/\?(?=\?)/g, '? ')
}

/** A C string literal of printable ASCII; quotes, backslashes and question marks are escaped. */
export function cString(text: string): string {
  return `"${asciiLine(text).replace(/["\\?]/g, (mark) => `\\${mark}`)}"`
}

/** The rest of a `#` or `%` comment line in Python or Octave: one line of ASCII can't leave it. */
export function scriptComment(text: string): string {
  return asciiLine(text)
}

/** A Python string literal in double quotes, ASCII only, that reads back to exactly the same text. */
export function pythonString(text: string): string {
  let result = ''
  for (const character of text) {
    const code = character.codePointAt(0) ?? 0
    if (character === '"' || character === '\\') result += `\\${character}`
    else if (code >= 0x20 && code <= 0x7e) result += character
    else if (code <= 0xffff) result += `\\u${code.toString(16).padStart(4, '0')}`
    else result += `\\U${code.toString(16).padStart(8, '0')}`
  }
  return `"${result}"`
}

/** An Octave string literal in single quotes, which knows no escapes but the doubled quote; ASCII, one line. */
export function octaveString(text: string): string {
  return `'${asciiLine(text).replace(/'/g, "''")}'`
}

/**
 * A CSV cell of text (RFC 4180). A cell that a spreadsheet would take for a formula gets an apostrophe in front; the same after a
 * separator inside the cell, because a spreadsheet may split at another separator than the comma. Numbers never come through here.
 */
export function csvText(text: string): string {
  const guarded = oneLine(text).replace(/(^|[;,|])(["'\s]*)([=+\-@＝＋－＠])/gu, "$1$2'$3")
  return /[",;|\t]/.test(guarded) || guarded !== guarded.trim() ? `"${guarded.replace(/"/g, '""')}"` : guarded
}

/** JSON with everything outside ASCII as \u escapes: the same data, and no direction override can hide in the file. */
export function asciiJson(value: unknown): string {
  return JSON.stringify(value, null, 2).replace(
    /[\u007f-\uffff]/g,
    (unit) => `\\u${unit.charCodeAt(0).toString(16).padStart(4, '0')}`,
  )
}
