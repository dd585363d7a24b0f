const buildDir = process.env.LAPWRIGHT_BUILD_DIR ?? '.nuxt'
const outputDir = process.env.LAPWRIGHT_OUTPUT_DIR ?? '.output'

export default defineNuxtConfig({
  modules: ['@nuxt/eslint', '@nuxtjs/tailwindcss', '@pinia/nuxt', 'nuxt-auth-utils', 'nuxt-security'],
  srcDir: '.',
  // An `app/` folder would move the whole source folder, so its place is said here.
  dir: { app: 'app' },
  buildDir,
  components: [{ path: '~/components', pathPrefix: false }],
  css: [
    '@fontsource/zilla-slab/latin-400.css',
    '@fontsource/zilla-slab/latin-400-italic.css',
    '@fontsource/zilla-slab/latin-500.css',
    '@fontsource/zilla-slab/latin-600.css',
    '@fontsource/zilla-slab/latin-700.css',
    '@fontsource/jetbrains-mono/latin-400.css',
    '@fontsource/jetbrains-mono/latin-500.css',
    '@fontsource/jetbrains-mono/latin-700.css',
  ],
  devtools: { enabled: false },
  telemetry: false,
  ignore: ['storage/**', 'fixtures/**', 'tests/**', 'scripts/**', 'seeds/**', 'migrations/**', '.lapwright/**', '.lapwright-test/**'],
  app: {
    head: {
      htmlAttrs: { lang: 'en' },
      titleTemplate: '%s · Lapwright',
      meta: [{ name: 'viewport', content: 'width=device-width, initial-scale=1' }],
      link: [{ rel: 'icon', type: 'image/svg+xml', href: '/mark.svg' }],
    },
  },
  runtimeConfig: {
    session: { name: 'lapwright', maxAge: 60 * 60 * 24 * 30, password: '', cookie: { secure: true } },
    public: { tileUrl: '', tileAttribution: '' },
  },
  tailwindcss: { cssPath: '~/assets/css/tailwind.css', viewer: false },
  // Who is signed in comes with our own /api/me; the module would ask a second time on every page.
  auth: { loadStrategy: 'none' },
  eslint: { config: { stylistic: true } },
  typescript: {
    strict: true,
    // What runs in plain Node has a configuration of its own, tsconfig.tools.json.
    tsConfig: { exclude: ['../tests/unit/**', '../tests/api/**', '../tests/e2e/**', '../scripts/**', '../seeds/**', '../migrations/**', '../knexfile.ts', '../vitest.config.ts'] },
  },
  security: {
    // These three bite: uploads of 3 MB hang, a note such as "temp < 80" is refused, 150 requests end in 429.
    xssValidator: false,
    rateLimiter: false,
    requestSizeLimiter: false,
    // Nobody else's pages have business here.
    corsHandler: false,
    headers: {
      crossOriginEmbedderPolicy: false,
      contentSecurityPolicy: {
        'default-src': ['\'self\''],
        'base-uri': ['\'none\''],
        'connect-src': ['\'self\''],
        'font-src': ['\'self\''],
        'form-action': ['\'self\''],
        'frame-ancestors': ['\'none\''],
        'img-src': ['\'self\'', 'data:', 'blob:'],
        'object-src': ['\'none\''],
        'script-src': ['\'self\'', '\'nonce-{{nonce}}\'', '\'strict-dynamic\''],
        'script-src-attr': ['\'none\''],
        'style-src': ['\'self\'', '\'nonce-{{nonce}}\''],
        // Sizes that are rendered on the server as `:style` would be zeroed otherwise.
        'style-src-attr': ['\'unsafe-inline\''],
        'upgrade-insecure-requests': false,
      },
      strictTransportSecurity: false,
    },
  },
  nitro: {
    output: { dir: outputDir },
    // Built once as gzip beside the plain file: scripts and styles travel at a third of their size.
    compressPublicAssets: { gzip: true, brotli: false },
    typescript: { tsConfig: { include: ['../types/**/*.d.ts'] } },
  },
  compatibilityDate: '2026-11-01',
})
