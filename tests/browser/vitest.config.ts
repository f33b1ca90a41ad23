import { fileURLToPath } from 'node:url'
import { defineConfig } from 'vitest/config'

const root = fileURLToPath(new URL('../../', import.meta.url))

/** The tests that drive a browser against the production build: one after another, since they share the machine's two cores with it. */
export default defineConfig({
  root,
  resolve: { alias: [{ find: /^@\//, replacement: root }] },
  test: {
    include: ['tests/browser/**/*.test.ts'],
    environment: 'node',
    globalSetup: ['./tests/browser/serve.ts'],
    fileParallelism: false,
    maxWorkers: 1,
    testTimeout: 120_000,
    hookTimeout: 120_000,
  },
})
