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
  tailwindcss: { cssPath: ['~/assets/css/main.css', { injectPosition: 'first' }], viewer: false },
})
