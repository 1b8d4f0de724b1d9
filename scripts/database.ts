/**
 * Run by the other scripts with DATABASE_URL set.
 *
 *   tsx --tsconfig scripts/tsconfig.json scripts/database.ts                  brings the database up to date
 *   … --demonstration                                                         and fills an empty one with the demonstration
 *   … --demonstration-issues                                                  and carries it on as the server issues its sheets
 *   … --accounts                                                              says how to sign in to the demonstration
 */
import { resolve } from 'node:path'
import { buildEngineProcess } from '../modules/engineProcess'
import { DEMONSTRATION_EMAILS, DEMONSTRATION_PASSWORD } from '../shared/demonstration'
import { homeOf, ROLE_LABELS } from '../shared/people'
import { migrate, sequelize, User, UserRole } from '../server/database'

const has = (option: string) => process.argv.includes(option)

/** The demonstration's sheets are computed as any other, in the engine's own process; here there is no built server to take it from. */
async function provideEngine(): Promise<void> {
  const outfile = resolve(process.env.POLEWRIGHT_DATA_DIR || '.data', 'engine-process.mjs')
  await buildEngineProcess(resolve('.'), outfile)
  process.env.POLEWRIGHT_ENGINE_BUNDLE = outfile
}

async function prepare(): Promise<void> {
  for (const name of await migrate()) console.log(`Migrated ${name}`)
  if (!has('--demonstration') || await User.count() > 0) return
  console.log('Loading the demonstration …')
  await provideEngine()
  const { seedDemonstration } = await import('../server/database/seed')
  await seedDemonstration()
}

/** Needs a server on the same database, whose job makes the files. */
async function carryOn(): Promise<void> {
  if (await User.count({ where: { email: DEMONSTRATION_EMAILS } }) < DEMONSTRATION_EMAILS.length) return
  await provideEngine()
  const { continueDemonstration } = await import('../server/database/seed/later')
  await continueDemonstration()
}

async function printAccounts(): Promise<void> {
  const users = await User.findAll({ where: { email: DEMONSTRATION_EMAILS }, include: [{ model: UserRole, as: 'roleRows' }] })
  if (users.length === 0) return
  console.log(`The demonstration's accounts, all with the password ${DEMONSTRATION_PASSWORD}:\n`)
  users.sort((a, b) => DEMONSTRATION_EMAILS.indexOf(a.email) - DEMONSTRATION_EMAILS.indexOf(b.email))
  for (const user of users) {
    const roles = [...user.roleRows ?? []].sort((a, b) => a.position - b.position).map(row => row.role)
    console.log(`  ${user.email.padEnd(38)} ${roles.map(role => ROLE_LABELS[role]).join(', ').padEnd(20)} ${homeOf(roles)}`)
  }
  console.log('')
}

try {
  if (has('--accounts')) await printAccounts()
  else if (has('--demonstration-issues')) await carryOn()
  else await prepare()
}
finally {
  await sequelize.close()
}
