/**
 * `npm run check:access`: tries every route file and the socket with five kinds of caller, on own and foreign objects, against a
 * built server with a database of its own. A route without a rule in tests/access/rules fails. Ends with `N passed, M failed`.
 */
import { spawn } from 'node:child_process'
import { join } from 'node:path'
import { ensureDebianPackages } from './lib/debian.mjs'
import { ensurePackages } from './lib/packages.mjs'
import { ROOT } from './lib/paths.mjs'
import { endProcess, main } from './lib/process.mjs'

await main((stack) => {
  ensureDebianPackages()
  ensurePackages()
  const child = spawn(process.execPath, [join(ROOT, 'node_modules/tsx/dist/cli.mjs'), '--tsconfig', 'scripts/tsconfig.json', 'tests/access/run.ts'], { cwd: ROOT, stdio: 'inherit' })
  stack.add(() => endProcess(child.pid))
  return new Promise(resolve => child.once('exit', code => resolve(code ?? 1)))
})
