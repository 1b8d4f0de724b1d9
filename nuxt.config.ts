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

export default defineNuxtConfig({
  modules: ['@nuxtjs/tailwindcss', '@pinia/nuxt', '@vueuse/nuxt', 'nuxt-auth-utils', '@nuxt/eslint'],

  components: [{ path: '~/components', pathPrefix: true }],
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
    /** What a visitor's address bar shows; links in e-mails and the Origin check go by it. */
    siteUrl: 'http://127.0.0.1:3000',
    session: {
      name: 'polewright-session',
      password: '',
      sessionHeader: false,
      cookie: { httpOnly: true, sameSite: 'lax', secure: true, path: '/' },
    },
  },
  srcDir: '.',
  buildDir,
  ignore: ['tests/**', 'scripts/**', 'docs/**', '.data/**', '.test/**', '.bench/**'],
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

  // The hash figures are OWASP's for scrypt (N = 2^17, r = 8, p = 1); maxMemory must exceed 128·N·r bytes.
  auth: {
    loadStrategy: 'none',
    hash: { scrypt: { cost: 2 ** 17, blockSize: 8, parallelization: 1, maxMemory: 256 * 1024 * 1024 } },
  },
  eslint: { config: { stylistic: true } },
  tailwindcss: { cssPath: ['~/assets/css/main.css', { injectPosition: 'first' }], viewer: false },
})
