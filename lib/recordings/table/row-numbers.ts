/** Places where blank or comment lines shift the numbering; beyond these, lines are no longer named. */
const KEPT_SHIFTS = 65_536

/** Knows which line of a file a sample came from, keeping only the places where lines were skipped. */
export class RowNumbers {
  private readonly frames: number[] = []
  private readonly lines: number[] = []
  private lastLine = -1
  private lost = false

  note(frame: number, line: number): void {
    if (line !== this.lastLine + 1 || frame === 0) {
      if (this.frames.length >= KEPT_SHIFTS) this.lost = true
      else {
        this.frames.push(frame)
        this.lines.push(line)
      }
    }
    this.lastLine = line
  }

  /** Line of a sample, counted from 1; undefined when too many lines were skipped to know. */
  of(frame: number): number | undefined {
    if (this.lost) return undefined
    let low = 0
    let high = this.frames.length
    while (low < high) {
      const middle = (low + high) >> 1
      if ((this.frames[middle] ?? 0) <= frame) low = middle + 1
      else high = middle
    }
    const from = this.frames[low - 1]
    const line = this.lines[low - 1]
    return from === undefined || line === undefined ? undefined : line + frame - from
  }
}
