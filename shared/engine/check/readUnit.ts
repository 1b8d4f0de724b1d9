/** L3 c: after `to` stand units only, in products, quotients and powers. */
import { fault } from '../fault'
import { findUnit } from '../quantity/unitTable'
import { unitProduct } from '../quantity/unitProduct'
import type { UnitFactor, UnitProduct } from '../quantity/unitProduct'
import type { Node } from '../syntax/node'
import { bare } from '../syntax/node'
import type { SourceRange } from '../types'
import { literalValue } from './literal'
import { asFactor, written } from './writeOut'

export function readUnit(node: Node, whole: { at: SourceRange, value: Node }): UnitProduct {
  if (node.type === 'binary' && (node.operator === '+' || node.operator === '-')) throw conversionOfSum(node, whole)
  return unitProduct(factors(node), node.at)
}

function conversionOfSum(node: Extract<Node, { type: 'binary' }>, whole: { at: SourceRange, value: Node }) {
  const value = written(whole.value)
  const [unit, rest] = [written(node.left), written(node.right)]
  return fault('conversion-place', `After \`to\` stands a unit only; \`${written(node)}\` is a sum.`, `Write \`${value} ${node.operator} ${rest} to ${unit}\`, or give \`${value} to ${unit}\` a line and a name of its own.`, whole.at)
}

function factors(node: Node): UnitFactor[] {
  const inner = bare(node)
  if (inner.type === 'name') return [unitOf(inner.name, inner.at)]
  if (inner.type === 'number' && inner.value === 1) return []
  if (inner.type !== 'binary') throw notUnit(node)
  if (inner.operator === '^') return powerOf(inner)
  if (inner.operator !== '*' && inner.operator !== '/') throw notUnit(node)
  if (inner.operator === '/' && inner.right.type === 'binary' && inner.right.implicit) {
    throw fault('product-under-slash', `\`${written(inner)}\` can be read in two ways.`, `Write \`${written(inner.left)}/(${written(inner.right)})\` or \`${written(inner.left)}/${written(inner.right.left)}*${asFactor(inner.right.right)}\`.`, inner.at)
  }
  const right = factors(inner.right)
  const below = inner.operator === '/'
  return [...factors(inner.left), ...right.map(factor => below ? { ...factor, power: -factor.power } : factor)]
}

function powerOf(node: Extract<Node, { type: 'binary' }>): UnitFactor[] {
  const exponent = literalValue(node.right)
  if (exponent === undefined) throw fault('unit-power', 'The power of a unit is a plain number.', 'Write `m^2` or `Hz^(1/2)`.', node.right.at)
  return factors(node.left).map(factor => ({ ...factor, power: factor.power * exponent }))
}

function unitOf(word: string, at: SourceRange): UnitFactor {
  const unit = findUnit(word)
  if (!unit) throw fault('unknown-unit', `\`${word}\` is not a unit.`, 'After `to` stand units only, such as `kHz`, `V/s` or `%`.', at)
  return { unit, power: 1 }
}

function notUnit(node: Node) {
  return fault('unknown-unit', `\`${written(node)}\` is not a unit.`, 'After `to` stand units only, such as `kHz`, `V/s` or `%`.', node.at)
}
