/** Limits on how often an address may ask without having signed in. Kept in memory: each instance counts for itself. */
import type { H3Event } from 'h3'
import { RateLimiterMemory, RateLimiterRes } from 'rate-limiter-flexible'
import { VERIFICATION_LIMIT } from '#shared/limits'
import { tooManyTries } from './errors'
import { addressOf } from './session'

const verification = new RateLimiterMemory(VERIFICATION_LIMIT)

/** 429 with the seconds to wait when the address has asked too often. */
export async function withinVerificationLimits(event: H3Event): Promise<void> {
  try { await verification.consume(addressOf(event)) }
  catch (error) {
    if (error instanceof RateLimiterRes) throw tooManyTries(Math.ceil(error.msBeforeNext / 1000))
    throw error
  }
}
