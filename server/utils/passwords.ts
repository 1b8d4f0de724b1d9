/**
 * Passwords are kept as scrypt hashes at OWASP's figures (N = 2^17, r = 8, p = 1: 128 MiB and some 0.4 s each).
 * Only so many are computed at once, and only so many may wait, so that signing in cannot exhaust the machine.
 */
import { Hash } from '@adonisjs/hash'
import { Scrypt } from '@adonisjs/hash/drivers/scrypt'
import { LIMITS } from '#shared/limits'
import { unavailable } from './errors'

const hasher = new Hash(new Scrypt({ cost: 2 ** 17, blockSize: 8, parallelization: 1, maxMemory: 256 * 1024 * 1024 }))

let running = 0
const waiting: (() => void)[] = []

/** Takes a place, or waits until whoever leaves hands theirs over. */
async function takePlace(): Promise<void> {
  if (running < LIMITS.passwordHashing.atOnce) {
    running++
    return
  }
  if (waiting.length >= LIMITS.passwordHashing.waiting) throw unavailable('Many people are signing in right now. Try again in a few seconds.')
  await new Promise<void>(resolve => waiting.push(resolve))
}

function leavePlace(): void {
  const next = waiting.shift()
  if (next) next()
  else running--
}

async function inTurn<T>(work: () => Promise<T>): Promise<T> {
  await takePlace()
  try {
    return await work()
  }
  finally {
    leavePlace()
  }
}

export const hashSecret = (password: string): Promise<string> => inTurn(() => hasher.make(password))

let nobody: Promise<string> | null = null

/** Takes the same time whether the account exists or not: without a hash, one that nothing matches is tried. */
export async function matchesSecret(hash: string | null, password: string): Promise<boolean> {
  const against = hash ?? await (nobody ??= hashSecret(crypto.randomUUID()))
  const matches = await inTurn(() => hasher.verify(against, password))
  return hash !== null && matches
}

/** Whether the hash was made at other figures than today's. */
export const needsNewHash = (hash: string): boolean => hasher.needsReHash(hash)
