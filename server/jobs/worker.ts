/**
 * Takes jobs one after the other and does them. A job is held by a lease: a worker that died leaves it to the next one when the
 * lease has run out. Several workers, in one process or many, never hold the same job at once.
 */
import { QueryTypes } from 'sequelize'
import { sequelize, withTransaction } from '../database'
import { newId } from '../utils/ids'
import { errorFields, log } from '../utils/log'
import { onWork } from './queue'
import { handlerOf, pauseBefore, registeredKinds, type JobContext, type JobHandler } from './registry'

interface TakenJob { id: string, kind: string, uniqueKey: string, payload: unknown, attempts: number, token: string, overrun: boolean }

interface JobRow { id: string, kind: string, unique_key: string, payload: unknown, attempts: number, state: string }

const TAKE = `SELECT id, kind, unique_key, payload, attempts, state FROM jobs
  WHERE kind IN (:kinds) AND ((state = 'waiting' AND run_after <= UTC_TIMESTAMP(3)) OR (state = 'running' AND leased_until < UTC_TIMESTAMP(3)))
  ORDER BY run_after, id LIMIT 1 FOR UPDATE SKIP LOCKED`

const seconds = (milliseconds: number) => milliseconds / 1000

async function take(): Promise<TakenJob | null> {
  const kinds = registeredKinds()
  if (kinds.length === 0) return null
  return withTransaction(async (transaction) => {
    const [row] = await sequelize.query<JobRow>(TAKE, { replacements: { kinds }, type: QueryTypes.SELECT, transaction })
    if (!row) return null
    const lease = handlerOf(row.kind)?.lease ?? 60_000
    const token = newId()
    await sequelize.query(
      `UPDATE jobs SET state = 'running', attempts = attempts + 1, lease_token = :token,
        leased_until = DATE_ADD(UTC_TIMESTAMP(3), INTERVAL :lease SECOND) WHERE id = :id`,
      { replacements: { id: row.id, token, lease: seconds(lease) }, transaction },
    )
    const payload: unknown = typeof row.payload === 'string' ? JSON.parse(row.payload) : row.payload
    return { id: row.id, kind: row.kind, uniqueKey: row.unique_key, payload, attempts: row.attempts + 1, token, overrun: row.state === 'running' }
  })
}

/** Writes only while the lease is ours. */
async function settle(job: TakenJob, set: string, values: Record<string, unknown> = {}): Promise<boolean> {
  const [, changed] = await sequelize.query(
    `UPDATE jobs SET ${set} WHERE id = :id AND lease_token = :token AND state = 'running'`,
    { replacements: { ...values, id: job.id, token: job.token }, type: QueryTypes.UPDATE },
  )
  return changed > 0
}

function contextOf(job: TakenJob, handler: JobHandler): JobContext {
  return {
    id: job.id,
    uniqueKey: job.uniqueKey,
    attempt: job.attempts,
    renew: () => settle(job, 'leased_until = DATE_ADD(UTC_TIMESTAMP(3), INTERVAL :lease SECOND)', { lease: seconds(handler.lease) }),
  }
}

const reasonOf = (error: unknown): string => (error instanceof Error ? error.message : String(error)).slice(0, 2000)

async function giveUp(job: TakenJob, handler: JobHandler, reason: string): Promise<void> {
  await handler.giveUp?.(job.payload, reason, contextOf(job, handler))
  await settle(job, 'state = \'given_up\', leased_until = NULL, lease_token = NULL, last_error = :reason, ended_at = UTC_TIMESTAMP(3)', { reason })
  log('error', 'job_given_up', { job: job.id, kind: job.kind, attempts: job.attempts, reason })
}

async function tryAgain(job: TakenJob, handler: JobHandler, error: unknown): Promise<void> {
  const pause = pauseBefore(handler, job.attempts)
  log('warn', 'job_failed', { job: job.id, kind: job.kind, attempt: job.attempts, pause, ...errorFields(error) })
  await settle(
    job,
    'state = \'waiting\', leased_until = NULL, lease_token = NULL, last_error = :reason, run_after = DATE_ADD(UTC_TIMESTAMP(3), INTERVAL :pause SECOND)',
    { reason: reasonOf(error), pause: seconds(pause) },
  )
}

async function attempt(job: TakenJob, handler: JobHandler): Promise<void> {
  // A job that was given up but whose giving up failed, or one whose every worker died, has had its attempts.
  if (job.attempts > handler.attempts) return giveUp(job, handler, 'Every attempt failed or was cut off.')
  try {
    await handler.run(job.payload, contextOf(job, handler))
    await settle(job, 'state = \'done\', leased_until = NULL, lease_token = NULL, ended_at = UTC_TIMESTAMP(3)')
  }
  catch (error) {
    if (job.attempts >= handler.attempts) await giveUp(job, handler, reasonOf(error))
    else await tryAgain(job, handler, error)
  }
}

/** Takes and does one job; false when there was none. */
export async function workOnce(): Promise<boolean> {
  const job = await take()
  if (!job) return false
  const handler = handlerOf(job.kind)
  if (handler) await attempt(job, handler)
  return true
}

const LOOK_EVERY = 1000

/** Works until `stop` is called, which resolves when the job in hand has ended. */
export function startWorker(): { stop: () => Promise<void> } {
  let stopped = false
  let ring: () => void = () => {}
  const silence = onWork(() => ring())
  const rest = () => new Promise<void>((resolve) => {
    const timer = setTimeout(resolve, LOOK_EVERY)
    timer.unref()
    ring = () => {
      clearTimeout(timer)
      resolve()
    }
  })
  const loop = async () => {
    while (!stopped) {
      const worked = await workOnce().catch((error: unknown) => {
        log('error', 'job_worker', errorFields(error))
        return false
      })
      if (!worked && !stopped) await rest()
    }
  }
  const running = loop()
  return {
    stop: async () => {
      stopped = true
      silence()
      ring()
      await running
    },
  }
}
