/** What every operator asks of its two sides, and how scalar operations reach lists. */
import { fault } from '../fault'
import type { Kind, LaplaceKind, ListKind, ScalarKind } from '../quantity/kind'
import type { Dual } from '../tolerance/dual'
import type { SourceRange } from '../types'
import { describe } from './describe'
import type { Term, Value } from './term'
import { isList, mergedVariables, summedEffort } from './term'

export type Operand = Term<ScalarKind | ListKind | LaplaceKind>

/** A side of an operator: a number, a level, a list or a function of `s`. */
export function operand(term: Term, written: string): Operand {
  const { kind } = term
  if (kind.type === 'number' || kind.type === 'level' || kind.type === 'list' || kind.type === 'laplace') return { ...term, kind }
  if (kind.type === 'transfer') throw fault('bare-transfer', `\`${written}\` is a transfer function; by its bare name it stands only as an argument.`, `Inside another transfer function write \`${written}(s)\`; for a value \`gain(${written}, f)\` or \`${written}(2*pi*i*f)\`.`, term.at)
  if (kind.type === 'function') throw fault('bare-function', `\`${written}\` is a function and has no value by itself.`, `Write \`${written}(${kind.parameters.join(', ')})\` with values in place of its parameters.`, term.at)
  throw fault('operand-kind', `${capital(describe(kind))} takes no part in a calculation.`, 'Use a number, a quantity with a unit or a level.', term.at)
}

export function capital(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1)
}

export interface Operation {
  kind: ScalarKind
  apply: (x: Value, y: Value) => Value
  dual?: (x: Dual, y: Dual) => Dual
}

/** The operation on two scalars, or element by element where a side is a list. */
export function lifted(a: Term<ScalarKind | ListKind>, b: Term<ScalarKind | ListKind>, at: SourceRange, operation: Operation): Term {
  const base = { at, variables: mergedVariables([a, b]), effort: summedEffort([a, b]) }
  const { apply, dual } = operation
  if (a.kind.type === 'list' || b.kind.type === 'list') {
    return { ...base, kind: { type: 'list', of: operation.kind }, run: () => elementwise(a.run(), b.run(), apply, at) }
  }
  const [left, right] = [a.run, b.run]
  const [dualLeft, dualRight] = [a.dual, b.dual]
  return {
    ...base,
    kind: operation.kind,
    run: () => apply(left(), right()),
    ...(dual && dualLeft && dualRight ? { dual: () => dual(dualLeft(), dualRight()) } : {}),
  }
}

function elementwise(x: Value, y: Value, apply: (x: Value, y: Value) => Value, at: SourceRange): Value {
  if (isList(x) && isList(y)) {
    if (x.length !== y.length) throw fault('list-length', `The lists have ${x.length} and ${y.length} items.`, 'Lists are combined item by item and must be equally long.', at)
    return x.map((item, i) => apply(item, y[i] ?? NaN))
  }
  if (isList(x)) return x.map(item => apply(item, y))
  if (isList(y)) return y.map(item => apply(x, item))
  return apply(x, y)
}

export function elementKind(kind: ScalarKind | ListKind): ScalarKind {
  return kind.type === 'list' ? kind.of : kind
}

export function isLaplace(term: Term): term is Term<LaplaceKind> {
  return term.kind.type === 'laplace'
}

export function isValues(term: Operand): term is Term<ScalarKind | ListKind> {
  return term.kind.type !== 'laplace'
}

export function isScalar(kind: Kind): kind is ScalarKind {
  return kind.type === 'number' || kind.type === 'level'
}
