import { QueryTypes } from 'sequelize'
import type { Transaction } from 'sequelize'
import { sequelize } from '../../database'
import type { Letter } from '../../mail'
import { newId } from '../../utils/ids'

/** Queues a letter in the transaction that is its cause, so that neither goes without the other. */
export async function queueLetter(letter: Letter, key: string, transaction: Transaction): Promise<void> {
  await sequelize.query(
    `INSERT INTO jobs (id, kind, unique_key, payload, state, attempts, run_after, created_at)
     VALUES (:id, 'email', :key, :payload, 'waiting', 0, UTC_TIMESTAMP(3), UTC_TIMESTAMP(3))`,
    { replacements: { id: newId(), key, payload: JSON.stringify(letter) }, type: QueryTypes.INSERT, transaction },
  )
}
