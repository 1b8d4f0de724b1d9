/** The database that a run stands on: DATABASE_URL's, or one of the project's own. */
import { join } from 'node:path'
import { startMariadb } from './mariadb.mjs'
import { DATA, ROOT } from './paths.mjs'
import { run } from './process.mjs'

/** Resolves to its address. A server that is started here is stopped at the end of the run. */
export async function provideDatabase(stack) {
  if (process.env.DATABASE_URL) return process.env.DATABASE_URL
  const server = await startMariadb(join(DATA, 'mariadb'))
  stack.add(() => server.stop())
  server.createSchema('polewright')
  return server.url('polewright')
}

/** Runs scripts/database.ts, which speaks to the database with the application's own models. */
export function prepareDatabase(databaseUrl, args = [], { quiet = false, dataDir = DATA } = {}) {
  return run(process.execPath, [join(ROOT, 'node_modules/tsx/dist/cli.mjs'), '--tsconfig', 'scripts/tsconfig.json', 'scripts/database.ts', ...args], {
    quiet,
    env: { ...process.env, DATABASE_URL: databaseUrl, POLEWRIGHT_DATA_DIR: dataDir },
  })
}
