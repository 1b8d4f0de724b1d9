/**
 * Run by the other scripts with DATABASE_URL set.
 *
 *   tsx --tsconfig scripts/tsconfig.json scripts/database.ts                  brings the database up to date
 *   … --demonstration                                                         and fills an empty one with the demonstration
 *   … --demonstration-issues                                                  and carries it on as the server issues its sheets
 *   … --invite-manager ADDRESS NAME SITE                                      and makes an account for a firm's first manager
 *   … --accounts                                                              says how to sign in to the demonstration
 */
import { resolve } from 'node:path'
import { buildEngineProcess } from '../modules/engineProcess'
import { DEMONSTRATION_EMAILS, DEMONSTRATION_PASSWORD } from '../shared/demonstration'
import { homeOf, ROLE_LABELS } from '../shared/people'
import { migrate, sequelize, User, UserRole } from '../server/database'
import { loadDemonstration, needsDemonstration } from './lib/demonstration'

const has = (option: string) => process.argv.includes(option)

/** The demonstration's sheets are computed as any other, in the engine's own process; here there is no built server to take it from. */
async function provideEngine(): Promise<void> {
  const outfile = resolve(process.env.POLEWRIGHT_DATA_DIR || '.data', 'engine-process.mjs')
  await buildEngineProcess(resolve('.'), outfile)
  process.env.POLEWRIGHT_ENGINE_BUNDLE = outfile
}

async function prepare(): Promise<void> {
  for (const name of await migrate()) console.log(`Migrated ${name}`)
  if (!has('--demonstration') || !await needsDemonstration()) return
  console.log('Loading the demonstration …')
  await provideEngine()
  await loadDemonstration()
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

/** `--invite-manager ADDRESS NAME SITE` */
async function inviteManager(): Promise<void> {
  const [address = '', name = '', site = ''] = process.argv.slice(process.argv.indexOf('--invite-manager') + 1)
  await migrate()
  const { inviteFirstManager } = await import('../server/commands/people/firstManager')
  const path = await inviteFirstManager(address, name)
  console.log(`\nOpen this link within a week to choose the password. It works once:\n\n  ${site}${path}\n`)
}

/** A refusal's words are for the person at the keyboard; anything else keeps its stack. */
function tell(error: unknown): void {
  const { help } = (error as { data?: { help?: string } }).data ?? {}
  if (help === undefined) throw error
  console.error(help)
  process.exitCode = 1
}

try {
  if (has('--invite-manager')) await inviteManager().catch(tell)
  else if (has('--accounts')) await printAccounts()
  else if (has('--demonstration-issues')) await carryOn()
  else await prepare()
}
finally {
  await sequelize.close()
}
