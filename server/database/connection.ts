import mariadb from 'mariadb'
import { Sequelize } from 'sequelize'

/**
 * The driver gives DECIMAL as text and refuses numbers that a float64 cannot hold, instead of rounding either in silence.
 * `dialectModule` is named because the built server cannot find the driver by itself.
 */
export function createConnection(url: string): Sequelize {
  return new Sequelize(url, {
    dialect: 'mariadb',
    dialectModule: mariadb,
    timezone: '+00:00',
    logging: false,
    pool: { max: 12, min: 0, idle: 30_000, acquire: 15_000 },
    dialectOptions: {
      supportBigNumbers: false,
      bigIntAsNumber: true,
      insertIdAsNumber: true,
      decimalAsNumber: false,
      checkNumberRange: true,
      connectTimeout: 5_000,
      // An error's words must not carry what people wrote.
      logParam: false,
    },
    define: { underscored: true, timestamps: false, freezeTableName: true },
  })
}

/** Without DATABASE_URL nothing is reached: the start-up gate says so in words (server/plugins/gate.ts). */
export const sequelize = createConnection(process.env.DATABASE_URL || 'mariadb://127.0.0.1:1/unset')
