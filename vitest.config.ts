import { fileURLToPath } from 'node:url'
import vue from '@vitejs/plugin-vue'
import { defineConfig } from 'vitest/config'

const root = fileURLToPath(new URL('.', import.meta.url))

/** Unit tests only: pure code, no Nuxt start. Server and browser tests have configs of their own. */
export default defineConfig({
  plugins: [vue()],
  resolve: {
    alias: { '#shared': `${root}shared`, '~': root.replace(/\/$/, '') },
  },
  test: {
    include: ['tests/unit/**/*.test.ts'],
    environment: 'node',
    passWithNoTests: false,
    testTimeout: 30_000,
  },
})
