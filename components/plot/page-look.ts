import { daylight, onThemeChange, readPalette, type Palette } from './palette'

/*
 * What a canvas must know of the page: colours, fonts and pixel density, as one snapshot that changes only when one of them does. Made
 * for useSyncExternalStore, and for anything else that subscribes and asks.
 */

export interface PageLook {
  readonly palette: Palette
  readonly devicePixelRatio: number
  /** Grows when a font has arrived: text painted before it must be painted again. */
  readonly fontLoads: number
}

export const lookWithoutPage: PageLook = { palette: daylight, devicePixelRatio: 1, fontLoads: 0 }

let snapshot: { key: string; look: PageLook } | null = null
/** Reading colours makes the page settle its styles, which a drag can't afford at every move: they are read again only after news. */
let isStale = true
let fontLoads = 0

export function pageLook(): PageLook {
  if (snapshot && !isStale) return snapshot.look
  isStale = false
  const look = {
    palette: readPalette(document.documentElement),
    devicePixelRatio: globalThis.devicePixelRatio || 1,
    fontLoads,
  }
  const key = JSON.stringify(look)
  if (snapshot?.key !== key) snapshot = { key, look }
  return snapshot.look
}

export function onPageLook(heard: () => void): () => void {
  // Whoever subscribes may have missed news until now.
  isStale = true
  const changed = () => {
    isStale = true
    heard()
  }
  const endTheme = onThemeChange(changed)
  const onFonts = () => {
    fontLoads++
    changed()
  }
  document.fonts.addEventListener('loadingdone', onFonts)
  const density = matchMedia(`(resolution: ${globalThis.devicePixelRatio || 1}dppx)`)
  density.addEventListener('change', changed)
  return () => {
    endTheme()
    document.fonts.removeEventListener('loadingdone', onFonts)
    density.removeEventListener('change', changed)
  }
}
