import type { Metadata, Viewport } from 'next'
import { cookies } from 'next/headers'
import type { ReactNode } from 'react'
import { THEME_COOKIE, themeFrom } from '@/components/frame/theme'
import * as fonts from './fonts'
import './globals.css'

export const metadata: Metadata = {
  title: { default: 'Polewright', template: '%s · Polewright' },
  description: 'Specify, design, verify, review and release the filters of a measurement.',
}

export const viewport: Viewport = { width: 'device-width', initialScale: 1 }

/** Reading the cookie also keeps every page dynamic, which the nonce in the content policy needs. */
export default async function RootLayout({ children }: { children: ReactNode }) {
  const theme = themeFrom((await cookies()).get(THEME_COOKIE)?.value)
  const families = Object.values(fonts).map((font) => font.variable)
  return (
    <html lang="en" className={families.join(' ')} {...(theme ? { 'data-theme': theme } : {})} suppressHydrationWarning>
      <body>{children}</body>
    </html>
  )
}
