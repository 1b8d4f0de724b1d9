/** Before each test file: the tests' own models speak to the same database as the server. */
import { afterAll, inject } from 'vitest'
import { useBase } from './base'

useBase(inject('base'))

afterAll(async () => {
  const { sequelize } = await import('../../server/database/connection')
  await sequelize.close()
})
