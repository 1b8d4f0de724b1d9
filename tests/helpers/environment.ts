/** Before each test file: the tests' own models speak to the same database as the server. */
import { afterAll, inject } from 'vitest'

const base = inject('base')
process.env.DATABASE_URL = base.databaseUrl
process.env.POLEWRIGHT_DATA_DIR = base.dataDir
process.env.NUXT_SITE_URL = base.url

afterAll(async () => {
  const { sequelize } = await import('../../server/database/connection')
  await sequelize.close()
})
