import { QueryTypes } from 'sequelize'
import type { QueryInterface } from 'sequelize'
import { Umzug } from 'umzug'
import type { UmzugStorage } from 'umzug'
import { sequelize } from './connection'
import { migrations } from './migrations'

const TABLE = 'schema_migrations'
const LOCK = 'polewright:migrate'
const LOCK_SECONDS = 120

/** A row is written when a migration starts and stamped when it has ended, since DDL cannot be rolled back: a halt half-way stays visible. */
const storage: UmzugStorage<QueryInterface> = {
  async logMigration({ name, context }) {
    await context.sequelize.query(`UPDATE ${TABLE} SET ended_at = UTC_TIMESTAMP(3) WHERE name = ?`, { replacements: [name] })
  },
  async unlogMigration({ name, context }) {
    await context.sequelize.query(`DELETE FROM ${TABLE} WHERE name = ?`, { replacements: [name] })
  },
  async executed({ context }) {
    const rows = await context.sequelize.query<{ name: string }>(`SELECT name FROM ${TABLE} WHERE ended_at IS NOT NULL ORDER BY name`, { type: QueryTypes.SELECT })
    return rows.map(row => row.name)
  },
}

function createUmzug(): Umzug<QueryInterface> {
  const umzug = new Umzug<QueryInterface>({
    migrations: migrations.map(({ name, up }) => ({ name, up: ({ context }) => up({ context }) })),
    context: sequelize.getQueryInterface(),
    storage,
    logger: undefined,
  })
  umzug.on('migrating', async ({ name, context }) => {
    await context.sequelize.query(`INSERT IGNORE INTO ${TABLE} (name, started_at) VALUES (?, UTC_TIMESTAMP(3))`, { replacements: [name] })
  })
  return umzug
}

/** Migrations that the database has not had yet, oldest first. */
export async function pendingMigrations(): Promise<string[]> {
  const pending = await createUmzug().pending()
  return pending.map(migration => migration.name)
}

/**
 * Brings the database up to this version; returns the names of what ran.
 * A named lock keeps a second process waiting, which then finds nothing left to do.
 */
export async function migrate(): Promise<string[]> {
  await sequelize.query(`CREATE TABLE IF NOT EXISTS ${TABLE} (
    name VARCHAR(120) CHARACTER SET ascii COLLATE ascii_bin NOT NULL PRIMARY KEY,
    started_at DATETIME(3) NOT NULL,
    ended_at DATETIME(3) NULL
  ) ENGINE=InnoDB DEFAULT CHARSET=utf8mb4`)
  // The transaction only keeps one connection for the lock; the DDL runs on others.
  return sequelize.transaction(async (transaction) => {
    const [lock] = await sequelize.query<{ got: number | null }>('SELECT GET_LOCK(?, ?) AS got', { replacements: [LOCK, LOCK_SECONDS], type: QueryTypes.SELECT, transaction })
    if (lock?.got !== 1) throw new Error(`Another process has been migrating the database for ${LOCK_SECONDS} s.`)
    try {
      const done = await createUmzug().up()
      return done.map(migration => migration.name)
    }
    finally {
      await sequelize.query('DO RELEASE_LOCK(?)', { replacements: [LOCK], transaction })
    }
  })
}
