/* The drafting office's inks by name, and their values on the page as it is now. */

const inks = [
  'paper',
  'sheet',
  'graph',
  'graph-strong',
  'ink',
  'pencil',
  'spruce',
  'ochre',
  'plum',
  'slate',
  'vermilion',
  'moss',
] as const

export type Ink = (typeof inks)[number]
export type Face = 'mono' | 'text'

export interface Palette {
  readonly inks: Readonly<Record<Ink, string>>
  readonly faces: Readonly<Record<Face, string>>
}

/** What is painted before the page's own properties are known, and where there is no page. */
export const daylight: Palette = {
  inks: {
    paper: '#faf8f2',
    sheet: '#fffefa',
    graph: '#e4dfd1',
    'graph-strong': '#cfc8b4',
    ink: '#18222c',
    pencil: '#5e6670',
    spruce: '#00695f',
    ochre: '#a65f00',
    plum: '#743a86',
    slate: '#34618e',
    vermilion: '#bf3a22',
    moss: '#2e6f43',
  },
  faces: { mono: "'JetBrains Mono', monospace", text: 'Commissioner, sans-serif' },
}

/** Reads the custom properties that hold for an element: the theme's colours and the loaded font families. */
export function readPalette(element: Element): Palette {
  const style = getComputedStyle(element)
  const read = (name: string, fallback: string) => style.getPropertyValue(`--${name}`).trim() || fallback
  const found = { ...daylight.inks }
  for (const ink of inks) found[ink] = read(ink, daylight.inks[ink])
  const family = (name: string, fallback: string) =>
    [style.getPropertyValue(`--font-${name}`).trim(), style.getPropertyValue('--font-noto-math').trim(), fallback]
      .filter(Boolean)
      .join(', ')
  return {
    inks: found,
    faces: { mono: family('jetbrains', daylight.faces.mono), text: family('commissioner', daylight.faces.text) },
  }
}

/** Calls back when the theme changes, by the page's own switch or by the system; returns how to stop listening. */
export function onThemeChange(changed: () => void): () => void {
  const observer = new MutationObserver(changed)
  observer.observe(document.documentElement, { attributes: true, attributeFilter: ['data-theme', 'class', 'style'] })
  const dark = matchMedia('(prefers-color-scheme: dark)')
  dark.addEventListener('change', changed)
  return () => {
    observer.disconnect()
    dark.removeEventListener('change', changed)
  }
}
