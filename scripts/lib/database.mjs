/** The database that a run stands on: DATABASE_URL's, or one of the project's own. */
import { join } from 'node:path'
import { startMariadb } from './mariadb.mjs'
import { DATA, ROOT } from './paths.mjs'
import { endProcess, launch, run } from './process.mjs'

/** Resolves to its address. A server that is started here is stopped at the end of the run. */
export async function provideDatabase(stack) {
  if (process.env.DATABASE_URL) return process.env.DATABASE_URL
  const server = await startMariadb(join(DATA, 'mariadb'))
  stack.add(() => server.stop())
  server.createSchema('polewright')
  return server.url('polewright')
}

const TSX = [join(ROOT, 'node_modules/tsx/dist/cli.mjs'), '--tsconfig', 'scripts/tsconfig.json']

const environment = (databaseUrl, dataDir) => ({ ...process.env, DATABASE_URL: databaseUrl, POLEWRIGHT_DATA_DIR: dataDir })

/** Runs scripts/database.ts, which speaks to the database with the application's own models. */
export function prepareDatabase(databaseUrl, args = [], { quiet = false, dataDir = DATA } = {}) {
  return run(process.execPath, [...TSX, 'scripts/database.ts', ...args], { quiet, env: environment(databaseUrl, dataDir) })
}

/** What in the demonstration waits for the running server's files goes on beside it; ended with the run, it goes on at the next. */
export function carryOnDemonstration(stack, databaseUrl) {
  const child = launch(process.execPath, [...TSX, 'scripts/database.ts', '--demonstration-issues'], { env: environment(databaseUrl, DATA) })
  stack.add(() => endProcess(child.pid))
}
