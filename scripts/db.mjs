/**
 * A MariaDB for development that several people or processes of this working copy can share, each with a schema of their own.
 *
 *   node scripts/db.mjs start           starts it if it is not running, and says how to reach it
 *   node scripts/db.mjs create NAME     makes the schema NAME and prints its DATABASE_URL
 *   node scripts/db.mjs reset NAME      drops the schema NAME with all that is in it, and makes it anew
 *   node scripts/db.mjs url NAME        prints the DATABASE_URL of schema NAME
 *   node scripts/db.mjs stop            stops the server
 *
 * Its data folder is `.data/development`; `npm start` has another and is not touched.
 */
import { join } from 'node:path'
import { DATA, Refusal } from './lib/paths.mjs'
import { ensureDebianPackages } from './lib/debian.mjs'
import { startMariadb, stopMariadb } from './lib/mariadb.mjs'
import { main } from './lib/process.mjs'

const FOLDER = join(DATA, 'development')

function schemaName(name) {
  if (/^[a-z][a-z0-9_]{0,40}$/.test(name ?? '')) return name
  throw new Refusal('Give the name of a schema: small letters, digits and _.')
}

await main(async () => {
  const [action, name] = process.argv.slice(2)
  if (action === 'stop') return stopMariadb(FOLDER)
  if (!['start', 'create', 'reset', 'url'].includes(action)) {
    throw new Refusal('node scripts/db.mjs start | create NAME | reset NAME | url NAME | stop')
  }
  ensureDebianPackages()
  const server = await startMariadb(FOLDER)
  if (action === 'start') {
    console.log(server.url(''))
    return
  }
  const schema = schemaName(name)
  if (action === 'reset') server.run(`DROP DATABASE IF EXISTS \`${schema}\`;`)
  if (action !== 'url') server.createSchema(schema)
  console.log(server.url(schema))
})
