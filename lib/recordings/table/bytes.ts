export const TAB = 9
export const LF = 10
export const CR = 13
export const SPACE = 32
const QUOTE = 34

/** Index after the last line end; 0 when there is none. A CR as last byte is left: an LF may follow in the next bytes. */
export function endOfLines(b: Uint8Array): number {
  for (let i = b.length - 1; i >= 0; i -= 1) {
    if (b[i] === LF || (b[i] === CR && i < b.length - 1)) return i + 1
  }
  return 0
}

export function joined(a: Uint8Array, b: Uint8Array): Uint8Array<ArrayBuffer> {
  const out = new Uint8Array(a.length + b.length)
  out.set(a)
  out.set(b, a.length)
  return out
}

/** Index after the line end that stands at `i`: LF, CR or both. */
export const lineEndAfter = (b: Uint8Array, i: number): number => (b[i] === CR && b[i + 1] === LF ? i + 2 : i + 1)

/** Index of the delimiter or line end that ends the cell at `i`. A quote that is never closed ends with its line. */
export function cellEnd(b: Uint8Array, i: number, delimiter: number): number {
  let inside = false
  for (;;) {
    const c = b[i]
    if (c === LF || c === CR || c === undefined || (c === delimiter && !inside)) return i
    if (c === QUOTE) inside = !inside
    i += 1
  }
}
