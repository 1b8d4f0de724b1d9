/**
 * The outline of a line: its words told apart from what stands between them, by one pass over the text.
 * Only the plainest lines have one, `name = expression` in ASCII; all others are read in full.
 * It decides nothing: it only tells when two lines differ in nothing but the names or the number in them.
 */
import { isNone } from '../quantity/dimension'
import { findUnit } from '../quantity/unitTable'
import { isReserved } from '../syntax/words'

export interface Outline {
  /** Name that the line defines. */
  readonly name: string
  /** The text with the nth of its words as `\u0001n`, so that lines of one shape have the same. */
  readonly pattern: string
  /** Words that may be names or units, each once, by first appearance. */
  readonly words: readonly string[]
  /** Of a number with one unit: its value in SI units. */
  readonly literal: number | undefined
}

/** Longer lines are read in full: few are alike. */
const LONGEST = 300
const LITERAL = /^((?:[1-9][0-9]*|0)(?:\.[0-9]+)?) ([A-Za-z]+) *$/
const SIGNS = new Set(' .*/^()+-,'.split('').map(sign => sign.charCodeAt(0)))

const isDigit = (code: number) => code >= 48 && code <= 57
const isWordStart = (code: number) => (code >= 97 && code <= 122) || (code >= 65 && code <= 90) || code === 95

function wordEnd(source: string, from: number): number {
  let end = from
  for (let code = source.charCodeAt(end); isWordStart(code) || isDigit(code); code = source.charCodeAt(end)) end += 1
  return end
}

export function outlineOf(source: string): Outline | undefined {
  if (source.length > LONGEST || !isWordStart(source.charCodeAt(0))) return undefined
  const nameEnd = wordEnd(source, 0)
  const equals = source.charCodeAt(nameEnd) === 32 ? nameEnd + 1 : nameEnd
  if (source.charCodeAt(equals) !== 61) return undefined
  const name = source.slice(0, nameEnd)
  if (isReserved(name) || name === 'to') return undefined
  const start = source.charCodeAt(equals + 1) === 32 ? equals + 2 : equals + 1
  return isDigit(source.charCodeAt(start)) ? literalOf(name, source.slice(start)) ?? scan(name, source, start) : scan(name, source, start)
}

/** A unit directly after a number is that unit, whatever is defined (L3a). */
function literalOf(name: string, right: string): Outline | undefined {
  const [, digits, word] = LITERAL.exec(right) ?? []
  const unit = word === undefined ? undefined : findUnit(word)
  if (digits === undefined || word === undefined || !unit || unit.special || isNone(unit.dimension)) return undefined
  return { name, pattern: `# ${word}`, words: [], literal: Number(digits) * unit.up / unit.down }
}

function scan(name: string, source: string, start: number): Outline | undefined {
  const words: string[] = []
  let pattern = ''
  let from = start
  for (let at = start; at < source.length;) {
    const code = source.charCodeAt(at)
    if (isDigit(code)) {
      at = numberEnd(source, at)
      continue
    }
    if (!isWordStart(code)) {
      // `+-` and `+/-` are the sign of a tolerance.
      if (!SIGNS.has(code) || (code === 43 && /^\+ *\/? *-/.test(source.slice(at, at + 6)))) return undefined
      at += 1
      continue
    }
    const end = wordEnd(source, at)
    const word = source.slice(at, end)
    if (word !== 'to' && !isReserved(word)) {
      let index = words.indexOf(word)
      if (index < 0) index = words.push(word) - 1
      pattern += `${source.slice(from, at)}\u0001${index}`
      from = end
    }
    at = end
  }
  return { name, pattern: pattern + source.slice(from), words, literal: undefined }
}

/** A number with its exponent, so that the `e` of `1e3` is no word; letters that follow belong to a word. */
function numberEnd(source: string, from: number): number {
  let end = from
  while (isDigit(source.charCodeAt(end)) || source.charCodeAt(end) === 46) end += 1
  const exponent = source.charCodeAt(end) | 32
  if (exponent !== 101) return end
  const sign = source.charCodeAt(end + 1)
  const digits = sign === 43 || sign === 45 ? end + 2 : end + 1
  if (!isDigit(source.charCodeAt(digits))) return end
  end = digits
  while (isDigit(source.charCodeAt(end))) end += 1
  return end
}
