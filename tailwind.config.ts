import type { Config } from 'tailwindcss'

/** Colour names are the drafting office's; their values live as CSS variables in app/globals.css, light and dark. */
const token = (name: string) => `var(--${name})`

export default {
  content: ['./app/**/*.{ts,tsx}', './components/**/*.{ts,tsx}'],
  theme: {
    extend: {
      colors: {
        paper: token('paper'),
        sheet: token('sheet'),
        graph: token('graph'),
        'graph-strong': token('graph-strong'),
        ink: token('ink'),
        pencil: token('pencil'),
        spruce: token('spruce'),
        'spruce-wash': token('spruce-wash'),
        ochre: token('ochre'),
        plum: token('plum'),
        slate: token('slate'),
        vermilion: token('vermilion'),
        moss: token('moss'),
      },
      fontFamily: {
        heading: ['var(--font-literata)', 'var(--font-noto-math)', 'serif'],
        text: ['var(--font-commissioner)', 'var(--font-noto-math)', 'sans-serif'],
        mono: ['var(--font-jetbrains)', 'var(--font-noto-math)', 'monospace'],
      },
      borderRadius: { DEFAULT: '2px' },
    },
  },
} satisfies Config
