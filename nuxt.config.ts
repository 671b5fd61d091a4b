export default defineNuxtConfig({
  compatibilityDate: '2026-06-01',
  srcDir: '.',
  auth: { loadStrategy: 'none' },
  modules: ['@nuxt/eslint', '@pinia/nuxt', '@nuxtjs/tailwindcss', 'nuxt-auth-utils', 'nuxt-security'],
  devtools: { enabled: false },
  telemetry: false,
  css: ['~/assets/css/main.css'],
  components: [{ path: '~/components', pathPrefix: false }],
  postcss: { plugins: { cssnano: false } },
  tailwindcss: { cssPath: '~/assets/css/main.css', viewer: false },
  app: {
    head: {
      htmlAttrs: { lang: 'en' },
      titleTemplate: '%s · Emulside',
      meta: [
        { name: 'description', content: 'Negatives on film for photographs printed by contact on hand-coated paper.' },
        { name: 'theme-color', content: '#F6F1E6' },
        { name: 'apple-mobile-web-app-title', content: 'Emulside' },
      ],
      link: [
        { rel: 'icon', type: 'image/svg+xml', href: '/mark.svg' },
        { rel: 'apple-touch-icon', href: '/icons/apple-touch-icon.png' },
        { rel: 'manifest', href: '/manifest.webmanifest' },
      ],
      // Before the first paint: a flash of daylight in the dim room fogs paper.
      script: [{ innerHTML: 'if(localStorage.getItem("emulside-theme")==="dim")document.documentElement.dataset.theme="dim"', tagPosition: 'head' }],
    },
  },
  // Public pages are server-rendered; what stands behind sign-in is not, so that nobody's page can be cached.
  routeRules: {
    '/s/**': { ssr: false },
    '/account': { ssr: false },
  },
  runtimeConfig: {
    session: { name: 'emulside', password: '', maxAge: 60 * 60 * 24 * 30, cookie: { sameSite: 'lax', httpOnly: true, secure: false } },
    public: { url: '' },
  },
  security: {
    // It would hold whole request bodies in memory; every body is validated by its zod schema instead.
    xssValidator: false,
    rateLimiter: false,
    requestSizeLimiter: false,
    // No other site's page may read answers: no CORS headers at all.
    corsHandler: false,
    headers: {
      contentSecurityPolicy: {
        'img-src': ['\'self\'', 'data:', 'blob:'],
        'worker-src': ['\'self\'', 'blob:'],
        'connect-src': ['\'self\''],
        'font-src': ['\'self\''],
        'upgrade-insecure-requests': false,
      },
      strictTransportSecurity: false,
      crossOriginEmbedderPolicy: false,
    },
  },
  typescript: { strict: true },
  vite: { build: { sourcemap: false } },
})
