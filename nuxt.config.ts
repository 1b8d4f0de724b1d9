// Two folders can be moved by the environment, so that several builds of one working copy do not meet:
// NUXT_BUILD_DIR (what Nuxt generates) and NITRO_OUTPUT_DIR (the built server).
const buildDir = process.env.NUXT_BUILD_DIR || '.nuxt'
const outputDir = process.env.NITRO_OUTPUT_DIR

const fontFaces = [
  '@fontsource/barlow/400.css',
  '@fontsource/barlow/400-italic.css',
  '@fontsource/barlow/500.css',
  '@fontsource/barlow/600.css',
  '@fontsource/barlow-semi-condensed/500.css',
  '@fontsource/barlow-semi-condensed/600.css',
  '@fontsource/jetbrains-mono/400.css',
  '@fontsource/jetbrains-mono/600.css',
]

// Keywords of a content security policy, which are quoted within it.
const SELF = '\'self\''
const NONE = '\'none\''
const INLINE = '\'unsafe-inline\''
const DYNAMIC = '\'strict-dynamic\''
const NONCE = '\'nonce-{{nonce}}\''

// Vite's development client writes style elements and listens on a socket of its own.
const developing = process.env.NODE_ENV !== 'production'

export default defineNuxtConfig({
  modules: ['@nuxtjs/tailwindcss', '@pinia/nuxt', '@vueuse/nuxt', 'nuxt-auth-utils', 'nuxt-security', '@nuxt/eslint'],

  components: [{ path: '~/components', pathPrefix: true, extensions: ['vue'] }],
  devtools: { enabled: false },

  app: {
    head: {
      htmlAttrs: { lang: 'en' },
      title: 'Polewright',
      meta: [
        { name: 'viewport', content: 'width=device-width, initial-scale=1' },
        { name: 'color-scheme', content: 'light dark' },
      ],
      link: [{ rel: 'icon', type: 'image/svg+xml', href: '/favicon.svg' }],
    },
  },
  css: [...fontFaces, 'katex/dist/katex.min.css'],

  runtimeConfig: {
    session: {
      name: 'polewright-session',
      password: '',
      sessionHeader: false,
      // How long a session lasts is in its row; the cookie's own age only lets it outlive the browser's window.
      cookie: { httpOnly: true, sameSite: 'lax', secure: true, path: '/', maxAge: 7 * 24 * 60 * 60 },
    },
  },
  srcDir: '.',
  buildDir,
  ignore: ['tests/**', 'scripts/**', 'docs/**', '.build/**', '.data/**', '.test/**', '.bench/**'],
  compatibilityDate: '2026-04-01',
  nitro: {
    experimental: { websocket: true },
    output: outputDir ? { dir: outputDir } : {},
    compressPublicAssets: { gzip: true, brotli: false },
    typescript: { strict: true },
  },
  vite: {
    worker: { format: 'es' },
    optimizeDeps: {
      include: [
        '@tiptap/core',
        '@tiptap/vue-3',
        '@tiptap/starter-kit',
        '@tiptap/extension-collaboration',
        '@tiptap/extension-collaboration-caret',
        '@tiptap/y-tiptap',
        'katex',
        'mathjs',
        'yjs',
        'y-websocket',
        'y-indexeddb',
        'y-protocols/awareness',
      ],
    },
  },
  typescript: {
    strict: true,
    // Tests and scripts have a project of their own (tests/tsconfig.json); component tests belong to the application's.
    tsConfig: {
      exclude: ['unit', 'engine', 'api', 'collab', 'e2e', 'access', 'helpers'].map(folder => `../tests/${folder}/**`)
        .concat('../scripts/**', '../vitest.config.ts', '../eslint.config.mjs'),
    },
  },
  telemetry: false,
  hooks: {
    // Of nuxt-auth-utils only the sealed cookie is used. Its plugin would open a session, and set a cookie, for every visitor and
    // every file; its route would show the cookie's content and drop it without ending the session's row.
    'nitro:config': (nitro) => {
      nitro.plugins = nitro.plugins?.filter(plugin => !plugin?.includes('nuxt-auth-utils/dist/runtime/server/plugins/ws'))
      nitro.handlers = nitro.handlers?.filter(handler => handler?.route !== '/api/_auth/session')
    },
  },

  // Who is signed in comes from GET /api/auth/session; the cookie's content is for the server alone.
  auth: { loadStrategy: 'none' },
  eslint: { config: { stylistic: true } },

  security: {
    nonce: true,
    // What a request may bring and how often is bounded where it is known who asks (server/middleware, shared/limits.ts).
    rateLimiter: false,
    requestSizeLimiter: false,
    xssValidator: false,
    corsHandler: false,
    allowedMethodsRestricter: false,
    hidePoweredBy: true,
    headers: {
      contentSecurityPolicy: {
        'default-src': [NONE],
        'script-src': [SELF, DYNAMIC, NONCE],
        'script-src-attr': [NONE],
        'style-src': developing ? [SELF, INLINE] : [SELF, NONCE],
        // KaTeX places the parts of a formula by style attributes.
        'style-src-attr': [INLINE],
        'img-src': [SELF, 'data:', 'blob:'],
        'font-src': [SELF, 'data:'],
        'connect-src': developing ? [SELF, 'ws:'] : [SELF],
        'worker-src': [SELF],
        'manifest-src': [SELF],
        'form-action': [SELF],
        'frame-ancestors': [NONE],
        'base-uri': [NONE],
        'object-src': [NONE],
        'upgrade-insecure-requests': false,
      },
      crossOriginEmbedderPolicy: false,
      crossOriginOpenerPolicy: 'same-origin',
      crossOriginResourcePolicy: 'same-origin',
      referrerPolicy: 'same-origin',
      // Only where the site is served by https; see server/middleware/03.transport.ts.
      strictTransportSecurity: false,
      xFrameOptions: 'DENY',
      permissionsPolicy: { 'camera': [], 'display-capture': [], 'geolocation': [], 'microphone': [], 'payment': [], 'usb': [] },
    },
  },
  tailwindcss: { cssPath: ['~/assets/css/main.css', { injectPosition: 'first' }], viewer: false },
})
