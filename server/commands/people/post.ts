import type { Transaction } from 'sequelize'
import { Job } from '../../database'
import type { Letter } from '../../mail'
import { newId } from '../../utils/ids'

/** Queues a letter in the transaction that is its cause, so that neither goes without the other. */
export async function queueLetter(letter: Letter, key: string, transaction: Transaction): Promise<void> {
  await Job.create({ id: newId(), kind: 'email', uniqueKey: key, payload: letter }, { transaction })
}
