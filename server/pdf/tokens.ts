/** One-time tokens under which the print page hands out one issue's content, to this process's own browser and once. */
import { createHash, randomBytes } from 'node:crypto'

const LIFETIME_MS = 60_000
/** More at once would be a leak, not a queue: issues are printed one at a time. */
const MAX_OPEN = 32

const digest = (token: string) => createHash('sha256').update(token).digest('hex')

export interface TokenDesk<T> {
  /** A new token for `value`; 43 characters of base64url. */
  give: (value: T) => string
  /** The value, once; null when the token is unknown, used or too old. */
  take: (token: string) => T | null
}

/** `now` in milliseconds, an argument for the tests. */
export function tokenDesk<T>(now: () => number = Date.now): TokenDesk<T> {
  const open = new Map<string, { value: T, until: number }>()
  const sweep = () => {
    for (const [key, entry] of open) if (entry.until <= now()) open.delete(key)
    for (const key of open.keys()) if (open.size >= MAX_OPEN) open.delete(key)
  }
  return {
    give(value) {
      sweep()
      const token = randomBytes(32).toString('base64url')
      open.set(digest(token), { value, until: now() + LIFETIME_MS })
      return token
    },
    take(token) {
      const key = digest(token)
      const entry = open.get(key)
      open.delete(key)
      return entry && entry.until > now() ? entry.value : null
    },
  }
}
