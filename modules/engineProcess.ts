/**
 * Builds the engine's process beside the server: one file with the calculation engine and what reads a sheet, so that a record can
 * name the exact program that computed it by its SHA-256.
 */
import { join } from 'node:path'
import { build } from 'esbuild'
import { defineNuxtModule } from '@nuxt/kit'

export async function buildEngineProcess(root: string, outfile: string): Promise<void> {
  await build({
    entryPoints: [join(root, 'server/calc/process.ts')],
    outfile,
    absWorkingDir: root,
    bundle: true,
    platform: 'node',
    target: 'node20',
    format: 'esm',
    alias: { '#shared': join(root, 'shared') },
    legalComments: 'none',
    banner: { js: 'import { createRequire } from \'node:module\'\nconst require = createRequire(import.meta.url)' },
  })
}

export default defineNuxtModule({
  meta: { name: 'engine-process' },
  setup(_options, nuxt) {
    nuxt.hook('nitro:init', (nitro) => {
      nitro.hooks.hook('compiled', () => buildEngineProcess(nuxt.options.rootDir, join(nitro.options.output.serverDir, 'engine-process.mjs')))
    })
  },
})
