import type { Box } from './path'
import { hatchPattern } from './hatch-pattern'
import type { Palette } from './palette'
import { outlineBox, rulingLines, type Mark, type Scene, type Stroke } from './scene'
import { markerOutline } from './trace-style'

/** The part of a 2D context that painting needs. */
export type Brush = Pick<
  CanvasRenderingContext2D,
  | 'save'
  | 'restore'
  | 'setTransform'
  | 'clearRect'
  | 'beginPath'
  | 'closePath'
  | 'moveTo'
  | 'lineTo'
  | 'arc'
  | 'rect'
  | 'roundRect'
  | 'clip'
  | 'createPattern'
  | 'fill'
  | 'stroke'
  | 'fillRect'
  | 'fillText'
  | 'strokeText'
  | 'setLineDash'
  | 'strokeStyle'
  | 'fillStyle'
  | 'lineWidth'
  | 'lineJoin'
  | 'lineCap'
  | 'globalAlpha'
  | 'font'
  | 'textAlign'
  | 'textBaseline'
>

/** How often a canvas was painted since the page opened: moving the pointer must not raise it. */
export const paintCounts = { canvas: 0 }

/** Paints a scene onto a canvas whose bitmap is `devicePixelRatio` times the scene's size. */
export function paintCanvas(brush: Brush, scene: Scene, palette: Palette, devicePixelRatio: number): void {
  paintCounts.canvas++
  brush.setTransform(devicePixelRatio, 0, 0, devicePixelRatio, 0, 0)
  brush.clearRect(0, 0, scene.width, scene.height)
  brush.lineJoin = 'round'
  brush.textBaseline = 'alphabetic'
  for (const mark of scene.marks) paintMark(brush, mark, palette, devicePixelRatio)
}

function paintMark(brush: Brush, mark: Mark, palette: Palette, devicePixelRatio: number): void {
  switch (mark.kind) {
    case 'fill':
      brush.globalAlpha = mark.opacity ?? 1
      brush.fillStyle = palette.inks[mark.ink]
      brush.fillRect(mark.box.left, mark.box.top, mark.box.right - mark.box.left, mark.box.bottom - mark.box.top)
      brush.globalAlpha = 1
      return
    case 'frame':
      brush.beginPath()
      traceBox(brush, mark.box, mark.cornerPixels ?? 0)
      if (mark.fill) {
        brush.fillStyle = palette.inks[mark.fill]
        brush.fill()
      }
      stroke(brush, mark.stroke, palette)
      return
    case 'path':
      brush.beginPath()
      tracePoints(brush, mark.points)
      stroke(brush, mark.stroke, palette)
      return
    case 'wash':
      brush.beginPath()
      tracePoints(brush, mark.outline)
      brush.closePath()
      brush.globalAlpha = mark.opacity
      brush.fillStyle = palette.inks[mark.ink]
      brush.fill()
      brush.globalAlpha = 1
      return
    case 'hatch': {
      brush.beginPath()
      tracePoints(brush, mark.outline)
      brush.closePath()
      const pattern = hatchPattern(brush, mark, palette, devicePixelRatio)
      if (pattern) {
        brush.fillStyle = pattern
        brush.fill()
        return
      }
      brush.save()
      brush.clip()
      const lines = rulingLines(outlineBox(mark.outline), mark.ruling, mark.gapPixels)
      brush.beginPath()
      for (let i = 0; i + 3 < lines.length; i += 4) {
        brush.moveTo(lines[i] ?? 0, lines[i + 1] ?? 0)
        brush.lineTo(lines[i + 2] ?? 0, lines[i + 3] ?? 0)
      }
      stroke(brush, mark.stroke, palette)
      brush.restore()
      return
    }
    case 'text':
      brush.font = `${mark.weight} ${mark.sizePixels}px ${palette.faces[mark.face]}`
      brush.textAlign = mark.anchor === 'middle' ? 'center' : mark.anchor
      if (mark.halo) {
        brush.strokeStyle = palette.inks[mark.halo]
        brush.lineWidth = 4
        brush.setLineDash([])
        brush.strokeText(mark.text, mark.x, mark.y)
      }
      brush.fillStyle = palette.inks[mark.ink]
      brush.fillText(mark.text, mark.x, mark.y)
      return
    case 'marker': {
      brush.beginPath()
      if (mark.shape === 'circle') brush.arc(mark.x, mark.y, mark.radius, 0, 2 * Math.PI)
      else {
        markerOutline(mark.shape, mark.radius).forEach(([dx, dy], i) => {
          if (i === 0) brush.moveTo(mark.x + dx, mark.y + dy)
          else brush.lineTo(mark.x + dx, mark.y + dy)
        })
        brush.closePath()
      }
      brush.fillStyle = palette.inks[mark.fill]
      brush.fill()
      stroke(brush, mark.stroke, palette)
      return
    }
    case 'clip':
      brush.save()
      brush.beginPath()
      // On whole pixels: a soft edge of the clip would be blended into every stroke.
      traceBox(brush, wholePixels(mark.box), 0)
      brush.clip()
      for (const inner of mark.marks) paintMark(brush, inner, palette, devicePixelRatio)
      brush.restore()
      return
  }
}

const wholePixels = ({ left, top, right, bottom }: Box): Box => ({
  left: Math.round(left),
  top: Math.round(top),
  right: Math.round(right),
  bottom: Math.round(bottom),
})

function traceBox(brush: Brush, box: Box, corner: number): void {
  const width = box.right - box.left
  const height = box.bottom - box.top
  if (corner > 0) brush.roundRect(box.left, box.top, width, height, corner)
  else brush.rect(box.left, box.top, width, height)
}

function tracePoints(brush: Brush, points: Float64Array): void {
  let isUp = true
  for (let i = 0; i + 1 < points.length; i += 2) {
    const x = points[i] ?? Number.NaN
    const y = points[i + 1] ?? Number.NaN
    if (Number.isNaN(x)) isUp = true
    else if (isUp) {
      brush.moveTo(x, y)
      isUp = false
    } else brush.lineTo(x, y)
  }
}

function stroke(brush: Brush, style: Stroke, palette: Palette): void {
  brush.strokeStyle = palette.inks[style.ink]
  brush.lineWidth = style.widthPixels
  brush.setLineDash([...(style.dash ?? [])])
  brush.globalAlpha = style.opacity ?? 1
  brush.stroke()
  brush.globalAlpha = 1
}
