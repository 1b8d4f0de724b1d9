/** Comparisons: as conditions of a choice, and taken apart for requirements (L13). */
import { fault } from '../fault'
import type { ListKind, ScalarKind } from '../quantity/kind'
import type { Comparison } from '../syntax/node'
import { describe } from './describe'
import { capital, elementKind, operand } from './operands'
import type { Resolved, ResolvedOf } from './resolved'
import { agree, levelMismatch, sum, temperatureMisuse } from './sums'
import type { Term } from './term'
import { asNumber } from './term'
import { written } from './writeOut'

/** One relation of a comparison: `difference` is what should be larger less what should be smaller. */
export interface Relation {
  difference: Term
  larger: Term
  strict: boolean
  smaller: Term
  /** As typed, for the message that names the worst part. */
  text: string
  nodes: { larger: Resolved, smaller: Resolved }
}

export interface Condition {
  holds: () => boolean
  relations: Relation[]
  terms: Term[]
}

export function comparison(node: ResolvedOf<'compare'>, compile: (side: Resolved) => Term): Condition {
  refuseMixedChain(node)
  const sides = node.sides.map(side => ordered(compile(side), written(side)))
  const relations = node.operators.map((operator, i) => relationOf(node, operator, i, sides))
  return {
    relations,
    terms: sides,
    holds: () => relations.every(({ difference, strict }) => {
      const d = asNumber(difference.run())
      return strict ? d > 0 : d >= 0
    }),
  }
}

function refuseMixedChain(node: ResolvedOf<'compare'>): void {
  const rising = node.operators.filter(operator => operator.startsWith('<')).length
  if (rising === 0 || rising === node.operators.length) return
  throw fault('chain-direction', 'A chain of comparisons goes in one direction.', 'Write `1 V <= x <= 2 V`, or two lines.', node.at)
}

function ordered(term: Term, text: string): Term<ScalarKind | ListKind> {
  const side = operand(term, text)
  const { kind } = side
  if (kind.type === 'laplace') throw fault('comparison-kind', 'A function of `s` cannot be compared.', 'Compare a figure of it, such as `gain(H, f)`.', term.at)
  const scalar = elementKind(kind)
  if (scalar.type === 'number' && scalar.complex) throw fault('complex-order', 'Complex values have no order.', 'Compare the modulus `abs(x)`, or `re(x)` and `im(x)`.', term.at)
  return { ...side, kind }
}

function relationOf(node: ResolvedOf<'compare'>, operator: Comparison, index: number, sides: Term<ScalarKind | ListKind>[]): Relation {
  const [left, right] = [sides[index], sides[index + 1]]
  const [leftNode, rightNode] = [node.sides[index], node.sides[index + 1]]
  if (!left || !right || !leftNode || !rightNode) throw fault('syntax', 'A side of this comparison is missing.', undefined, node.at)
  refuseMismatch(elementKind(left.kind), elementKind(right.kind), node)
  const rising = operator.startsWith('<')
  const [larger, smaller] = rising ? [right, left] : [left, right]
  return {
    difference: sum(larger, smaller, '-', node.at),
    larger,
    smaller,
    strict: operator.length === 1,
    text: `${written(leftNode)} ${operator} ${written(rightNode)}`,
    nodes: rising ? { larger: rightNode, smaller: leftNode } : { larger: leftNode, smaller: rightNode },
  }
}

/** As for a difference, in the words of a comparison. */
function refuseMismatch(a: ScalarKind, b: ScalarKind, node: ResolvedOf<'compare'>): void {
  if (a.type === 'level' || b.type === 'level') {
    if (a.type === b.type) return
    const number = a.type === 'number' ? a : b
    if (number.type === 'number' && number.zero) throw fault('level-mismatch', `${capital(describe(a.type === 'level' ? a : b))} and a plain 0 cannot be compared.`, 'Write `0 dB`.', node.at)
    throw levelMismatch(a, b, 'compared', node.at)
  }
  if (Boolean(a.point) !== Boolean(b.point)) throw temperatureMisuse(node.at)
  if (!a.point) agree(a, b, 'compared', node.at)
}
