import localFont from 'next/font/local'

/*
 * Greek, Latin Extended and the mathematical signs are files of their own, so that a page that needs none of them loads none of them.
 */

export const literata = localFont({
  src: '../fonts/literata-latin-wght-normal.woff2',
  weight: '200 900',
  variable: '--font-literata-latin',
  display: 'swap',
  adjustFontFallback: 'Times New Roman',
})
export const commissioner = localFont({
  src: '../fonts/commissioner-latin-wght-normal.woff2',
  weight: '100 900',
  variable: '--font-commissioner-latin',
  display: 'swap',
})
export const jetbrains = localFont({
  src: '../fonts/jetbrains-mono-latin-wght-normal.woff2',
  weight: '100 800',
  variable: '--font-jetbrains-latin',
  display: 'swap',
  adjustFontFallback: false,
})

export const literataGreek = localFont({
  src: '../fonts/literata-greek-wght-normal.woff2',
  weight: '200 900',
  variable: '--font-literata-greek',
  preload: false,
  adjustFontFallback: false,
  declarations: [{ prop: 'unicode-range', value: 'U+0370-03FF' }],
})
export const commissionerGreek = localFont({
  src: '../fonts/commissioner-greek-wght-normal.woff2',
  weight: '100 900',
  variable: '--font-commissioner-greek',
  preload: false,
  adjustFontFallback: false,
  declarations: [{ prop: 'unicode-range', value: 'U+0370-03FF' }],
})
export const jetbrainsGreek = localFont({
  src: '../fonts/jetbrains-mono-greek-wght-normal.woff2',
  weight: '100 800',
  variable: '--font-jetbrains-greek',
  preload: false,
  adjustFontFallback: false,
  declarations: [{ prop: 'unicode-range', value: 'U+0370-03FF' }],
})

export const literataExtended = localFont({
  src: '../fonts/literata-latin-ext-wght-normal.woff2',
  weight: '200 900',
  variable: '--font-literata-ext',
  preload: false,
  adjustFontFallback: false,
  declarations: [{ prop: 'unicode-range', value: 'U+0100-02BA, U+1E00-1E9F, U+1EF2-1EFF, U+20A0-20AB' }],
})
export const commissionerExtended = localFont({
  src: '../fonts/commissioner-latin-ext-wght-normal.woff2',
  weight: '100 900',
  variable: '--font-commissioner-ext',
  preload: false,
  adjustFontFallback: false,
  declarations: [{ prop: 'unicode-range', value: 'U+0100-02BA, U+1E00-1E9F, U+1EF2-1EFF, U+20A0-20AB' }],
})
export const jetbrainsExtended = localFont({
  src: '../fonts/jetbrains-mono-latin-ext-wght-normal.woff2',
  weight: '100 800',
  variable: '--font-jetbrains-ext',
  preload: false,
  adjustFontFallback: false,
  declarations: [{ prop: 'unicode-range', value: 'U+0100-02BA, U+1E00-1E9F, U+1EF2-1EFF, U+20A0-20AB' }],
})

export const notoMath = localFont({
  src: '../fonts/noto-sans-math-subset.woff2',
  weight: '400',
  variable: '--font-noto-math',
  preload: false,
  adjustFontFallback: false,
  declarations: [
    {
      prop: 'unicode-range',
      value: 'U+2032, U+2126, U+2190-2193, U+2206, U+2211, U+221A, U+221E, U+2220, U+2248, U+2260, U+2264-2265',
    },
  ],
})
