import type { Scale } from './scale'

/*
 * From samples to as few strokes as the pixels can tell apart. A path is flat: x₀, y₀, x₁, y₁ …; a NaN pair lifts the pen.
 */

export interface Box {
  readonly left: number
  readonly top: number
  readonly right: number
  readonly bottom: number
}

const PEN_UP = Number.NaN

/** Strokes may leave the box by this many of its heights before they are cut; clipping hides the rest. */
const BEYOND = 2

/** A polyline may miss a dropped point by this much. */
const TOLERANCE_PIXELS = 0.12

/**
 * The stroke of a trace in a box. `xs` are pixel positions (rising), `values` what `scale` turns into y; both of one length.
 * −∞ leaves through the floor and +∞ through the top; NaN lifts the pen. At most four points a pixel column: first, least, most, last.
 */
export function tracePath(xs: Float64Array, values: Float64Array, scale: Scale, box: Box): Float64Array {
  const reach = (box.bottom - box.top) * BEYOND
  const highest = box.top - reach
  const lowest = box.bottom + reach
  const count = Math.min(xs.length, values.length)
  const [first, last] = visibleRange(xs, count, box)
  const pen = new Pen()
  let i = first
  while (i <= last) {
    const column = Math.floor(xs[i] ?? 0)
    let end = i + 1
    while (end <= last && Math.floor(xs[end] ?? 0) === column) end++
    if (end - i > 4) strokeColumn(pen, xs, values, scale, i, end, highest, lowest)
    else for (let k = i; k < end; k++) pen.to(xs[k] ?? 0, clampedY(scale, values[k] ?? Number.NaN, highest, lowest))
    i = end
  }
  return pen.finish()
}

/** Indices that can be seen, with one more on either side so that strokes run out of the box. */
function visibleRange(xs: Float64Array, count: number, box: Box): [number, number] {
  let first = 0
  let last = count - 1
  while (first < last && (xs[first + 1] ?? 0) < box.left) first++
  while (last > first && (xs[last - 1] ?? 0) > box.right) last--
  return [first, last]
}

function strokeColumn(
  pen: Pen,
  xs: Float64Array,
  values: Float64Array,
  scale: Scale,
  from: number,
  end: number,
  highest: number,
  lowest: number,
): void {
  let least = from
  let most = from
  for (let k = from; k < end; k++) {
    const value = values[k] ?? Number.NaN
    if (Number.isNaN(value)) {
      // A gap inside one column: keep it rather than bridge it.
      for (let j = from; j < end; j++) pen.to(xs[j] ?? 0, clampedY(scale, values[j] ?? Number.NaN, highest, lowest))
      return
    }
    if (value < (values[least] ?? 0)) least = k
    if (value > (values[most] ?? 0)) most = k
  }
  const kept = [from, Math.min(least, most), Math.max(least, most), end - 1]
  let before = -1
  for (const k of kept) {
    if (k !== before) pen.to(xs[k] ?? 0, clampedY(scale, values[k] ?? Number.NaN, highest, lowest))
    before = k
  }
}

function clampedY(scale: Scale, value: number, highest: number, lowest: number): number {
  const y = scale.toPixel(value)
  return y < highest ? highest : y > lowest ? lowest : y
}

/** Collects points and drops those that the straight line through their neighbours already shows (opening-cone simplification). */
class Pen {
  private points = new Float64Array(256)
  private length = 0
  private anchorX = Number.NaN
  private anchorY = Number.NaN
  private heldX = Number.NaN
  private heldY = Number.NaN
  private low = Number.NEGATIVE_INFINITY
  private high = Number.POSITIVE_INFINITY

