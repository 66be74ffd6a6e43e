import { fileURLToPath } from 'node:url'
import { defineConfig } from 'vitest/config'

const root = fileURLToPath(new URL('.', import.meta.url))

/** Tests over HTTP against one running server on a real database: `npm test -- server`. */
export default defineConfig({
  resolve: {
    alias: { '#shared': `${root}shared`, '~': root.replace(/\/$/, '') },
  },
  test: {
    include: ['tests/server/**/*.test.ts'],
    environment: 'node',
    passWithNoTests: false,
    // Vite has a BASE_URL of its own, a path, and would put it in place of the server's address.
    env: process.env.BASE_URL ? { BASE_URL: process.env.BASE_URL } : {},
    // All files share one shop: one at a time, so that what a test counts is its own.
    fileParallelism: false,
    testTimeout: 20_000,
    hookTimeout: 60_000,
  },
})
