/**
 * L3 and L4: every word is read as a unit or a name, and what can be read in two ways is refused
 * with both ways written out.
 */
import { fault } from '../fault'
import { findUnit } from '../quantity/unitTable'
import { unitProduct, withFactor } from '../quantity/unitProduct'
import type { UnitFactor } from '../quantity/unitProduct'
import type { BinaryNode, NameNode, Node, NumberNode } from '../syntax/node'
import { bare, joined } from '../syntax/node'
import { isFunctionName } from '../syntax/words'
import type { SourceRange } from '../types'
import { literalValue } from './literal'
import { readUnit } from './readUnit'
import type { Resolved, ResolvedOf } from './resolved'
import { asFactor, written } from './writeOut'

/** What the resolver has to know of the sheet above. */
export interface Reading {
  /** Whether a word names a value or function: defined above, or a parameter. */
  isName: (word: string) => boolean
  /** Inside `H(s) = …`, where `s` is the variable. */
  laplace: boolean
}

export function resolve(node: Node, reading: Reading): Resolved {
  return new Resolver(reading).top(node)
}

class Resolver {
  constructor(private readonly reading: Reading) {}

  /** A place where `to` may end the expression: a definition, an argument, a side of a comparison. */
  top(node: Node): Resolved {
    if (node.type === 'to') return this.conversion(node)
    if (node.type === 'bracket' && bare(node).type === 'to') return { type: 'bracket', inner: this.top(node.inner), at: node.at }
    if (node.type !== 'compare') return this.node(node)
    return { type: 'compare', operators: node.operators, sides: node.sides.map(side => this.top(side)), at: node.at }
  }

  private conversion(node: Extract<Node, { type: 'to' }>): Resolved {
    if (node.value.type === 'to') throw fault('conversion-twice', 'A value is converted once.', `Leave out the first: \`${written(node.value.value)} to ${written(node.unit)}\`.`, node.at)
    return { type: 'to', value: this.node(node.value), unit: readUnit(node.unit, node), unitAt: node.unit.at, at: node.at }
  }

  node(node: Node): Resolved {
    switch (node.type) {
      case 'number': return node
      case 'name': return this.word(node)
      case 'call': return this.call(node)
      case 'bracket': return { ...node, inner: this.node(node.inner) }
      case 'list': return { ...node, items: node.items.map(item => this.top(item)) }
      case 'negate': return { ...node, inner: this.node(node.inner) }
      case 'binary': return this.binary(node)
      case 'choice': return { ...node, condition: this.top(node.condition), yes: this.node(node.yes), no: this.node(node.no) }
      case 'compare': throw fault('comparison-place', 'A comparison stands alone on its line as a requirement, or as the condition of `? :`.', 'Give the value a line and a name of its own, then compare the name.', node.at)
      case 'to': throw fault('conversion-place', '`to` ends a definition, an argument or a side of a comparison.', `Give \`${written(node)}\` a line and a name of its own, or leave the conversion out.`, node.at)
    }
  }

  /** L3 d: a defined name wins, then the unit. */
  private word(node: NameNode): Resolved {
    const { name, at } = node
    if (name === 's' && this.reading.laplace) return { type: 'variable', at }
    if (this.reading.isName(name)) return { type: 'name', name, at }
    if (name === 'pi' || name === 'e' || name === 'i') return { type: 'constant', name, at }
    const unit = findUnit(name)
    if (unit) return { type: 'unit', unit: unitProduct([{ unit, power: 1 }]), at }
    return { type: 'name', name, at }
  }

  private call(node: Extract<Node, { type: 'call' }>): Resolved {
    const { name } = node
    if (!isFunctionName(name) && !this.reading.isName(name) && findUnit(name)) {
      throw fault('unit-called', `\`${name}\` is a unit, not a function.`, `Write \`${name}*(${node.args.map(written).join(', ')})\`.`, node.nameAt)
    }
    const args = node.args.map((arg, index) => {
      const isSeries = index === 1 && name.startsWith('preferred') && arg.type === 'name' && /^E\d+$/.test(arg.name)
      return isSeries ? { type: 'series' as const, name: arg.name, at: arg.at } : this.top(arg)
    })
    return { type: 'call', name, nameAt: node.nameAt, args, at: node.at }
  }

