/** L1: the characters of a line become tokens; each keeps the range of the text it was typed as. */
import { fault } from '../fault'
import { LIMITS } from '../limits'
import { isUnit } from '../quantity/unitTable'
import type { SourceRange } from '../types'
import { FORBIDDEN_CHARACTERS, FORBIDDEN_WORDS } from './words'

export interface Token {
  type: 'number' | 'word' | 'sign'
  text: string
  at: SourceRange
  /** White space stands before it. */
  spaced: boolean
}

const SPACE = /[\s\u00A0\u2000-\u200B\u202F\u205F\u3000\uFEFF]/
const LETTER = /[A-Za-z_\u00C0-\u00D6\u00D8-\u00F6\u00F8-\u02AF\u0370-\u03FF\u00B5\u2126]/
const DIGIT = /[0-9]/
const SIGNS = ['.*', './', '.^', '<=', '>=', '==', '!=', '<', '>', '+', '-', '*', '/', '^', '(', ')', '[', ']', ',', '=', '?', ':', '±']
const REPLACED: ReadonlyMap<string, readonly string[]> = new Map([
  ['−', ['-']], ['–', ['-']], ['·', ['*']], ['⋅', ['*']], ['×', ['*']], ['≤', ['<=']], ['≥', ['>=']], ['²', ['^', '2']], ['³', ['^', '3']],
])
const MICRO = /^[\u00B5\u03BC]/
const OHM = /[\u03A9\u2126]/g

/** The text before `#`, and the note after it. */
export function splitNote(source: string): { text: string, note?: string } {
  const at = source.indexOf('#')
  return at < 0 ? { text: source } : { text: source.slice(0, at), note: source.slice(at + 1).trim() }
}

/** Reads the tokens of a line without its note. Throws a Fault at the first character that has no meaning. */
export function tokenize(text: string): Token[] {
  const tokens: Token[] = []
  let position = 0
  let spaced = false
  while (position < text.length) {
    if (SPACE.test(text.charAt(position))) {
      spaced = true
      position += 1
      continue
    }
    const read = readOne(text, position)
    for (const token of read.tokens) tokens.push({ ...token, spaced: spaced && token === read.tokens[0] })
    position = read.end
    spaced = false
    if (tokens.length > LIMITS.tokens) throw fault('line-too-long', 'This line is too long to be computed.', 'Split it into several lines.')
  }
  return tokens
}

type Read = { tokens: Omit<Token, 'spaced'>[], end: number }

function readOne(text: string, from: number): Read {
  const character = text.charAt(from)
  if (DIGIT.test(character) || (character === '.' && DIGIT.test(text.charAt(from + 1)))) return readNumber(text, from)
  if (LETTER.test(character)) return readWord(text, from)
  if (character === '°') return readDegree(text, from)
  const at = { from, to: from + 1 }
  if (character === '%') return { tokens: [{ type: 'word', text: 'percent', at }], end: from + 1 }
  const replaced = REPLACED.get(character)
  if (replaced) {
    return { tokens: replaced.map(sign => ({ type: sign === '2' || sign === '3' ? 'number' as const : 'sign' as const, text: sign, at })), end: from + 1 }
  }
  return readSign(text, from)
}

function readSign(text: string, from: number): Read {
  for (const plusMinus of ['+/-', '+-', '+−']) {
    if (text.startsWith(plusMinus, from)) return sign('±', from, plusMinus.length)
  }
  const known = SIGNS.find(candidate => text.startsWith(candidate, from))
  if (known === '==' || known === '!=') {
    throw fault('equality', `\`${known}\` is not a requirement: two computed numbers are hardly ever equal to the last digit.`, 'Write `abs(a - b) <= tolerance`, or a chain `low <= x <= high`.', { from, to: from + 2 })
  }
  if (known !== undefined) return sign(known, from, known.length)
  const character = text.charAt(from)
  const at = { from, to: from + 1 }
  if (character === '.') throw fault('member-access', 'A point has no meaning here.', 'Decimal numbers are written `0.5`; there are no members.', at)
  throw fault('unknown-character', `\`${character}\` has no meaning in a line.`, FORBIDDEN_CHARACTERS.get(character) ?? 'Take it out, or put it in the note after `#`.', at)
}

