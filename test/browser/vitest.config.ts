import { resolve } from 'node:path'
import { defineConfig } from 'vitest/config'

export default defineConfig({
  root: resolve(import.meta.dirname, '../..'),
  test: {
    include: ['test/browser/**/*.test.ts'],
    testTimeout: 60_000,
    hookTimeout: 60_000,
    // A browser a file: more of them than this only slow each other down.
    maxWorkers: 2,
  },
})