  private binary(node: BinaryNode): Resolved {
    if (node.implicit) return this.implicitProduct(node)
    const left = this.node(node.left)
    if (node.operator === '*' || node.operator === '/') {
      const extended = this.continuedUnit(node, left)
      if (extended) return extended
      if (node.operator === '/') refuseProductUnderSlash(node, this.reading)
    }
    return { ...node, left, right: this.node(node.right) }
  }

  /** L3 b: a unit product goes on through `*` and `/`. */
  private continuedUnit(node: BinaryNode, left: Resolved): Resolved | undefined {
    const factor = this.unitFactor(node.right)
    const tail = openTail(left)
    if (!factor || !tail) return undefined
    const sign = node.operator === '/' ? '/' : '*'
    if (factor.isBoth || this.isVariable(factor.word, tail.node, sign)) throw bothWays(node, tail, { ...factor, isBoth: true }, sign)
    if (tail.node === left) {
      const power = sign === '/' ? -factor.factor.power : factor.factor.power
      return { ...tail.node, unit: withFactor(tail.node.unit, { unit: factor.factor.unit, power }, node.at), at: node.at }
    }
    if (tail.underSlash) throw bothWays(node, tail, factor, sign)
    return undefined
  }

  /** L3 e: inside `H(s)` a further `s` could be the variable; only `rad/s` is plainly a unit. */
  private isVariable(word: string, before: ResolvedOf<'quantity'>, sign: string): boolean {
    return this.reading.laplace && word === 's' && !(sign === '/' && before.unit.angle !== undefined)
  }

  /** A bare word, or a word to a number, that may go on with a unit. */
  private unitFactor(node: Node): { factor: UnitFactor, isBoth: boolean, word: string, at: SourceRange } | undefined {
    const base = node.type === 'binary' && node.operator === '^' ? node.left : node
    if (base.type !== 'name') return undefined
    const unit = findUnit(base.name)
    if (!unit) return undefined
    const power = base === node ? 1 : literalExponent(node)
    if (power === undefined) return undefined
    return { factor: { unit, power }, isBoth: this.reading.isName(base.name), word: base.name, at: base.at }
  }

  private implicitProduct(node: BinaryNode): Resolved {
    refuseAfterQuotient(node)
    const left = this.node(node.left)
    if (node.right.type === 'number') throw fault('number-after', 'A number directly after a name or a bracket can be read in two ways.', `Write \`${written(node.left)}*${written(node.right)}\`, or \`${written(node.left)}_${written(node.right)}\` for a name.`, node.at)
    if (isLiteral(node.left)) return this.afterNumber(node, left)
    if (left.type === 'quantity') return this.afterQuantity(node, left)
    const factor = this.unitFactor(node.right)
    if (factor?.isBoth && endsWithBracket(node.left)) {
      throw fault('unit-or-name', `\`${factor.word}\` after a bracket can be the unit or the name \`${factor.word}\`.`, `Write \`${written(node.left)}*(1 ${factor.word})\` for the unit, \`${written(node.left)}*${factor.word}\` for the name.`, node.at)
    }
    return { ...node, left, right: this.node(node.right) }
  }

  /** L3 a: directly after a number stands its unit. */
  private afterNumber(node: BinaryNode, left: Resolved): Resolved {
    const factor = this.unitFactor(node.right)
    if (!factor) return { ...node, left, right: this.node(node.right) }
    if (factor.word === 's' && this.reading.laplace) {
      throw fault('variable-or-second', '`s` is the variable of this transfer function, and also the second.', `Write \`${written(node.left)}*s\` for the variable, \`${written(node.left)} second\` for the time.`, node.at)
    }
    return { type: 'quantity', number: left, unit: unitProduct([factor.factor], node.at), at: node.at }
  }

  private afterQuantity(node: BinaryNode, left: ResolvedOf<'quantity'>): Resolved {
    const factor = this.unitFactor(node.right)
    if (factor && (factor.isBoth || this.isVariable(factor.word, left, ' '))) throw bothWays(node, { node: left, underSlash: false }, { ...factor, isBoth: true }, ' ')
    if (factor) return { ...left, unit: withFactor(left.unit, factor.factor, node.at), at: node.at }
    if (node.right.type === 'bracket') return { ...node, left, right: this.node(node.right) }
    const typed = written(left)
    const next = written(node.right)
    const unit = left.unit.factors[0]?.unit.symbol ?? ''
    const name = this.reading.isName(unit)
    const number = written(left.number)
    const hint = name
      ? `Write \`(${typed})*${next}\` for the unit, \`${number}*${unit}*${next}\` for the name.`
      : `Write \`(${typed})*${next}\`.`
    throw fault('name-after-unit', `\`${next}\` directly after the unit of \`${typed}\` can be read in two ways.`, hint, node.at)
  }
}