  to(x: number, y: number): void {
    if (!Number.isFinite(x) || !Number.isFinite(y)) {
      this.lift()
      return
    }
    if (Number.isNaN(this.anchorX)) {
      this.anchor(x, y)
      return
    }
    const dx = x - this.anchorX
    if (dx < 1e-9) {
      // A vertical stroke: nothing to gain from a cone.
      this.flush()
      this.anchor(x, y)
      return
    }
    const slope = (y - this.anchorY) / dx
    const give = TOLERANCE_PIXELS / dx
    if (!Number.isNaN(this.heldX) && (slope < this.low || slope > this.high)) {
      this.anchor(this.heldX, this.heldY)
      this.heldX = Number.NaN
      this.to(x, y)
      return
    }
    this.heldX = x
    this.heldY = y
    this.low = Math.max(this.low, slope - give)
    this.high = Math.min(this.high, slope + give)
  }

  lift(): void {
    if (Number.isNaN(this.anchorX)) return
    this.flush()
    this.push(PEN_UP, PEN_UP)
    this.anchorX = Number.NaN
  }

  finish(): Float64Array {
    this.flush()
    return this.points.slice(0, this.length)
  }

  private flush(): void {
    if (!Number.isNaN(this.heldX)) this.push(this.heldX, this.heldY)
    this.heldX = Number.NaN
  }

  private anchor(x: number, y: number): void {
    this.push(x, y)
    this.anchorX = x
    this.anchorY = y
    this.heldX = Number.NaN
    this.low = Number.NEGATIVE_INFINITY
    this.high = Number.POSITIVE_INFINITY
  }

  private push(x: number, y: number): void {
    if (this.length + 2 > this.points.length) {
      const larger = new Float64Array(this.points.length * 2)
      larger.set(this.points)
      this.points = larger
    }
    this.points[this.length++] = x
    this.points[this.length++] = y
  }
}

/**
 * Degrees folded into −180…180: where the trace crosses the seam it leaves at one side, the pen is lifted, and it enters at the other.
 * Returns new, longer arrays of one length.
 */
export function wrappedDegrees(xs: Float64Array, degrees: Float64Array): { xs: Float64Array; values: Float64Array } {
  const outX: number[] = []
  const outY: number[] = []
  const turnOf = (value: number) => Math.floor((value + 180) / 360)
  for (let i = 0; i < degrees.length; i++) {
    const x = xs[i] ?? Number.NaN
    const value = degrees[i] ?? Number.NaN
    const before = degrees[i - 1] ?? Number.NaN
    const turn = turnOf(value)
    let from = turnOf(before)
    // More than a few turns between neighbours can't be told apart on screen: lift the pen once.
    if (Math.abs(turn - from) > 4) {
      outX.push(PEN_UP)
      outY.push(PEN_UP)
      from = turn
    }
    const beforeX = xs[i - 1] ?? x
    while (Number.isFinite(from) && Number.isFinite(turn) && from !== turn) {
      const up = turn > from
      const seam = (up ? from + 1 : from) * 360 - 180
      const at = beforeX + ((x - beforeX) * (seam - before)) / (value - before)
      outX.push(at, PEN_UP, at)
      outY.push(up ? 180 : -180, PEN_UP, up ? -180 : 180)
      from += up ? 1 : -1
    }
    outX.push(x)
    outY.push(value - turn * 360)
  }
  return { xs: Float64Array.from(outX), values: Float64Array.from(outY) }
}

/** Distance in pixels from a point to a path, over the part of it that `keep` accepts. */
export function distanceToPath(
  path: Float64Array,
  x: number,
  y: number,
  keep: (y: number) => boolean = () => true,
): number {
  let nearest = Number.POSITIVE_INFINITY
  for (let i = 0; i + 3 < path.length; i += 2) {
    const ax = path[i] ?? Number.NaN
    const ay = path[i + 1] ?? Number.NaN
    const bx = path[i + 2] ?? Number.NaN
    const by = path[i + 3] ?? Number.NaN
    const dx = bx - ax
    const dy = by - ay
    const squared = dx * dx + dy * dy
    if (Number.isNaN(squared)) continue
    const along = squared === 0 ? 0 : Math.min(1, Math.max(0, ((x - ax) * dx + (y - ay) * dy) / squared))
    if (!keep(ay + along * dy)) continue
    nearest = Math.min(nearest, Math.hypot(x - ax - along * dx, y - ay - along * dy))
  }
  return nearest
}
