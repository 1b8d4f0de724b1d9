/** Running other programs, and stopping them again. */
import { spawn, spawnSync } from 'node:child_process'
import { existsSync, mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { createServer } from 'node:net'
import { delimiter, dirname, join } from 'node:path'
import { setTimeout as delay } from 'node:timers/promises'
import { Refusal, ROOT } from './paths.mjs'

/** Debian keeps servers in /usr/sbin, which is not on everyone's PATH. */
const FOLDERS = [...(process.env.PATH ?? '').split(delimiter), '/usr/sbin', '/usr/bin', '/sbin', '/bin']

export function findProgram(name) {
  return FOLDERS.filter(Boolean).map(folder => join(folder, name)).find(path => existsSync(path)) ?? null
}

/** Runs a program to its end; its output is shown, or returned when `quiet`. Throws when it fails. */
export function run(command, args, { quiet = false, env = process.env, cwd = ROOT, input } = {}) {
  const done = spawnSync(command, args, { cwd, env, input, encoding: 'utf8', stdio: quiet ? 'pipe' : ['inherit', 'inherit', 'inherit'], maxBuffer: 64 * 1024 * 1024 })
  if (done.error) throw done.error
  if (done.status !== 0) {
    const words = quiet ? `\n${done.stdout}${done.stderr}` : ''
    throw new Refusal(`${[command, ...args].join(' ')} ended with ${done.status ?? done.signal}.${words}`)
  }
  return quiet ? done.stdout : ''
}

export const succeeds = (command, args) => spawnSync(command, args, { stdio: 'ignore' }).status === 0

export function isAlive(pid) {
  if (!pid) return false
  try {
    process.kill(pid, 0)
    return true
  }
  catch (error) {
    return error.code === 'EPERM'
  }
}

/** Asks a process to end and waits; after `patience` ms it is killed. */
export async function endProcess(pid, { signal = 'SIGTERM', patience = 20_000 } = {}) {
  if (!isAlive(pid)) return
  process.kill(pid, signal)
  const until = Date.now() + patience
  while (isAlive(pid)) {
    if (Date.now() > until) {
      process.kill(pid, 'SIGKILL')
      return
    }
    await delay(50)
  }
}

const ownerOf = (path) => {
  try {
    return Number(readFileSync(path, 'utf8'))
  }
  catch {
    return 0
  }
}

/** Runs `work` while no other process holds the lock file at `path`; a lock whose holder has died is taken over. */
export async function withLock(path, work) {
  mkdirSync(dirname(path), { recursive: true })
  for (;;) {
    try {
      writeFileSync(path, String(process.pid), { flag: 'wx' })
      break
    }
    catch (error) {
      if (error.code !== 'EEXIST') throw error
    }
    if (!isAlive(ownerOf(path))) rmSync(path, { force: true })
    else await delay(200)
  }
  try {
    return await work()
  }
  finally {
    rmSync(path, { force: true })
  }
}

/** Starts a program that is not hit by the terminal's Ctrl-C: we end it ourselves, in order. */
export function launch(command, args, options = {}) {
  return spawn(command, args, { cwd: ROOT, detached: true, stdio: ['ignore', 'inherit', 'inherit'], ...options })
}

export function freePort(wanted = 0) {
  return new Promise((resolve, reject) => {
    const server = createServer()
    server.once('error', reject)
    server.listen(wanted, '127.0.0.1', () => {
      const { port } = server.address()
      server.close(() => resolve(port))
    })
  })
}

/** `wanted` if it is free, else the next free one above it. */
export async function nearestFreePort(wanted) {
  for (let port = wanted; port < wanted + 50; port++) {
    const free = await freePort(port).catch(() => null)
    if (free) return free
  }
  return freePort()
}

/** Steps to be undone at the end, last first, whatever ends the run. */
export function undoStack() {
  const steps = []
  let ending = null
  const runAll = async () => {
    while (steps.length) await steps.pop()()
  }
  const undo = () => ending ??= runAll()
  const onSignal = (signal) => {
    undo().finally(() => process.exit(signal === 'SIGINT' ? 130 : 143))
  }
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, onSignal)
  return { add: step => steps.push(step), undo, get ending() { return ending !== null } }
}

/** Runs a script's main function: refusals are words and exit 1, all else keeps its stack. */
export async function main(work) {
  const stack = undoStack()
  try {
    const code = await work(stack)
    await stack.undo()
    process.exit(code ?? 0)
  }
  catch (error) {
    await stack.undo()
    console.error(error instanceof Refusal ? `\n${error.message}` : error)
    process.exit(1)
  }
}
