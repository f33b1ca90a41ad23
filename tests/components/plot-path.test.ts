import { describe, expect, it } from 'vitest'
import { distanceToPath, tracePath, wrappedDegrees } from '@/components/plot/path'
import { linearScale } from '@/components/plot/scale'

const box = { left: 0, top: 0, right: 500, bottom: 200 }
const scale = linearScale([-60, 6], [200, 0])

const pairs = (path: Float64Array): [number, number][] =>
  Array.from({ length: path.length / 2 }, (_, i) => [path[2 * i] ?? 0, path[2 * i + 1] ?? 0])

describe('trace paths', () => {
  it('lose points only where the line through the others shows them within a fraction of a pixel', () => {
    const count = 1024
    const xs = Float64Array.from({ length: count }, (_, i) => (i / (count - 1)) * 500)
    const values = xs.map((x) => -20 + 15 * Math.sin(x / 40))
    const path = tracePath(xs, values, scale, box)
    expect(path.length / 2).toBeLessThan(count / 4)
    for (let i = 0; i < count; i++) {
      expect(distanceToPath(path, xs[i] ?? 0, scale.toPixel(values[i] ?? 0))).toBeLessThan(0.3)
    }
  })

  it('keep the deepest and highest point of every pixel column', () => {
    const count = 100_000
    const xs = Float64Array.from({ length: count }, (_, i) => (i / count) * 500)
    const values = xs.map((_, i) => -20 + (i % 2 === 0 ? 1 : -1) * 5)
    values[43_210] = -55
    const path = tracePath(xs, values, scale, box)
    expect(path.length / 2).toBeLessThanOrEqual(4 * 501)
    expect(Math.max(...pairs(path).map(([, y]) => y))).toBeCloseTo(scale.toPixel(-55), 9)
  })

  it('leave through the floor at −∞ dB and come back', () => {
    const path = tracePath(Float64Array.of(0, 100, 200), Float64Array.of(-3, Number.NEGATIVE_INFINITY, -3), scale, box)
    const points = pairs(path)
    expect(points.every(([x, y]) => Number.isFinite(x) && Number.isFinite(y))).toBe(true)
    expect(points[1]?.[1]).toBeGreaterThan(box.bottom + 100)
  })

  it('lift the pen at NaN', () => {
    const path = tracePath(Float64Array.of(0, 10, 20, 30, 40), Float64Array.of(0, -6, Number.NaN, -6, 0), scale, box)
    expect(pairs(path).filter(([x]) => Number.isNaN(x))).toHaveLength(1)
  })

  it('skip what lies outside the box but for one neighbour on either side', () => {
    const xs = Float64Array.from({ length: 400 }, (_, i) => (i - 100) * 5)
    const values = xs.map((x) => -30 + 20 * Math.sin(x))
    const points = pairs(tracePath(xs, values, scale, box))
    expect(points[0]?.[0]).toBe(-5)
    expect(points.at(-1)?.[0]).toBe(505)
  })
})

describe('wrapped phase', () => {
  it('stays in −180…180, leaving at one side and entering at the other', () => {
    const degrees = Float64Array.from({ length: 100 }, (_, i) => -i * 10)
    const xs = degrees.map((_, i) => i)
    const { xs: outX, values } = wrappedDegrees(xs, degrees)
    expect(outX).toHaveLength(values.length)
    for (const value of values) if (!Number.isNaN(value)) expect(Math.abs(value)).toBeLessThanOrEqual(180)
    const breaks = [...values].flatMap((value, i) => (Number.isNaN(value) ? [[values[i - 1], values[i + 1]]] : []))
    expect(breaks).toEqual([
      [-180, 180],
      [-180, 180],
      [-180, 180],
    ])
  })

  it('crosses the seam where the straight line does', () => {
    const { xs, values } = wrappedDegrees(Float64Array.of(0, 10), Float64Array.of(170, 190))
    expect([...xs]).toEqual([0, 5, Number.NaN, 5, 10])
    expect([...values]).toEqual([170, 180, Number.NaN, -180, -170])
  })
})
