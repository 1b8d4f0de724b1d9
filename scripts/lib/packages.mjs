/** The packages from the lock file: installed when something is missing or of another version. */
import { join } from 'node:path'
import { readJson, Refusal, ROOT } from './paths.mjs'
import { run } from './process.mjs'

const OLDEST_NODE = [20, 19]

export function checkNode() {
  const [major, minor] = process.versions.node.split('.').map(Number)
  if (major > OLDEST_NODE[0] || (major === OLDEST_NODE[0] && minor >= OLDEST_NODE[1])) return
  throw new Refusal(`Polewright needs Node ${OLDEST_NODE.join('.')} or newer; this is ${process.versions.node}.`)
}

/** npm notes what it has installed beside it; packages for other systems are left out there. */
function upToDate() {
  const wanted = readJson(join(ROOT, 'package-lock.json'))?.packages ?? {}
  const installed = readJson(join(ROOT, 'node_modules', '.package-lock.json'))?.packages
  if (!installed) return false
  return Object.entries(wanted).every(([path, entry]) =>
    path === '' || (installed[path] ? installed[path].version === entry.version : Boolean(entry.optional || entry.peer)))
}

export function ensurePackages() {
  checkNode()
  if (upToDate()) return
  console.log('Installing the npm packages …')
  run('npm', ['ci', '--include=dev', '--no-audit', '--no-fund', '--loglevel=error'])
}
