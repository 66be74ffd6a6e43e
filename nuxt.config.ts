export default defineNuxtConfig({
  compatibilityDate: '2026-11-01',
  srcDir: '.',
  modules: ['@nuxtjs/tailwindcss', '@pinia/nuxt', '@vueuse/nuxt', 'nuxt-auth-utils', 'nuxt-security', '@nuxt/eslint'],
  telemetry: false,
  devtools: { enabled: false },
  ignore: ['tests/**', 'migrations/**', 'seeds/**', 'scripts/**', '.data/**', 'docs/**'],
  components: [{ path: '~/components', pathPrefix: false }],
  tailwindcss: { cssPath: '~/assets/css/main.css', viewer: false },
  hooks: {
    // The living sheet of parts is for development only.
    'pages:extend'(pages) {
      if (process.env.NODE_ENV === 'development') return
      const sheet = pages.findIndex(page => page.path === '/parts')
      if (sheet >= 0) pages.splice(sheet, 1)
    },
  },
})
