export default defineNuxtConfig({
  compatibilityDate: '2026-11-01',
  srcDir: '.',
  modules: ['@nuxtjs/tailwindcss', '@pinia/nuxt', '@vueuse/nuxt', 'nuxt-auth-utils', 'nuxt-security', '@nuxt/eslint'],
  telemetry: false,
  devtools: { enabled: false },
  ignore: ['tests/**', 'migrations/**', 'seeds/**', 'scripts/**', '.data/**', 'docs/**'],
  components: [{ path: '~/components', pathPrefix: false }],
})
