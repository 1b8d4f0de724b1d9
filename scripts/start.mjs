/**
 * `npm start`: everything from a bare clone to a served application. Installs what is missing, starts the database, migrates,
 * loads the demonstration into an empty one, builds, serves. Ctrl-C stops all of it.
 *
 *   PORT                         the first port to try (3000)
 *   HOST                         the address to listen on (127.0.0.1)
 *   NUXT_SITE_URL                what people's browsers are sent to, where a proxy stands in front
 *   DATABASE_URL                 a MariaDB to use instead of one of the project's own
 *   POLEWRIGHT_DATA_DIR          where the database, keys and stored files live (.data)
 *   POLEWRIGHT_DEMONSTRATION=no  leaves an empty database empty
 *   SMTP_URL                     a mail server; without it letters are kept in the demonstration's outbox
 */
import { join } from 'node:path'
import { ensureBuild } from './lib/build.mjs'
import { ensureDebianPackages } from './lib/debian.mjs'
import { carryOnDemonstration, prepareDatabase, provideDatabase } from './lib/database.mjs'
import { ensurePackages } from './lib/packages.mjs'
import { DATA, ROOT } from './lib/paths.mjs'
import { main, nearestFreePort } from './lib/process.mjs'
import { serverEnvironment, startServer } from './lib/server.mjs'
import { claimRun, wantsDemonstration } from './lib/session.mjs'

await main(async (stack) => {
  ensureDebianPackages({ database: !process.env.DATABASE_URL })
  ensurePackages()
  const announce = await claimRun(stack)
  const databaseUrl = await provideDatabase(stack)
  prepareDatabase(databaseUrl, wantsDemonstration() ? ['--demonstration'] : [])
  const entry = await ensureBuild({ output: join(ROOT, '.output'), buildDir: join(ROOT, '.build') })
  const env = serverEnvironment({ databaseUrl, dataDir: DATA, port: await nearestFreePort(Number(process.env.PORT ?? 3000)), siteUrl: process.env.NUXT_SITE_URL })
  const server = await startServer({ entry, env, onLine: line => console.log(line) })
  stack.add(() => server.stop())
  announce(env.NUXT_SITE_URL, server.pid)
  console.log(`\nPolewright is at ${env.NUXT_SITE_URL}\n`)
  prepareDatabase(databaseUrl, ['--accounts'])
  if (wantsDemonstration()) carryOnDemonstration(stack, databaseUrl)
  console.log('Ctrl-C stops it.\n')
  const { code, signal } = await server.ended
  if (stack.ending) return stack.undo()
  console.error(`The server has ended by itself (${code ?? signal}).`)
  return 1
})
