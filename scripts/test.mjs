/**
 * `npm test`: sets itself up as `npm start` does, with a database of its own, and runs everything.
 *
 *   npm test                    all parts; ends with the line `N passed, M failed`
 *   npm test -- api             one part: lint typecheck unit engine nuxt sheets circuits api collab pdf access e2e
 *   npm test -- api FILE …      what follows the name goes to that part, such as a file for vitest
 *
 * What needs neither server nor database runs beside the build; the parts that share the server's machine run one after another.
 */
import { join } from 'node:path'
import { ensureBuild, prepareTypes } from './lib/build.mjs'
import { ensureDebianPackages } from './lib/debian.mjs'
import { startMariadb } from './lib/mariadb.mjs'
import { ensurePackages } from './lib/packages.mjs'
import { PARTS } from './lib/parts.mjs'
import { Refusal, ROOT, TEST_DATA } from './lib/paths.mjs'
import { main } from './lib/process.mjs'

const OUTPUT = join(TEST_DATA, 'output')
const MARIADB = join(TEST_DATA, 'mariadb')

/** Runs one part; beside others its output is held back until it has ended. */
async function runPart(name, { stack, rest = [], held = false }) {
  const started = Date.now()
  let output = ''
  const show = held ? chunk => output += chunk : chunk => process.stdout.write(chunk)
  if (!held) console.log(`\n── ${name}`)
  const env = { ...process.env, FORCE_COLOR: process.stdout.isTTY ? '1' : '0', POLEWRIGHT_TEST_MARIADB: MARIADB, POLEWRIGHT_TEST_OUTPUT: OUTPUT }
  const counts = await PARTS[name].run({ stack, rest, env, show })
  if (held) console.log(`\n── ${name}\n${output}`)
  return { name, ...counts, seconds: Math.round((Date.now() - started) / 1000) }
}

async function inOrder(names, options) {
  const results = []
  for (const name of names) results.push(await runPart(name, options))
  return results
}

/** The build in a process of its own, so that the parts beside it go on. */
const build = () => import('node:child_process').then(({ spawn }) => new Promise((resolve, reject) => {
  const child = spawn(process.execPath, [join(ROOT, 'scripts/test.mjs'), '--build-only'], { cwd: ROOT, stdio: 'inherit' })
  child.once('exit', code => code === 0 ? resolve() : reject(new Refusal('The application could not be built.')))
}))

async function runAll(names, stack, rest) {
  const apart = names.filter(name => !PARTS[name].served)
  const served = names.filter(name => PARTS[name].served)
  const [first] = await Promise.all([
    inOrder(apart, { stack, rest, held: served.length > 0 }),
    served.length > 0 ? build() : null,
  ])
  if (served.length === 0) return first
  const server = await startMariadb(MARIADB)
  stack.add(() => server.stop())
  return [...first, ...await inOrder(served, { stack, rest })]
}

await main(async (stack) => {
  const [name, ...rest] = process.argv.slice(2)
  if (name === '--build-only') return void await ensureBuild({ output: OUTPUT, buildDir: join(TEST_DATA, 'nuxt') })
  if (name !== undefined && !(name in PARTS)) throw new Refusal(`There is no part "${name}". The parts are ${Object.keys(PARTS).join(', ')}.`)
  ensureDebianPackages()
  ensurePackages()
  prepareTypes({ again: true })
  const results = await runAll(name ? [name] : Object.keys(PARTS), stack, rest)
  console.log('')
  for (const one of results) console.log(`${one.name.padEnd(10)} ${String(one.passed).padStart(6)} passed ${String(one.failed).padStart(5)} failed ${String(one.seconds).padStart(5)} s`)
  const sum = key => results.reduce((total, one) => total + one[key], 0)
  console.log(`\n${sum('passed')} passed, ${sum('failed')} failed`)
  return sum('failed') === 0 ? 0 : 1
})
