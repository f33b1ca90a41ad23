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
    environment: 'node',
    testTimeout: 30_000,
    hookTimeout: 60_000,
    // Only the second project needs a database server, and starts one when a test of its own is to run.
    projects: [
      { extends: true, test: { name: 'plain', include: ['tests/{dsp,lib,components}/**/*.test.{ts,tsx}'] } },
      {
        extends: true,
        test: {
          name: 'database',
          include: ['tests/{db,app}/**/*.test.{ts,tsx}'],
          globalSetup: ['./tests/helpers/database-global.ts'],
          setupFiles: ['./tests/helpers/database-setup.ts'],
        },
      },
    ],
  },
})
