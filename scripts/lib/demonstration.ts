/** Loading the demonstration into an empty database, once and whole. */
import { rmSync } from 'node:fs'
import { join } from 'node:path'
import { QueryTypes } from 'sequelize'
import { migrate, sequelize, Setting, User } from '../../server/database'
import { keysFolder } from '../../server/signing/keys'

const KEY = 'demonstration'

const mark = (value: 'loading' | 'loaded') => Setting.upsert({ key: KEY, value, updatedAt: new Date() })

/**
 * What a load that was cut off has left: it goes through the same commands as people do, so it cannot be taken up in the middle.
 * Nothing but the demonstration can be in that database, since no server has run on it yet.
 */
async function clearHalfLoaded(): Promise<void> {
  const tables = await sequelize.query<{ name: string }>('SELECT table_name AS name FROM information_schema.tables WHERE table_schema = DATABASE()', { type: QueryTypes.SELECT })
  await sequelize.transaction(async (transaction) => {
    await sequelize.query('SET SESSION foreign_key_checks = 0', { transaction })
    for (const { name } of tables) await sequelize.query(`DROP TABLE \`${name}\``, { transaction })
    await sequelize.query('SET SESSION foreign_key_checks = 1', { transaction })
  })
  rmSync(join(keysFolder(), 'audit-head.json'), { force: true })
  await migrate()
}

/** Whether the database is to be filled; clears what an interrupted load has left. */
export async function needsDemonstration(): Promise<boolean> {
  const state = await Setting.findByPk(KEY)
  if (state?.value === 'loading') {
    console.log('The demonstration was interrupted while it was loading; it is loaded anew.')
    await clearHalfLoaded()
  }
  return await User.count() === 0
}

export async function loadDemonstration(): Promise<void> {
  await mark('loading')
  const { seedDemonstration } = await import('../../server/database/seed')
  await seedDemonstration()
  await mark('loaded')
}
