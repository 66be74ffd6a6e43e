import { fileURLToPath } from 'node:url'
import { defineConfig } from 'vitest/config'

const root = fileURLToPath(new URL('.', import.meta.url))

/** Tests in Chromium against one running server: `npm test -- e2e`. */
export default defineConfig({
  resolve: {
    alias: { '#shared': `${root}shared`, '~': root.replace(/\/$/, '') },
  },
  test: {
    include: ['tests/e2e/**/*.test.ts'],
    environment: 'node',
    passWithNoTests: false,
    // Vite has a BASE_URL of its own, a path, and would put it in place of the server's address.
    env: process.env.BASE_URL ? { BASE_URL: process.env.BASE_URL } : {},
    // One browser at a time on one shop.
    fileParallelism: false,
    testTimeout: 60_000,
    hookTimeout: 120_000,
  },
})
