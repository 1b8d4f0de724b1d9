/**
 * Wrong passwords slow down whoever tries, and lock nobody out for good: after some free tries each further one from the same
 * address for the same account waits twice as long; wide limits for an account and for an address catch what is spread out.
 */
import { createHash } from 'node:crypto'
import { Op, QueryTypes } from 'sequelize'
import { LIMITS } from '#shared/limits'
import { LoginAttempt, sequelize } from '../database'
import { tooManyTries } from './errors'
import { log } from './log'

const DAY = 24 * 60 * 60 * 1000

export const accountKey = (email: string): string => createHash('sha256').update(email.trim().toLowerCase()).digest('hex')

interface Tally { failures: number, last: Date | null }

/** Failures in the window; where `forgiven`, only those after the last success. */
async function tally(condition: string, forgiven: boolean, replacements: Record<string, unknown>): Promise<Tally> {
  const lastSuccess = forgiven ? `COALESCE((SELECT MAX(created_at) FROM login_attempts WHERE ${condition} AND succeeded = 1), :since)` : ':since'
  const [row] = await sequelize.query<Tally>(
    `SELECT COUNT(*) AS failures, MAX(created_at) AS last FROM login_attempts
     WHERE ${condition} AND succeeded = 0 AND created_at > GREATEST(:since, ${lastSuccess})`,
    { replacements, type: QueryTypes.SELECT },
  )
  return { failures: Number(row?.failures ?? 0), last: row?.last ? new Date(row.last) : null }
}

const { pairFree, pairLongest, accountFree, accountWait, addressFree, addressWait, window } = LIMITS.signIn

const pairWait = (failures: number): number => failures < pairFree ? 0 : Math.min(1000 * 2 ** (failures - pairFree), pairLongest)

/** Milliseconds until the next try is heard; 0 when at once. */
export async function waitBeforeTry(account: string, ip: string, now = Date.now()): Promise<number> {
  const replacements = { account, ip, since: new Date(now - window) }
  const [pair, whole, address] = await Promise.all([
    tally('account = :account AND ip = :ip', true, replacements),
    tally('account = :account', true, replacements),
    // Whoever has an account of their own here cannot wipe the slate clean with it.
    tally('ip = :ip', false, replacements),
  ])
  const waits: [Tally, number][] = [
    [pair, pairWait(pair.failures)],
    [whole, whole.failures < accountFree ? 0 : accountWait],
    [address, address.failures < addressFree ? 0 : addressWait],
  ]
  return Math.max(0, ...waits.map(([{ last }, wait]) => last ? last.getTime() + wait - now : 0))
}

/**
 * Runs `attempt`, which says whether the password was right, under the limits. It counts as failed until it has succeeded, so that
 * many tries at once gain nothing. Answers 429 with the seconds to wait when it is too early.
 */
export async function withinSignInLimits<T>(email: string, ip: string, attempt: () => Promise<T | null>): Promise<T | null> {
  const account = accountKey(email)
  const wait = await waitBeforeTry(account, ip)
  if (wait > 0) {
    log('warn', 'sign_in_slowed', { account: account.slice(0, 12), ip, wait })
    throw tooManyTries(Math.ceil(wait / 1000), `Too many wrong passwords. Wait ${waitWords(wait)} and try again, or have a new password sent to you.`)
  }
  const row = await LoginAttempt.create({ account, ip, succeeded: false })
  const outcome = await attempt()
  if (outcome !== null) await row.update({ succeeded: true })
  else log('warn', 'sign_in_failed', { account: account.slice(0, 12), ip })
  await LoginAttempt.destroy({ where: { createdAt: { [Op.lt]: new Date(Date.now() - DAY) } }, limit: 200 })
  return outcome
}

function waitWords(wait: number): string {
  const seconds = Math.ceil(wait / 1000)
  if (seconds < 90) return seconds === 1 ? '1 second' : `${seconds} seconds`
  return `${Math.ceil(seconds / 60)} minutes`
}
