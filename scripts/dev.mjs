/** `npm run dev`: as `npm start`, but served from the sources with changes shown as they are made. */
import { join } from 'node:path'
import { carryOnDemonstration, prepareDatabase, provideDatabase } from './lib/database.mjs'
import { ensureDebianPackages } from './lib/debian.mjs'
import { ensurePackages } from './lib/packages.mjs'
import { DATA, ROOT } from './lib/paths.mjs'
import { endProcess, launch, main, nearestFreePort } from './lib/process.mjs'
import { serverEnvironment } from './lib/server.mjs'
import { claimRun, wantsDemonstration } from './lib/session.mjs'

await main(async (stack) => {
  ensureDebianPackages({ database: !process.env.DATABASE_URL })
  ensurePackages()
  const announce = await claimRun(stack)
  const databaseUrl = await provideDatabase(stack)
  prepareDatabase(databaseUrl, wantsDemonstration() ? ['--demonstration'] : [])
  const port = await nearestFreePort(Number(process.env.PORT ?? 3000))
  const env = { ...serverEnvironment({ databaseUrl, dataDir: DATA, port }), NODE_ENV: 'development' }
  const child = launch(process.execPath, [join(ROOT, 'node_modules/nuxt/bin/nuxt.mjs'), 'dev', '--host', env.HOST, '--port', env.PORT], { env })
  const ended = new Promise(resolve => child.once('exit', code => resolve(code ?? 1)))
  stack.add(() => endProcess(child.pid, { patience: 10_000 }))
  announce(env.NUXT_SITE_URL, child.pid)
  prepareDatabase(databaseUrl, ['--accounts'])
  if (wantsDemonstration()) carryOnDemonstration(stack, databaseUrl)
  const code = await ended
  return stack.ending ? stack.undo() : code
})