interface Tail { node: ResolvedOf<'quantity'>, underSlash: boolean }

/** The number with its unit at which an unbracketed product ends. */
function openTail(node: Resolved): Tail | undefined {
  if (node.type === 'quantity') return { node, underSlash: false }
  if (node.type !== 'binary' || (node.operator !== '*' && node.operator !== '/')) return undefined
  const tail = openTail(node.right)
  return tail && { node: tail.node, underSlash: tail.underSlash || node.operator === '/' }
}

function bothWays(node: BinaryNode, tail: Tail, factor: { word: string, isBoth: boolean }, sign: '/' | '*' | ' ') {
  const quantity = written(tail.node)
  const right = written(node.right)
  const operator = sign === ' ' ? '*' : sign
  const whole = written(node.left)
  const before = whole.endsWith(quantity) ? whole.slice(0, whole.length - quantity.length) : ''
  if (!factor.isBoth) {
    return fault('unit-product', `It can be read in two ways whether \`${right}\` still belongs to the unit of \`${quantity}\`.`, `Write \`${before}(${quantity}${sign}${right})\` if it does, \`(${whole})${operator}(1 ${right})\` if not.`, node.at)
  }
  const asUnit = right.startsWith(`${factor.word}^`) ? `(1 ${right})` : `(1 ${factor.word})`
  return fault('unit-or-name', `\`${factor.word}\` is both a unit and a name defined above.`, `Write \`${whole}${operator}${asUnit}\` for the unit, \`${before}(${quantity})${operator}${right}\` for the name.`, node.at)
}

function literalExponent(node: Node): number | undefined {
  if (node.type !== 'binary') return undefined
  return literalValue(node.right)
}

/** A number as typed: with a sign, or a power of numbers. */
function isLiteral(node: Node): boolean {
  if (node.type === 'number') return true
  if (node.type === 'negate') return isLiteral(node.inner)
  return node.type === 'binary' && node.operator === '^' && isLiteral(node.left) && isLiteral(node.right)
}

function endsWithBracket(node: Node): boolean {
  if (node.type === 'bracket' || node.type === 'call') return true
  return node.type === 'binary' && endsWithBracket(node.right)
}

function isNumber(node: Node): node is NumberNode {
  const inner = node.type === 'negate' ? node.inner : node
  return inner.type === 'number'
}

/** L4: `1/2 pi`. */
function refuseAfterQuotient(node: BinaryNode): void {
  const { left, right } = node
  if (left.type !== 'binary' || left.operator !== '/' || left.implicit || !isNumber(left.left) || !isNumber(left.right)) return
  const [a, b, x] = [written(left.left), written(left.right), written(right)]
  throw fault('product-after-quotient', `\`${written(node)}\` can be read in two ways.`, `Write \`(${a}/${b})*${asFactor(right)}\` or \`${a}/(${b} ${x})\`.`, node.at)
}

/** L4: `V/2 R`; one number with its unit may stand there. */
function refuseProductUnderSlash(node: BinaryNode, reading: Reading): void {
  const { right } = node
  if (right.type !== 'binary' || !right.implicit) return
  let first: Node = right
  while (first.type === 'binary' && first.implicit) {
    refuseAfterQuotient(first)
    if (isUnitAfterNumber(first, reading)) return
    first = first.left
  }
  const above = written(node.left)
  throw fault('product-under-slash', `\`${written(node)}\` can be read in two ways.`, `Write \`${above}/(${written(right)})\` or \`(${above}/${written(right.left)})*${asFactor(right.right)}\`.`, joined(node.left.at, right.at))
}

function isUnitAfterNumber(node: BinaryNode, reading: Reading): boolean {
  if (!isNumber(node.left)) return false
  const word = node.right.type === 'binary' && node.right.operator === '^' ? node.right.left : node.right
  return word.type === 'name' && findUnit(word.name) !== undefined && !(word.name === 's' && reading.laplace)
}
