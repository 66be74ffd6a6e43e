import { readdirSync } from 'node:fs'
import { fileURLToPath } from 'node:url'

const migrations = readdirSync(fileURLToPath(new URL('./migrations', import.meta.url))).sort()

export default defineNuxtConfig({
  modules: [
    '@nuxtjs/tailwindcss', '@pinia/nuxt', '@vueuse/nuxt', 'nuxt-auth-utils', 'nuxt-security', '@nuxt/eslint',
    // The cookie library brings keys for sign-in providers that we do not have; Nitro would copy them at each request.
    (_, nuxt) => {
      delete (nuxt.options.runtimeConfig as Record<string, unknown>).oauth
    },
  ],
  components: [{ path: '~/components', pathPrefix: false }],
  devtools: { enabled: false },
  app: {
    head: {
      htmlAttrs: { lang: 'en' },
      title: 'Potbell',
      meta: [{ name: 'viewport', content: 'width=device-width, initial-scale=1' }],
      link: [{ rel: 'icon', type: 'image/svg+xml', href: '/favicon.svg' }],
    },
  },
  runtimeConfig: {
    public: {
      /** `PUBLIC_URL`, set anew for each page; '' where the shop has none. */
      address: '',
    },
    /** Newest migration of this build; the server is healthy once the database has it. */
    lastMigration: migrations.at(-1) ?? '',
    session: {
      name: 'potbell_session',
      password: '',
      maxAge: 60 * 60 * 24 * 30,
      cookie: { httpOnly: true, sameSite: 'lax', secure: false },
    },
  },
  srcDir: '.',
  ignore: ['tests/**', 'migrations/**', 'seeds/**', 'scripts/**', '.data/**', 'docs/**'],
  routeRules: {
    '/bench/**': { ssr: false },
    '/screen/**': { ssr: false },
  },
  compatibilityDate: '2026-11-01',
  nitro: {
    compressPublicAssets: { brotli: true, gzip: true },
  },
  experimental: {
    // A page is fetched when somebody points at its link, not because its link is in sight: a bar of six links would
    // bring six pages along with the first.
    defaults: { nuxtLink: { prefetchOn: { visibility: false, interaction: true } } },
  },
  vite: {
    // All components are written with setup; the other way of writing them need not travel.
    vue: { features: { optionsAPI: false } },
    // An inlined font would break the content security policy.
    build: { assetsInlineLimit: 0 },
    // Found late, each of these would make the development server reload the page.
    optimizeDeps: { include: ['decimal.js', 'idb', 'reka-ui', 'zod/mini'] },
  },
  telemetry: false,
  hooks: {
    // The living sheet of parts is for development only.
    'pages:extend'(pages) {
      if (process.env.NODE_ENV === 'development') return
      const sheet = pages.findIndex(page => page.path === '/parts')
      if (sheet >= 0) pages.splice(sheet, 1)
    },
  },
  auth: { loadStrategy: 'none' },
  eslint: { config: { stylistic: false } },
  security: {
    rateLimiter: false,
    corsHandler: false,
    requestSizeLimiter: false,
    xssValidator: false,
    allowedMethodsRestricter: false,
    csrf: false,
    hidePoweredBy: true,
    nonce: true,
    sri: true,
    headers: {
      contentSecurityPolicy: {
        'default-src': ['\'none\''],
        'base-uri': ['\'none\''],
        'connect-src': ['\'self\''],
        'font-src': ['\'self\''],
        'form-action': ['\'self\''],
        'frame-ancestors': ['\'none\''],
        'img-src': ['\'self\'', 'data:', 'blob:'],
        'manifest-src': ['\'self\''],
        'media-src': ['\'self\''],
        'object-src': ['\'none\''],
        'script-src': ['\'self\'', '\'nonce-{{nonce}}\'', '\'strict-dynamic\''],
        'script-src-attr': ['\'none\''],
        'style-src': ['\'self\'', '\'nonce-{{nonce}}\''],
        // Bars and cups place themselves by inline style attributes, also when rendered on the server.
        'style-src-attr': ['\'unsafe-inline\''],
        'worker-src': ['\'self\''],
        'upgrade-insecure-requests': false,
      },
      crossOriginEmbedderPolicy: false,
      crossOriginOpenerPolicy: 'same-origin',
      crossOriginResourcePolicy: 'same-origin',
      originAgentCluster: '?1',
      referrerPolicy: 'same-origin',
      strictTransportSecurity: false,
      xContentTypeOptions: 'nosniff',
      xDNSPrefetchControl: 'off',
      xFrameOptions: 'DENY',
      xPermittedCrossDomainPolicies: 'none',
      xXSSProtection: '0',
      permissionsPolicy: {
        'camera': ['self'],
        'display-capture': [],
        'fullscreen': ['self'],
        'geolocation': [],
        'microphone': [],
        'screen-wake-lock': ['self'],
        'serial': ['self'],
      },
    },
  },
  tailwindcss: { cssPath: '~/assets/css/main.css', viewer: false },
})
