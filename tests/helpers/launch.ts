/**
 * A database schema of its own, migrated, and the built server on it.
 *
 * `npm test` hands over a database server and a build (POLEWRIGHT_TEST_MARIADB, POLEWRIGHT_TEST_OUTPUT). Run by themselves, the tests
 * use the development database of scripts/db.mjs, and build into .test/output unless POLEWRIGHT_TEST_OUTPUT names an existing build.
 */
import { mkdirSync, rmSync } from 'node:fs'
import { join, resolve } from 'node:path'
import { ensureBuild } from '../../scripts/lib/build.mjs'
import { startMariadb } from '../../scripts/lib/mariadb.mjs'
import { DATA, ROOT, TEST_DATA } from '../../scripts/lib/paths.mjs'
import { freePort, run } from '../../scripts/lib/process.mjs'
import { serverEnvironment, startServer } from '../../scripts/lib/server.mjs'
import type { TestBase } from './base'

const PASSWORD = 'a secret of the tests, of some forty characters'

/** `name` tells runs side by side apart. */
export async function launch(name: string): Promise<{ base: TestBase, stop: () => Promise<void> }> {
  const built = process.env.POLEWRIGHT_TEST_OUTPUT
  const entry = await ensureBuild({ output: resolve(ROOT, built || join(TEST_DATA, 'output')), buildDir: join(TEST_DATA, 'nuxt'), mayBeStale: Boolean(built) })
  // Remembered, since a test process that launches a server of its own has a data folder of its own.
  process.env.POLEWRIGHT_TEST_MARIADB ??= join(DATA, 'development')
  const mariadb = await startMariadb(process.env.POLEWRIGHT_TEST_MARIADB)
  const schema = `test_${name}_${process.pid}`
  mariadb.run(`DROP DATABASE IF EXISTS \`${schema}\`;`)
  mariadb.createSchema(schema)
  const databaseUrl = mariadb.url(schema)
  run(process.execPath, ['node_modules/tsx/dist/cli.mjs', '--tsconfig', 'scripts/tsconfig.json', 'scripts/database.ts'], { quiet: true, cwd: ROOT, env: { ...process.env, DATABASE_URL: databaseUrl } })

  const dataDir = join(TEST_DATA, 'data', schema)
  mkdirSync(dataDir, { recursive: true })
  const env = serverEnvironment({ databaseUrl, dataDir, port: await freePort(), password: PASSWORD })
  const onLine = process.env.POLEWRIGHT_TEST_LOG ? (line: string) => void process.stderr.write(`${line}\n`) : undefined
  const server = await startServer({ entry, env, onLine })
  return {
    base: { url: server.url, databaseUrl, dataDir, sessionPassword: PASSWORD, entry, pid: server.pid },
    stop: async () => {
      await server.stop()
      mariadb.run(`DROP DATABASE IF EXISTS \`${schema}\`;`)
      rmSync(dataDir, { recursive: true, force: true })
    },
  }
}
