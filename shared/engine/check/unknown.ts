/** What to say of a word that means nothing here. */
import { fault } from '../fault'
import { findUnit } from '../quantity/unitTable'
import { FUNCTION_NAMES, isReserved } from '../syntax/words'
import type { SourceRange } from '../types'
import type { Scope } from './scope'

/** Names of quantities that are common elsewhere but have no fixed meaning here. */
const HINTS: ReadonlyMap<string, string> = new Map([
  ['j', 'The imaginary unit is `i`.'],
  ['PI', 'Write `pi`.'],
  ['Pi', 'Write `pi`.'],
  ['π', 'Write `pi`.'],
  ['ln', 'The natural logarithm is `log(x)`.'],
  ['lg', 'The logarithm to base 10 is `log10(x)`.'],
  ['arctan', 'Write `atan(x)`.'],
  ['power', 'Write `x^n`.'],
  ['pow', 'Write `x^n`.'],
  ['db', 'Write `dB`.'],
  ['HZ', 'Write `Hz`.'],
  ['hz', 'Write `Hz`.'],
  ['Ohm', 'Write `ohm`.'],
  ['k', 'A prefix stands with its unit: `10 kohm`.'],
  ['M', 'A prefix stands with its unit: `10 Mohm`.'],
  ['u', 'A prefix stands with its unit: `10 uF`.'],
  ['n', 'A prefix stands with its unit: `10 nF`.'],
  ['p', 'A prefix stands with its unit: `10 pF`.'],
])

export function unknownName(name: string, scope: Scope, at: SourceRange) {
  if (scope.own === name) return fault('self-reference', `\`${name}\` is defined by itself.`, 'Give the new value another name.', at)
  const below = scope.definedBelow(name)
  if (below !== undefined) return fault('defined-below', `\`${name}\` is defined further down, in line ${below}.`, `Move line ${below} above this one: a sheet is read from top to bottom.`, at)
  if (name === 's') return fault('laplace-place', '`s` stands only in a transfer function `H(s) = …`.', 'Write `H(s) = …` on a line of its own.', at)
  return fault('unknown-name', `\`${name}\` is not defined.`, HINTS.get(name) ?? spelling(name) ?? `Define it above: \`${name} = …\`.`, at)
}

function spelling(name: string): string | undefined {
  const lower = name.toLowerCase()
  const fn = FUNCTION_NAMES.find(known => known.toLowerCase() === lower)
  if (fn) return `Did you mean \`${fn}\`?`
  if (isReserved(lower)) return `Did you mean \`${lower}\`?`
  const unit = [name.charAt(0).toUpperCase() + name.slice(1), lower, name.replace(/^K/, 'k'), name.toUpperCase()].find(candidate => candidate !== name && findUnit(candidate))
  return unit ? `Did you mean the unit \`${unit}\`?` : undefined
}
