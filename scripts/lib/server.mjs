/** Running the built server. */
import { randomBytes } from 'node:crypto'
import { createInterface } from 'node:readline'
import { join } from 'node:path'
import { setTimeout as delay } from 'node:timers/promises'
import { readJson, Refusal, writePrivateJson } from './paths.mjs'
import { endProcess, findProgram, launch } from './process.mjs'

/** The secret that seals the cookies, made once and kept with the data, so that a restart signs nobody out. */
export function sessionPassword(dataDir) {
  const path = join(dataDir, 'secrets.json')
  const secrets = readJson(path) ?? {}
  if (secrets.sessionPassword) return secrets.sessionPassword
  const made = randomBytes(36).toString('base64url')
  writePrivateJson(path, { ...secrets, sessionPassword: made })
  return made
}

export function serverEnvironment({ databaseUrl, dataDir, port, siteUrl = `http://127.0.0.1:${port}`, password = sessionPassword(dataDir) }) {
  const plain = siteUrl.startsWith('http:')
  return {
    ...process.env,
    NODE_ENV: 'production',
    DATABASE_URL: databaseUrl,
    POLEWRIGHT_DATA_DIR: dataDir,
    NUXT_SITE_URL: siteUrl,
    NUXT_SESSION_PASSWORD: password,
    ...plain ? { NUXT_SESSION_COOKIE_SECURE: 'false' } : { NUXT_SESSION_NAME: '__Host-polewright-session' },
    CHROMIUM_PATH: process.env.CHROMIUM_PATH ?? findProgram('chromium') ?? '/usr/bin/chromium',
    HOST: process.env.HOST ?? '127.0.0.1',
    PORT: String(port),
    NITRO_SHUTDOWN_TIMEOUT: '8000',
  }
}

async function answers(url) {
  try {
    const response = await fetch(`${url}/api/health`, { signal: AbortSignal.timeout(2000) })
    return response.ok
  }
  catch {
    return false
  }
}

/**
 * Starts the server at `entry` and resolves when it answers. `onLine` gets each line that it prints.
 * `stop()` asks it to end and waits; `kill()` is an unplugged machine.
 */
export async function startServer({ entry, env, onLine = () => {}, patience = 60_000 }) {
  const url = `http://127.0.0.1:${env.PORT}`
  const child = launch(process.execPath, ['--enable-source-maps', entry], { env, stdio: ['ignore', 'pipe', 'pipe'] })
  const last = []
  for (const stream of [child.stdout, child.stderr]) {
    createInterface({ input: stream }).on('line', (line) => {
      last.push(line)
      if (last.length > 30) last.shift()
      onLine(line)
    })
  }
  const ended = new Promise(resolve => child.once('exit', (code, signal) => resolve({ code, signal })))
  const until = Date.now() + patience
  while (!await answers(url)) {
    if (child.exitCode !== null || child.signalCode !== null || Date.now() > until) {
      await endProcess(child.pid)
      throw new Refusal(`The server did not start:\n${last.join('\n')}`)
    }
    await delay(100)
  }
  return {
    url,
    pid: child.pid,
    ended,
    stop: async () => {
      if (child.exitCode === null) await endProcess(child.pid, { patience: 15_000 })
      await ended
    },
    kill: async () => {
      process.kill(child.pid, 'SIGKILL')
      await ended
    },
  }
}
