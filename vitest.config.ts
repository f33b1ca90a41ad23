import { fileURLToPath } from 'node:url'
import { defineConfig } from 'vitest/config'

const here = (path: string) => fileURLToPath(new URL(path, import.meta.url))

export default defineConfig({
  resolve: {
    alias: [
      { find: 'server-only', replacement: here('./tests/helpers/empty.ts') },
      { find: /^@\//, replacement: here('./') },
    ],
  },
  test: {
    include: ['tests/{dsp,lib,components,db,app}/**/*.test.{ts,tsx}'],
    environment: 'node',
    testTimeout: 30_000,
    hookTimeout: 60_000,
  },
})
