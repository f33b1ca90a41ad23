export type Theme = 'light' | 'dark'

export const THEME_COOKIE = 'polewright-theme'

/** The reader's own choice; null follows the system. */
export function themeFrom(value: string | undefined): Theme | null {
  return value === 'light' || value === 'dark' ? value : null
}
