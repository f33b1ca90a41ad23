import type { Mark } from './scene'

/** The marks moved as a whole; hatching moves along, since it is made from its outline. */
export function shifted(marks: readonly Mark[], dx: number, dy: number): Mark[] {
  const points = (flat: Float64Array) => flat.map((value, i) => value + (i % 2 === 0 ? dx : dy))
  const box = ({ left, top, right, bottom }: { left: number; top: number; right: number; bottom: number }) => ({
    left: left + dx,
    top: top + dy,
    right: right + dx,
    bottom: bottom + dy,
  })
  return marks.map((mark): Mark => {
    switch (mark.kind) {
      case 'fill':
      case 'frame':
        return { ...mark, box: box(mark.box) }
      case 'path':
        return { ...mark, points: points(mark.points) }
      case 'wash':
      case 'hatch':
        return { ...mark, outline: points(mark.outline) }
      case 'text':
      case 'marker':
        return { ...mark, x: mark.x + dx, y: mark.y + dy }
      case 'clip':
        return { ...mark, box: box(mark.box), marks: shifted(mark.marks, dx, dy) }
    }
  })
}
