import { fileURLToPath } from 'node:url'
import { defineConfig } from 'vitest/config'
import { defineVitestProject } from '@nuxt/test-utils/config'

const root = fileURLToPath(new URL('.', import.meta.url)).replace(/\/$/, '')

const alias = {
  '#shared': `${root}/shared`,
  '~~': root,
  '~': root,
  '@@': root,
  '@': root,
}

/** A project of plain Node tests: `tests/<name>`. */
const plain = (name: string, test: Record<string, unknown> = {}) => ({
  resolve: { alias },
  test: { name, root, include: [`tests/${name}/**/*.test.ts`], environment: 'node', testTimeout: 30_000, ...test },
})

/** Tests that talk to a built server on a database of their own; see tests/helpers/setup.ts. */
const served = (name: string, test: Record<string, unknown> = {}) => plain(name, {
  globalSetup: ['tests/helpers/setup.ts'],
  setupFiles: ['tests/helpers/environment.ts'],
  hookTimeout: 60_000,
  ...test,
})

/** Component tests load the whole of Nuxt first (some 4 s), so a run narrowed to other projects or files leaves them out. */
const narrowed = process.argv.slice(2).some(argument => argument.startsWith('--project') || argument.startsWith('tests/'))
const components = narrowed && !process.argv.some(argument => /\bnuxt\b/.test(argument) && !argument.includes('node_modules'))
  ? []
  : [await defineVitestProject({
      test: {
        name: 'nuxt',
        include: ['tests/nuxt/**/*.test.ts'],
        environment: 'nuxt',
        environmentOptions: { nuxt: { domEnvironment: 'happy-dom' } },
      },
    })]

export default defineConfig({
  test: {
    projects: [
      plain('unit'),
      plain('engine'),
      served('api'),
      served('collab'),
      served('pdf', { testTimeout: 120_000 }),
      served('e2e', { testTimeout: 240_000, hookTimeout: 120_000, fileParallelism: false }),
      ...components,
    ],
  },
})
