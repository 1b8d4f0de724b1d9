/**
 * `npm run bench:engine`: the calculation engine against mathjs and C, interleaved in one run. Prints a table and writes
 * `.bench/engine.json`; ratios are peer over ours. Bundled as the application bundles it, so that what is measured is what runs.
 */
import { spawnSync } from 'node:child_process'
import { mkdirSync } from 'node:fs'
import { join } from 'node:path'
import { ensurePackages } from './lib/packages.mjs'
import { ROOT } from './lib/paths.mjs'
import { main } from './lib/process.mjs'

await main(async () => {
  ensurePackages()
  const { build } = await import('esbuild')
  mkdirSync(join(ROOT, '.bench'), { recursive: true })
  const outfile = join(ROOT, '.bench/engine.mjs')
  await build({ entryPoints: [join(ROOT, 'scripts/bench/engine.ts')], outfile, bundle: true, format: 'esm', platform: 'node', packages: 'external', logLevel: 'error' })
  return spawnSync(process.execPath, ['--expose-gc', outfile], { cwd: ROOT, stdio: 'inherit' }).status ?? 1
})