function sign(text: string, from: number, length: number): Read {
  return { tokens: [{ type: 'sign', text, at: { from, to: from + length } }], end: from + length }
}

const NUMBER = /(?:\d+(?:\.\d+|\.(?![*/^\d]))?|\.\d+)(?:[eE][+-]?\d+)?/y

function readNumber(text: string, from: number): Read {
  const based = /^0[xXbBoO][0-9a-fA-F]*/.exec(text.slice(from, from + 40))
  if (based) throw fault('number-base', 'Numbers are decimal here.', 'Write the number with the digits 0 to 9.', { from, to: from + based[0].length })
  NUMBER.lastIndex = from
  const digits = NUMBER.exec(text)?.[0] ?? text.charAt(from)
  const end = from + digits.length
  const at = { from, to: end }
  refuseComponentCode(text, from, end)
  if (text.charAt(end) === '.' && DIGIT.test(text.charAt(end + 1))) throw fault('number-form', 'A number has one decimal point.', 'Write `1234.5`.', at)
  if (!Number.isFinite(Number(digits))) throw fault('not-finite', `${digits} is too large for a number.`, 'Numbers reach to 1.8e308.', at)
  return { tokens: [{ type: 'number', text: digits, at }], end }
}

function refuseComponentCode(text: string, from: number, end: number): void {
  const code = /^([RrKkMGLnpuµμm])(\d+)(?![\w.])/.exec(text.slice(end, end + 12))
  if (!code || /[eE]/.test(text.slice(from, end))) return
  const units: Record<string, string> = { R: 'ohm', r: 'ohm', K: 'kohm', k: 'kohm', M: 'Mohm', G: 'Gohm', L: 'mohm', n: 'nF', p: 'pF', u: 'uF', µ: 'uF', μ: 'uF', m: 'mF' }
  const typed = text.slice(from, end)
  throw fault('component-code', `${typed}${code[0]} is a component code; those are read in circuit cells only.`, `Write \`${typed}.${code[2]} ${units[code[1] ?? 'R'] ?? 'ohm'}\`.`, { from, to: end + code[0].length })
}

function readWord(text: string, from: number): Read {
  let end = from + 1
  while (end < text.length && (LETTER.test(text.charAt(end)) || DIGIT.test(text.charAt(end)))) end += 1
  const at = { from, to: end }
  const typed = text.slice(from, end)
  const word = spelled(typed)
  const instead = FORBIDDEN_WORDS.get(word)
  if (instead !== undefined) throw fault('forbidden-word', `\`${word}\` has no meaning in a line.`, instead, at)
  if (word === 'of') throw fault('forbidden-word', '`of` has no meaning in a line.', 'Write a product: `5 %*230 V`.', at)
  return { tokens: [{ type: word === 'to' ? 'sign' : 'word', text: word, at }], end }
}

/** Micro and ohm signs become letters where that makes a unit; else they are the Greek letters of a name. */
function spelled(typed: string): string {
  const withOhm = typed.replace(OHM, 'ohm')
  const asUnit = MICRO.test(withOhm) ? `u${withOhm.slice(1)}` : withOhm
  if (isUnit(asUnit)) return asUnit
  return typed.replace(/\u00B5/g, '\u03BC').replace(/\u2126/g, '\u03A9')
}

function readDegree(text: string, from: number): Read {
  const celsius = /^° ?C(?![\w])/.exec(text.slice(from, from + 4))
  if (celsius) return { tokens: [{ type: 'word', text: 'degC', at: { from, to: from + celsius[0].length } }], end: from + celsius[0].length }
  return { tokens: [{ type: 'word', text: 'deg', at: { from, to: from + 1 } }], end: from + 1 }
}
