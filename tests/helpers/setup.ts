/**
 * Once before the API, collaboration and browser tests: a database schema of their own, migrated, and the built server on it.
 *
 * `npm test` hands over a database server and a build (POLEWRIGHT_TEST_MARIADB, POLEWRIGHT_TEST_OUTPUT). Run by itself, vitest uses
 * the development database of scripts/db.mjs, and builds into .test/output unless POLEWRIGHT_TEST_OUTPUT names an existing build.
 */
import { mkdirSync, rmSync } from 'node:fs'
import { join } from 'node:path'
import type { TestProject } from 'vitest/node'
import { ensureBuild } from '../../scripts/lib/build.mjs'
import { startMariadb } from '../../scripts/lib/mariadb.mjs'
import { DATA, ROOT, TEST_DATA } from '../../scripts/lib/paths.mjs'
import { freePort, run } from '../../scripts/lib/process.mjs'
import { serverEnvironment, startServer } from '../../scripts/lib/server.mjs'

export interface TestBase {
  url: string
  databaseUrl: string
  dataDir: string
  sessionPassword: string
  /** The built server's file, for tests that start and kill servers of their own. */
  entry: string
  pid: number
}

declare module 'vitest' {
  export interface ProvidedContext { base: TestBase }
}

const PASSWORD = 'a secret of the tests, of some forty characters'

export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  const built = process.env.POLEWRIGHT_TEST_OUTPUT
  const entry = await ensureBuild({ output: built ?? join(TEST_DATA, 'output'), buildDir: join(TEST_DATA, 'nuxt'), mayBeStale: Boolean(built) })
  const mariadb = await startMariadb(process.env.POLEWRIGHT_TEST_MARIADB ?? join(DATA, 'development'))
  const schema = `test_${project.name}_${process.pid}`
  mariadb.run(`DROP DATABASE IF EXISTS \`${schema}\`;`)
  mariadb.createSchema(schema)
  const databaseUrl = mariadb.url(schema)
  run(process.execPath, ['node_modules/tsx/dist/cli.mjs', '--tsconfig', 'scripts/tsconfig.json', 'scripts/database.ts'], { quiet: true, cwd: ROOT, env: { ...process.env, DATABASE_URL: databaseUrl } })

  const dataDir = join(TEST_DATA, 'data', schema)
  mkdirSync(dataDir, { recursive: true })
  const env = serverEnvironment({ databaseUrl, dataDir, port: await freePort(), password: PASSWORD })
  const server = await startServer({ entry, env, onLine: process.env.POLEWRIGHT_TEST_LOG ? line => process.stderr.write(`${line}\n`) : undefined })
  project.provide('base', { url: server.url, databaseUrl, dataDir, sessionPassword: PASSWORD, entry, pid: server.pid })

  return async () => {
    await server.stop()
    mariadb.run(`DROP DATABASE IF EXISTS \`${schema}\`;`)
    rmSync(dataDir, { recursive: true, force: true })
  }
}
