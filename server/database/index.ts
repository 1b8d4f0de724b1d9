/** The database as the commands see it. */
export { sequelize } from './connection'
export { migrate, pendingMigrations } from './migrate'
export { databaseErrorNumber, isDuplicate, withTransaction } from './transaction'
export * from './models/people'
