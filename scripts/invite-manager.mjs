/**
 * npm run invite-manager -- ADDRESS "FULL NAME"
 *
 * For a firm that begins without the demonstration (POLEWRIGHT_DEMONSTRATION=no): makes the account of its first manager and prints
 * the link to choose a password. That manager invites everyone else. Refused while a manager can sign in.
 */
import { prepareDatabase, provideDatabase } from './lib/database.mjs'
import { ensureDebianPackages } from './lib/debian.mjs'
import { ensurePackages } from './lib/packages.mjs'
import { Refusal } from './lib/paths.mjs'
import { main } from './lib/process.mjs'
import { runningSite } from './lib/session.mjs'

await main(async (stack) => {
  const [address, name] = process.argv.slice(2)
  if (!address || !name) throw new Refusal('npm run invite-manager -- ADDRESS "FULL NAME"')
  ensureDebianPackages({ database: !process.env.DATABASE_URL })
  ensurePackages()
  const site = runningSite()
  // The database of a running `npm start` is joined and left running.
  const databaseUrl = await provideDatabase(site ? { add: () => {} } : stack)
  try {
    prepareDatabase(databaseUrl, ['--invite-manager', address, name, process.env.NUXT_SITE_URL ?? site ?? 'http://127.0.0.1:3000'])
  }
  catch (error) {
    // It has said in words what is wrong.
    if (error instanceof Refusal) return 1
    throw error
  }
})
