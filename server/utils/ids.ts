import { randomBytes } from 'node:crypto'

/** Crockford's base 32: no I, L, O, U. */
const ALPHABET = '0123456789ABCDEFGHJKMNPQRSTVWXYZ'
const TIME_LENGTH = 10
const RANDOM_LENGTH = 16

let lastTime = 0
let lastRandom: number[] = []

/** Digits of the random part, plus one; carries like an odometer. */
function incremented(digits: readonly number[]): number[] {
  const next = [...digits]
  for (let i = next.length - 1; i >= 0; i--) {
    if (next[i]! < 31) {
      next[i] = next[i]! + 1
      return next
    }
    next[i] = 0
  }
  return next
}

/** A new ULID (26 characters): 48 bits of milliseconds, 80 random bits. Ids made one after the other by this process sort in that order. */
export function newId(now: number = Date.now()): string {
  const time = Math.max(now, lastTime)
  lastRandom = time === lastTime && lastRandom.length > 0
    ? incremented(lastRandom)
    : [...randomBytes(RANDOM_LENGTH)].map(byte => byte & 31)
  lastTime = time
  let head = ''
  for (let rest = time, i = 0; i < TIME_LENGTH; i++) {
    head = ALPHABET[rest % 32]! + head
    rest = Math.floor(rest / 32)
  }
  return head + lastRandom.map(digit => ALPHABET[digit]!).join('')
}

/** Whether `text` has the form of an id of ours. */
export const isId = (text: string): boolean => /^[0-9A-HJKMNP-TV-Z]{26}$/.test(text)
