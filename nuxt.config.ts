import { fileURLToPath } from 'node:url'

/**
 * The build and output folders can be named from outside, so that a build never overwrites
 * the one that is being served (docker-local/build.mjs).
 */
const buildDir = process.env.STANDMARK_BUILD_DIR
const outputDir = process.env.STANDMARK_OUTPUT_DIR

const LOCALE_FILES = [
  'common', 'account', 'landmarks', 'measures', 'marking', 'clip', 'patient', 'session', 'timeline', 'home', 'clinic', 'errors', 'help',
]

/**
 * Zod tries `new Function` when a schema is made, which the content security policy refuses and reports. Schemas are made
 * while modules load, before any plugin of ours runs: the setting has to be in zod itself, in what the browser gets.
 */
const zodWithoutEval = {
  name: 'zod-without-eval',
  transform: (code: string, id: string, options?: { ssr?: boolean }) => !options?.ssr && /\/zod\/v4\/core\/core\.js$/.test(id)
    ? { code: `${code}\nglobalConfig.jitless = true\n`, map: null }
    : null,
}

export default defineNuxtConfig({
  compatibilityDate: '2026-06-01',
  modules: [
    '@nuxtjs/tailwindcss',
    '@pinia/nuxt',
    '@vueuse/nuxt',
    '@nuxtjs/i18n',
    'nuxt-auth-utils',
    'nuxt-security',
  ],
  auth: { loadStrategy: 'none' },
  ...(buildDir ? { buildDir } : {}),
  telemetry: false,
  devtools: { enabled: false },
  sourcemap: { server: false, client: false },
  alias: { '#server': fileURLToPath(new URL('./server', import.meta.url)) },
  app: {
    head: {
      htmlAttrs: { lang: 'en' },
      title: 'Standmark',
      meta: [
        { name: 'viewport', content: 'width=device-width, initial-scale=1' },
        { name: 'robots', content: 'noindex, nofollow' },
        { name: 'theme-color', content: '#F6F3EC', media: '(prefers-color-scheme: light)' },
        { name: 'theme-color', content: '#161D1E', media: '(prefers-color-scheme: dark)' },
      ],
      link: [{ rel: 'icon', type: 'image/svg+xml', href: '/icon.svg' }],
    },
  },
  css: ['~/assets/css/fonts.css', '~/assets/css/tokens.css', '~/assets/css/base.css'],
  tailwindcss: { viewer: false, cssPath: ['~/assets/css/tailwind.css', { injectPosition: 'first' }], configPath: 'tailwind.config' },
  pinia: { storesDirs: ['stores'] },
  i18n: {
    restructureDir: 'app/i18n',
    defaultLocale: 'en',
    strategy: 'no_prefix',
    detectBrowserLanguage: false,
    locales: [{ code: 'en', language: 'en-US', name: 'English', files: LOCALE_FILES.map(name => `en/${name}.json`) }],
  },
  runtimeConfig: {
    // Name, password and flags of the cookie are set in server/utils/session.ts, where the mode is known.
    session: { password: '', sessionHeader: false },
  },
  // The module's limiter, filter and size check do harm here (see DEVELOPERS.md, decisions); ours are in server/.
  security: {
    rateLimiter: false,
    xssValidator: false,
    requestSizeLimiter: false,
    corsHandler: false,
    allowedMethodsRestricter: false,
    hidePoweredBy: true,
    removeLoggers: false,
    nonce: true,
    sri: true,
    headers: {
      crossOriginEmbedderPolicy: 'require-corp',
      crossOriginOpenerPolicy: 'same-origin',
      crossOriginResourcePolicy: 'same-origin',
      originAgentCluster: '?1',
      referrerPolicy: 'strict-origin-when-cross-origin',
      strictTransportSecurity: { maxAge: 31_536_000, includeSubdomains: true },
      xContentTypeOptions: 'nosniff',
      xDNSPrefetchControl: 'off',
      xFrameOptions: 'DENY',
      xPermittedCrossDomainPolicies: 'none',
      xXSSProtection: '0',
      contentSecurityPolicy: {
        'default-src': ['\'none\''],
        'base-uri': ['\'none\''],
        'object-src': ['\'none\''],
        'frame-ancestors': ['\'none\''],
        'form-action': ['\'self\''],
        'script-src': ['\'self\'', '\'nonce-{{nonce}}\'', '\'strict-dynamic\'', '\'wasm-unsafe-eval\''],
        'script-src-attr': ['\'none\''],
        'style-src': ['\'self\'', '\'nonce-{{nonce}}\''],
        'style-src-attr': ['\'unsafe-inline\''],
        'img-src': ['\'self\'', 'data:', 'blob:'],
        'media-src': ['\'self\'', 'blob:'],
        'font-src': ['\'self\''],
        'connect-src': ['\'self\''],
        'worker-src': ['\'self\''],
        'manifest-src': ['\'self\''],
        'frame-src': ['\'none\''],
        'upgrade-insecure-requests': false,
      },
      permissionsPolicy: {
        'camera': ['self'],
        'microphone': [],
        'geolocation': [],
        'fullscreen': ['self'],
        'display-capture': [],
      },
    },
  },
  typescript: { strict: true, tsConfig: { compilerOptions: { noUncheckedIndexedAccess: true } } },
  nitro: {
    ...(outputDir ? { output: { dir: outputDir } } : {}),
    compressPublicAssets: true,
    typescript: { strict: true },
    esbuild: { options: { target: 'node20' } },
  },
  hooks: {
    // The session routes of nuxt-auth-utils answer from the cookie alone; ours ask the database (server/api/auth, /api/me).
    'nitro:config'(config) {
      config.handlers = config.handlers?.filter(handler => handler?.route !== '/api/_auth/session')
    },
  },
  vite: { build: { target: 'es2022' }, plugins: [zodWithoutEval] },
})
