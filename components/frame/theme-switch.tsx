'use client'

import { Moon, Sun } from 'lucide-react'
import { THEME_COOKIE } from './theme'

const YEAR_SECONDS = 365 * 24 * 3600

/** Day sheet or night sheet. The choice stays in a cookie, so that the server paints the right one at once. */
export function ThemeSwitch() {
  function toggle() {
    const root = document.documentElement
    const systemDark = matchMedia('(prefers-color-scheme: dark)').matches
    const now = root.dataset.theme ?? (systemDark ? 'dark' : 'light')
    const next = now === 'dark' ? 'light' : 'dark'
    root.dataset.theme = next
    document.cookie = `${THEME_COOKIE}=${next}; path=/; max-age=${YEAR_SECONDS}; samesite=lax`
  }
  return (
    <button
      type="button"
      onClick={toggle}
      aria-label="Switch between light and dark"
      title="Switch between light and dark"
      className="grid size-8 place-items-center rounded text-pencil hover:text-ink"
    >
      <Sun size={16} aria-hidden className="only-dark" />
      <Moon size={16} aria-hidden className="only-light" />
    </button>
  )
}
