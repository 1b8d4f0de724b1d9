/**
 * Run by the other scripts with DATABASE_URL set.
 *
 *   tsx --tsconfig scripts/tsconfig.json scripts/database.ts                  brings the database up to date
 *   … --demonstration                                                         and fills an empty one with the demonstration
 *   … --accounts                                                              says how to sign in to the demonstration
 */
import { DEMONSTRATION_EMAILS, DEMONSTRATION_PASSWORD } from '../shared/demonstration'
import { homeOf, ROLE_LABELS } from '../shared/people'
import { migrate, sequelize, User, UserRole } from '../server/database'

const has = (option: string) => process.argv.includes(option)

async function prepare(): Promise<void> {
  for (const name of await migrate()) console.log(`Migrated ${name}`)
  if (!has('--demonstration') || await User.count() > 0) return
  console.log('Loading the demonstration …')
  const { seedDemonstration } = await import('../server/database/seed')
  await seedDemonstration()
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
  await (has('--accounts') ? printAccounts() : prepare())
}
finally {
  await sequelize.close()
}
