export default defineNuxtConfig({
  modules: ['@pinia/nuxt', '@nuxtjs/tailwindcss', '@vueuse/nuxt', 'nuxt-auth-utils', 'nuxt-security', '@nuxt/eslint'],
  components: [{ path: '~/components', pathPrefix: false }],
  devtools: { enabled: false },
  app: {
    head: {
      htmlAttrs: { lang: 'en' },
      viewport: 'width=device-width, initial-scale=1, viewport-fit=cover',
      link: [{ rel: 'icon', href: '/icon.svg', type: 'image/svg+xml' }],
      meta: [
        { name: 'theme-color', content: '#f5f1e8', media: '(prefers-color-scheme: light)' },
        { name: 'theme-color', content: '#1c1f20', media: '(prefers-color-scheme: dark)' },
      ],
    },
  },
  css: ['@fontsource-variable/familjen-grotesk/wght.css', '@fontsource-variable/sofia-sans-semi-condensed/wght.css', '~/assets/main.css'],
  runtimeConfig: {
    session: { name: 'ribband', maxAge: 60 * 60 * 24 * 30, password: '', cookie: { sameSite: 'lax', httpOnly: true, secure: false } },
    public: { siteUrl: '' },
  },
  experimental: { typedPages: true, payloadExtraction: false },
  compatibilityDate: '2026-11-01',
  nitro: {
    esbuild: { options: { target: 'node20' } },
    experimental: { asyncContext: false },
  },
  // A small font inside the style sheet would be a data: address, which font-src does not allow.
  vite: { build: { assetsInlineLimit: 0 } },
  typescript: {
    strict: true,
    // Workers, tests and root configs are checked too: they are in tsconfig.tools.json.
    tsConfig: { compilerOptions: { noUncheckedIndexedAccess: true } },
  },
  telemetry: false,
  eslint: { config: { stylistic: { commaDangle: 'always-multiline', braceStyle: 'stroustrup' } } },
  security: {
    strict: false,
    // Limits are ours, kept in PostgreSQL and shared by every site process.
    rateLimiter: false,
    // Bodies are bounded where they are read; a general limiter would buffer uploads.
    requestSizeLimiter: false,
    // Writes are guarded by Origin and same-site cookies (server/middleware/origin.ts); user text is never HTML.
    xssValidator: false,
    corsHandler: false,
    headers: {
      crossOriginEmbedderPolicy: false,
      crossOriginResourcePolicy: 'same-origin',
      referrerPolicy: 'strict-origin-when-cross-origin',
      permissionsPolicy: { camera: [], microphone: [], geolocation: [] },
      contentSecurityPolicy: {
        // The storage's address joins img, media and connect when the site starts (server/plugins/security.ts).
        'default-src': ['\'none\''],
        'script-src': ['\'self\'', '\'nonce-{{nonce}}\'', '\'strict-dynamic\'', '\'wasm-unsafe-eval\''],
        'style-src': ['\'self\'', '\'unsafe-inline\''],
        'img-src': ['\'self\'', 'data:', 'blob:'],
        'media-src': ['\'self\'', 'blob:'],
        'font-src': ['\'self\''],
        'connect-src': ['\'self\''],
        'manifest-src': ['\'self\''],
        'worker-src': ['\'self\'', 'blob:'],
        'base-uri': ['\'none\''],
        'form-action': ['\'self\''],
        'frame-ancestors': ['\'none\''],
        'object-src': ['\'none\''],
        'script-src-attr': ['\'none\''],
        'upgrade-insecure-requests': false,
      },
    },
  },
  tailwindcss: { viewer: false, cssPath: false },
})
