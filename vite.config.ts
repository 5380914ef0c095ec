import react from '@vitejs/plugin-react'
import { defineConfig } from 'vitest/config'

export default defineConfig({
  plugins: [react()],
  // The app works from any folder of any server.
  base: './',
  build: {
    target: 'es2022',
    outDir: 'dist',
    // Served from the same computer as a rule: one file loads as fast as several.
    chunkSizeWarningLimit: 1500,
  },
  worker: { format: 'es' },
  test: {
    include: ['test/**/*.test.ts', 'test/**/*.test.tsx'],
    exclude: ['test/browser/**'],
    // Some tests run whole commands; a busy machine must not fail them.
    testTimeout: 60_000,
  },
})
