/** Work that a transition leaves behind, written in its transaction: neither goes without the other. */
import { EventEmitter } from 'node:events'
import { QueryTypes, type Transaction } from 'sequelize'
import { sequelize } from '../database'
import type { Letter } from '../mail'
import { now } from '../utils/clock'
import { newId } from '../utils/ids'

export interface NewJob {
  kind: string
  /** The same work has the same key and is queued once, however often it is asked for. */
  uniqueKey: string
  payload: unknown
}

const bell = new EventEmitter()

/** Tells this process's worker that there is work. Call it after COMMIT; a worker that missed it looks each second anyway. */
export const wakeJobs = (): void => { bell.emit('work') }

export function onWork(listener: () => void): () => void {
  bell.on('work', listener)
  return () => bell.off('work', listener)
}

export async function queueJob(job: NewJob, transaction: Transaction): Promise<void> {
  await sequelize.query(
    `INSERT IGNORE INTO jobs (id, kind, unique_key, payload, state, attempts, run_after, created_at)
     VALUES (:id, :kind, :key, :payload, 'waiting', 0, :at, :at)`,
    { replacements: { id: newId(), kind: job.kind, key: job.uniqueKey, payload: JSON.stringify(job.payload), at: now() }, type: QueryTypes.INSERT, transaction },
  )
}

export const queueLetter = (letter: Letter, key: string, transaction: Transaction): Promise<void> =>
  queueJob({ kind: 'email', uniqueKey: `email:${key}`, payload: letter }, transaction)
