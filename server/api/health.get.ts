import { QueryTypes } from 'sequelize'
import { sequelize } from '../database'

/** Public: whether this server does its work. 503 when the database does not answer. */
export default defineEventHandler(async (event) => {
  setHeader(event, 'cache-control', 'no-store')
  const database = await sequelize.query('SELECT 1', { type: QueryTypes.SELECT }).then(() => true, () => false)
  if (!database) setResponseStatus(event, 503)
  return { status: database ? 'up' : 'down', database: database ? 'up' : 'down' }
})
