import type { Palette } from './palette'
import { outlineBox, rulingLines, type Mark, type Scene, type Stroke } from './scene'
import { markerOutline } from './trace-style'

/** A scene as the text of a stand-alone SVG file. Words are escaped; colours are written out, so that no style sheet is needed. */
export function paintSvg(scene: Scene, palette: Palette, title: string): string {
  const writer = new SvgWriter(palette)
  const body = scene.marks.map((mark) => writer.mark(mark)).join('\n')
  return [
    `<svg xmlns="http://www.w3.org/2000/svg" width="${size(scene.width)}" height="${size(scene.height)}" viewBox="0 0 ${size(scene.width)} ${size(scene.height)}" role="img">`,
    `<title>${escapeText(title)}</title>`,
    `<defs>${writer.definitions.join('')}</defs>`,
    body,
    '</svg>',
    '',
  ].join('\n')
}

export const escapeText = (text: string): string =>
  text.replace(/&/g, '&amp;').replace(/</g, '&lt;').replace(/>/g, '&gt;').replace(/"/g, '&quot;').replace(/'/g, '&#39;')

const size = (value: number): string => String(Math.round(value * 100) / 100)

class SvgWriter {
  readonly definitions: string[] = []

  constructor(private readonly palette: Palette) {}

  mark(mark: Mark): string {
    switch (mark.kind) {
      case 'fill':
        return `<rect ${this.box(mark.box)} fill="${this.ink(mark.ink)}"${opacity(mark.opacity)}/>`
      case 'frame':
        return `<rect ${this.box(mark.box)}${mark.cornerPixels ? ` rx="${size(mark.cornerPixels)}"` : ''} fill="${mark.fill ? this.ink(mark.fill) : 'none'}" ${this.stroke(mark.stroke)}/>`
      case 'path':
        return `<path d="${pathData(mark.points)}" fill="none" stroke-linejoin="round" ${this.stroke(mark.stroke)}/>`
      case 'wash':
        return `<path d="${pathData(mark.outline)}Z" fill="${this.ink(mark.ink)}"${opacity(mark.opacity)}/>`
      case 'hatch': {
        const clip = this.clip(`<path d="${pathData(mark.outline)}Z"/>`)
        const lines = rulingLines(outlineBox(mark.outline), mark.ruling, mark.gapPixels)
        const data: string[] = []
        for (let i = 0; i + 3 < lines.length; i += 4) {
          data.push(
            `M${size(lines[i] ?? 0)} ${size(lines[i + 1] ?? 0)}L${size(lines[i + 2] ?? 0)} ${size(lines[i + 3] ?? 0)}`,
          )
        }
        return `<g clip-path="url(#${clip})"><path d="${data.join('')}" fill="none" ${this.stroke(mark.stroke)}/></g>`
      }
      case 'text': {
        const halo = mark.halo
          ? ` paint-order="stroke" stroke="${this.ink(mark.halo)}" stroke-width="4" stroke-linejoin="round"`
          : ''
        return `<text x="${size(mark.x)}" y="${size(mark.y)}" font-family="${escapeText(this.palette.faces[mark.face])}" font-size="${mark.sizePixels}" font-weight="${mark.weight}" text-anchor="${mark.anchor}" fill="${this.ink(mark.ink)}"${halo}>${escapeText(mark.text)}</text>`
      }
      case 'marker': {
        const look = `fill="${this.ink(mark.fill)}" ${this.stroke(mark.stroke)}`
        if (mark.shape === 'circle')
          return `<circle cx="${size(mark.x)}" cy="${size(mark.y)}" r="${size(mark.radius)}" ${look}/>`
        const points = markerOutline(mark.shape, mark.radius).map(
          ([dx, dy]) => `${size(mark.x + dx)},${size(mark.y + dy)}`,
        )
        return `<polygon points="${points.join(' ')}" ${look}/>`
      }
      case 'clip':
        return `<g clip-path="url(#${this.clip(`<rect ${this.box(mark.box)}/>`)})">\n${mark.marks.map((inner) => this.mark(inner)).join('\n')}\n</g>`
    }
  }

  private ink(name: Parameters<SvgWriter['stroke']>[0]['ink']): string {
    return escapeText(this.palette.inks[name])
  }

  private stroke(style: Stroke): string {
    const dash = style.dash && style.dash.length > 0 ? ` stroke-dasharray="${style.dash.map(size).join(' ')}"` : ''
    const faint = style.opacity === undefined ? '' : ` stroke-opacity="${size(style.opacity)}"`
    return `stroke="${this.ink(style.ink)}" stroke-width="${size(style.widthPixels)}"${dash}${faint}`
  }

  private box(box: { left: number; top: number; right: number; bottom: number }): string {
    return `x="${size(box.left)}" y="${size(box.top)}" width="${size(box.right - box.left)}" height="${size(box.bottom - box.top)}"`
  }

  private clip(shape: string): string {
    const id = `clip-${this.definitions.length + 1}`
    this.definitions.push(`<clipPath id="${id}">${shape}</clipPath>`)
    return id
  }
}

const opacity = (value: number | undefined): string => (value === undefined ? '' : ` fill-opacity="${size(value)}"`)

/** Moves and lines, two decimals; a NaN pair begins a new stroke. */
export function pathData(points: Float64Array): string {
  const data: string[] = []
  let isUp = true
  for (let i = 0; i + 1 < points.length; i += 2) {
    const x = points[i] ?? Number.NaN
    const y = points[i + 1] ?? Number.NaN
    if (Number.isNaN(x)) {
      isUp = true
      continue
    }
    data.push(`${isUp ? 'M' : 'L'}${size(x)} ${size(y)}`)
    isUp = false
  }
  return data.join('')
}
