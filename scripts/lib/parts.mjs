/** The parts of the tests: what each runs, what it needs, and how its result is counted. */
import { spawn } from 'node:child_process'
import { rmSync } from 'node:fs'
import { join } from 'node:path'
import { readJson, ROOT, TEST_DATA } from './paths.mjs'
import { endProcess } from './process.mjs'

const bin = path => join(ROOT, 'node_modules', path)
const VITEST = bin('vitest/vitest.mjs')
const TSX = bin('tsx/dist/cli.mjs')

/** Runs a Node program to its end. `show` gets its output as it comes; it is ended with the run. */
function runNode(args, { stack, env, show }) {
  return new Promise((resolve) => {
    const child = spawn(process.execPath, args, { cwd: ROOT, env, stdio: ['ignore', 'pipe', 'pipe'], detached: true })
    let output = ''
    const take = (chunk) => {
      output += chunk
      show(chunk)
    }
    child.stdout.setEncoding('utf8').on('data', take)
    child.stderr.setEncoding('utf8').on('data', take)
    stack.add(() => endProcess(child.pid))
    child.once('close', code => resolve({ code: code ?? 1, output }))
  })
}

/** A check that is either clean or not. */
const single = args => async (context) => {
  const { code } = await runNode(args, context)
  return code === 0 ? { passed: 1, failed: 0 } : { passed: 0, failed: 1 }
}

/** A program that ends with the line `N passed, M failed`. */
const counted = args => async (context) => {
  const { code, output } = await runNode([...args, ...context.rest], context)
  const line = [...output.matchAll(/^(\d+) passed, (\d+) failed$/gm)].pop()
  if (!line) return { passed: 0, failed: 1 }
  const [passed, failed] = [Number(line[1]), Number(line[2])]
  return { passed, failed: failed === 0 && code !== 0 ? 1 : failed }
}

const vitest = project => async (context) => {
  const report = join(TEST_DATA, `result-${project}.json`)
  rmSync(report, { force: true })
  const { code } = await runNode([VITEST, 'run', '--project', project, '--passWithNoTests', '--reporter=default', '--reporter=json', `--outputFile.json=${report}`, ...context.rest], context)
  const { numPassedTests = 0, numFailedTests = 0 } = readJson(report) ?? {}
  // A file that cannot even be loaded, or an error outside a test, fails without a failed test.
  return { passed: numPassedTests, failed: code !== 0 ? Math.max(numFailedTests, 1) : numFailedTests }
}

/** In the order in which they are told. `served` needs a built server and a database. */
export const PARTS = {
  lint: { run: single([bin('eslint/bin/eslint.js'), '.', '--max-warnings', '0']) },
  typecheck: { run: single([bin('vue-tsc/bin/vue-tsc.js'), '-b', '--noEmit']) },
  unit: { run: vitest('unit') },
  engine: { run: vitest('engine') },
  nuxt: { run: vitest('nuxt') },
  sheets: { run: counted([TSX, 'scripts/check-sheets.ts', join(ROOT, 'tests/sheets')]) },
  circuits: { run: counted([TSX, 'scripts/check-circuits.ts', join(ROOT, 'tests/circuits')]) },
  api: { served: true, run: vitest('api') },
  collab: { served: true, run: vitest('collab') },
  pdf: { served: true, run: vitest('pdf') },
  access: { served: true, run: counted([join(ROOT, 'scripts/check-access.mjs')]) },
  e2e: { served: true, run: vitest('e2e') },
}
