/**
 * Run by the other scripts with DATABASE_URL set: brings the database up to date,
 * and fills an empty one with the demonstration when asked to.
 *
 *   tsx --tsconfig scripts/tsconfig.json scripts/database.ts [--demonstration]
 */
import { migrate, sequelize, User } from '../server/database'

async function prepare(): Promise<void> {
  const done = await migrate()
  for (const name of done) console.log(`Migrated ${name}`)
  if (!process.argv.includes('--demonstration') || await User.count() > 0) return
  console.log('Loading the demonstration …')
  const { seedDemonstration } = await import('../server/database/seed')
  await seedDemonstration()
}

try {
  await prepare()
}
finally {
  await sequelize.close()
}
