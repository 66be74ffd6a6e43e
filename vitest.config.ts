import { fileURLToPath } from 'node:url'
import { defineConfig } from 'vitest/config'

const root = fileURLToPath(new URL('.', import.meta.url))

/** Unit tests only: pure code, no Nuxt start. Server and browser tests have configs of their own. */
export default defineConfig({
  resolve: {
    alias: { '#shared': `${root}shared`, '~': root.replace(/\/$/, '') },
  },
  test: {
    include: ['tests/unit/**/*.test.ts'],
    environment: 'node',
    passWithNoTests: false,
  },
})
