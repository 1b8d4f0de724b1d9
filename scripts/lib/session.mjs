/** One run at a time in a data folder: a second one says where the first is. */
import { existsSync, mkdirSync, readFileSync, rmSync } from 'node:fs'
import { join } from 'node:path'
import { DATA, readJson, Refusal, writePrivateJson } from './paths.mjs'
import { endProcess, isAlive } from './process.mjs'

const FILE = join(DATA, 'running.json')

/** A server that outlived its run, which was killed; told from a stranger with the same number by its command line. */
async function endOrphan(pid) {
  if (!isAlive(pid)) return
  const command = existsSync(`/proc/${pid}/cmdline`) ? readFileSync(`/proc/${pid}/cmdline`, 'utf8') : ''
  if (command.includes('server/index.mjs') || command.includes('nuxt')) await endProcess(pid)
}

/** Returns a function that notes where this run answers, and the process that does. */
export async function claimRun(stack) {
  mkdirSync(DATA, { recursive: true })
  const other = readJson(FILE)
  if (other && other.pid !== process.pid && isAlive(other.pid)) {
    throw new Refusal(`Polewright is running already${other.url ? ` at ${other.url}` : ''} (process ${other.pid}). Stop it with Ctrl-C there, or set POLEWRIGHT_DATA_DIR to another folder.`)
  }
  if (other?.server) await endOrphan(other.server)
  writePrivateJson(FILE, { pid: process.pid })
  stack.add(() => rmSync(FILE, { force: true }))
  return (url, server) => writePrivateJson(FILE, { pid: process.pid, url, server })
}

/** Where a run of this data folder answers; null when there is none. */
export function runningSite() {
  const other = readJson(FILE)
  return other && isAlive(other.pid) ? other.url ?? null : null
}

export const wantsDemonstration = () => process.env.POLEWRIGHT_DEMONSTRATION !== 'no'
