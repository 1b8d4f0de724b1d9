/** Building the application, only when something that goes into it has changed. */
import { createHash } from 'node:crypto'
import { existsSync, readdirSync, readFileSync, rmSync, statSync } from 'node:fs'
import { join, relative } from 'node:path'
import { readJson, Refusal, ROOT, writePrivateJson } from './paths.mjs'
import { run, withLock } from './process.mjs'

const SOURCES = [
  'app.vue', 'error.vue', 'nuxt.config.ts', 'tailwind.config.ts', 'tsconfig.json', 'package.json', 'package-lock.json',
  'assets', 'components', 'composables', 'layouts', 'middleware', 'modules', 'pages', 'plugins', 'public', 'server', 'shared', 'stores', 'workers',
]

function* filesIn(path) {
  if (!existsSync(path)) return
  if (statSync(path).isFile()) {
    yield path
    return
  }
  for (const name of readdirSync(path).sort()) yield* filesIn(join(path, name))
}

/** SHA-256 of everything that the build is made from. */
export function sourceHash() {
  const hash = createHash('sha256')
  for (const source of SOURCES) {
    for (const file of filesIn(join(ROOT, source))) {
      hash.update(relative(ROOT, file)).update('\0').update(readFileSync(file)).update('\0')
    }
  }
  return hash.digest('hex')
}

const NUXT = join(ROOT, 'node_modules/nuxt/bin/nuxt.mjs')

/** tsconfig.json points into .nuxt, whatever folder a build writes to. */
export function prepareTypes({ again = false } = {}) {
  if (!again && existsSync(join(ROOT, '.nuxt', 'tsconfig.app.json'))) return
  run(process.execPath, [NUXT, 'prepare'], { quiet: true, env: { ...process.env, NUXT_BUILD_DIR: '' } })
}

/** A failed build's words without the table of what it had made. */
function runQuietly(command, args, options) {
  try {
    return run(command, args, { ...options, quiet: true })
  }
  catch (error) {
    throw error instanceof Refusal ? new Refusal(error.message.split('\n').filter(line => !/\d kB( │|$)/.test(line)).slice(0, 80).join('\n')) : error
  }
}

function build({ output, buildDir, entry, stamp }) {
  const source = sourceHash()
  if (existsSync(entry) && readJson(stamp)?.source === source) return
  console.log('Building …')
  rmSync(stamp, { force: true })
  prepareTypes()
  const shown = runQuietly(process.execPath, [NUXT, 'build'], {
    env: { ...process.env, NODE_ENV: 'production', NUXT_BUILD_DIR: buildDir, NITRO_OUTPUT_DIR: output, NUXT_TELEMETRY_DISABLED: '1' },
  })
  if (!existsSync(entry)) throw new Refusal(`The build left no server:\n${shown}`)
  writePrivateJson(stamp, { source })
}

/**
 * Resolves to the built server's file. One build at a time in a folder.
 * `mayBeStale`: an existing build is taken as it is, such as one that was made for a try beforehand.
 */
export async function ensureBuild({ output, buildDir, mayBeStale = false }) {
  const stamp = join(output, 'polewright-build.json')
  const entry = join(output, 'server', 'index.mjs')
  if (!mayBeStale || !existsSync(entry)) await withLock(`${output}.lock`, async () => build({ output, buildDir, entry, stamp }))
  return entry
}
