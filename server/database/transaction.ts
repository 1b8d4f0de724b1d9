import { randomInt } from 'node:crypto'
import { setTimeout as delay } from 'node:timers/promises'
import type { Transaction } from 'sequelize'
import { sequelize } from './connection'

/** Deadlock found · lock wait timeout · record changed since the snapshot: nothing was written, the whole work may be tried again. */
const WORTH_ANOTHER_TRY = new Set([1213, 1205, 1020])
const TRIES = 6

export function databaseErrorNumber(error: unknown): number | null {
  if (typeof error !== 'object' || error === null) return null
  const { parent, errno } = error as { parent?: { errno?: unknown }, errno?: unknown }
  const found = parent?.errno ?? errno
  return typeof found === 'number' ? found : null
}

/** Whether a unique key refused the row. */
export const isDuplicate = (error: unknown): boolean => databaseErrorNumber(error) === 1062

/**
 * Runs `work` in one transaction and resolves after its COMMIT has been answered.
 * On a deadlock or lock timeout all is rolled back and `work` runs again, so it must have no effect outside the database.
 */
export async function withTransaction<T>(work: (transaction: Transaction) => Promise<T>): Promise<T> {
  for (let attempt = 1; ; attempt++) {
    try {
      return await sequelize.transaction(work)
    }
    catch (error) {
      const number = databaseErrorNumber(error)
      if (number === null || !WORTH_ANOTHER_TRY.has(number) || attempt === TRIES) throw error
      await delay(randomInt(5, 25 * 2 ** attempt))
    }
  }
}
