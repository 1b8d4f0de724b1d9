/** Products and quotients. */
import { fault } from '../fault'
import * as C from '../numeric/complex'
import { isNone, isTimeLike, over, times } from '../quantity/dimension'
import type { LevelKind, ListKind, NumberKind, ScalarKind, Trace } from '../quantity/kind'
import { mergedTrace, number } from '../quantity/kind'
import { isPeculiar } from '../quantity/unitProduct'
import { multiplyDual, reciprocalDual } from '../tolerance/dual'
import type { SourceRange } from '../types'
import { describe } from './describe'
import { elementKind, lifted } from './operands'
import type { Operation } from './operands'
import { levelMismatch, temperatureMisuse } from './sums'
import type { Term } from './term'
import { asComplex, asNumber } from './term'

export function product(a: Term<ScalarKind | ListKind>, b: Term<ScalarKind | ListKind>, at: SourceRange): Term {
  const kind = productKind(elementKind(a.kind), elementKind(b.kind), at)
  const complex = kind.type === 'number' && kind.complex
  const operation: Operation = complex
    ? { kind, apply: (x, y) => finiteComplex(C.multiply(asComplex(x), asComplex(y)), at) }
    : { kind, apply: (x, y) => finite(asNumber(x) * asNumber(y), kind, at), dual: multiplyDual }
  return lifted(a, b, at, operation)
}

export function quotient(a: Term<ScalarKind | ListKind>, b: Term<ScalarKind | ListKind>, at: SourceRange): Term {
  const kind = quotientKind(elementKind(a.kind), elementKind(b.kind), at)
  const complex = kind.type === 'number' && kind.complex
  const operation: Operation = complex
    ? { kind, apply: (x, y) => divideComplex(asComplex(x), asComplex(y), b.at, at) }
    : { kind, apply: (x, y) => divideReal(asNumber(x), asNumber(y), kind, b.at, at), dual: (x, y) => multiplyDual(x, reciprocalDual(y)) }
  return lifted(a, b, at, operation)
}

/** Refuses what has left the range of float64. */
export function finite(value: number, kind: ScalarKind, at: SourceRange): number {
  if (Number.isFinite(value)) return value
  if (kind.open && !Number.isNaN(value)) return value
  throw notFinite(at)
}

export function finiteComplex(value: C.Complex, at: SourceRange): C.Complex {
  if (C.isFiniteComplex(value)) return value
  throw notFinite(at)
}

function notFinite(at: SourceRange) {
  return fault('not-finite', 'The result is too large for a number, or has no value.', 'Numbers reach to 1.8e308; check the exponents and the units.', at)
}

function divideReal(x: number, y: number, kind: ScalarKind, divisorAt: SourceRange, at: SourceRange): number {
  if (y === 0) throw divisionByZero(divisorAt)
  return finite(x / y, kind, at)
}

function divideComplex(x: C.Complex, y: C.Complex, divisorAt: SourceRange, at: SourceRange): C.Complex {
  if (y.re === 0 && y.im === 0) throw divisionByZero(divisorAt)
  return finiteComplex(C.divide(x, y), at)
}

function divisionByZero(at: SourceRange) {
  return fault('divide-by-zero', 'The divisor is zero.', 'Check the values that it is made of.', at)
}

function productKind(a: ScalarKind, b: ScalarKind, at: SourceRange): ScalarKind {
  if (a.type === 'level' || b.type === 'level') return levelProduct(a, b, at)
  if (a.point || b.point) throw temperatureMisuse(at)
  return kept(a, b, times(a.dimension, b.dimension), mergedTrace(a.trace, b.trace), a.constant !== undefined && b.constant !== undefined ? a.constant * b.constant : undefined)
}

function quotientKind(a: ScalarKind, b: ScalarKind, at: SourceRange): ScalarKind {
  if (a.type === 'level' || b.type === 'level') return levelQuotient(a, b, at)
  if (a.point || b.point) throw temperatureMisuse(at)
  const merged = mergedTrace(a.trace, b.trace)
  const trace = { ...merged, overPi: a.trace.overPi || b.trace.pi }
  const constant = a.constant !== undefined && b.constant ? a.constant / b.constant : undefined
  return kept(a, b, over(a.dimension, b.dimension), trace, constant)
}

function kept(a: NumberKind, b: NumberKind, dimension: NumberKind['dimension'], trace: Trace, constant: number | undefined): NumberKind {
  const { mark, lostHertz } = markOfProduct(a, b, dimension)
  const angle = angleOfProduct(a, b)
  const display = displayOfProduct(a, b)
  const open = a.open ?? b.open
  return number(dimension, {
    complex: a.complex || b.complex,
    trace: { ...trace, lostHertz: trace.lostHertz || lostHertz },
    ...(mark && { mark }), ...(angle && { angle }), ...(display && { display }), ...(open && { open }),
    ...(constant === undefined || !isNone(dimension) ? {} : { constant }),
  })
}

/** L9: a mark survives plain factors; a factor containing pi, or an angle, removes it. */
function markOfProduct(a: NumberKind, b: NumberKind, dimension: NumberKind['dimension']): { mark?: NumberKind['mark'], lostHertz: boolean } {
  if (!isTimeLike(dimension)) return { lostHertz: false }
  if (a.mark && b.mark) return a.mark === b.mark ? { mark: a.mark, lostHertz: false } : { lostHertz: false }
  const [marked, factor] = a.mark ? [a, b] : [b, a]
  if (!marked.mark || !isNone(factor.dimension)) return { lostHertz: false }
  const turns = factor.trace.pi || factor.angle !== undefined
  return turns ? { lostHertz: marked.mark === 'Hz' } : { mark: marked.mark, lostHertz: false }
}

function angleOfProduct(a: NumberKind, b: NumberKind): 'deg' | 'rad' | undefined {
  if (!isNone(a.dimension) || !isNone(b.dimension) || (a.angle && b.angle)) return undefined
  return a.angle
}

/** A peculiar unit survives a plain factor. */
function displayOfProduct(a: NumberKind, b: NumberKind): NumberKind['display'] {
  const [shown, factor] = a.display ? [a, b] : [b, a]
  if (!shown.display || factor.display || !isNone(factor.dimension) || factor.angle) return undefined
  return isPeculiar(shown.display.unit) && shown === a ? { unit: shown.display.unit, fixed: false } : isPeculiar(shown.display.unit) && factor.constant !== undefined ? { unit: shown.display.unit, fixed: false } : undefined
}

function levelProduct(a: ScalarKind, b: ScalarKind, at: SourceRange): LevelKind {
  const [level, factor] = a.type === 'level' ? [a, b] : [b, a]
  if (level.type !== 'level' || factor.type !== 'number' || level.reference || !isNone(factor.dimension) || factor.complex) {
    throw fault('level-mismatch', `${describe(a)} and ${describe(b)} cannot be multiplied: a level takes a plain number only.`, 'Turn the level into a factor with `ratio(x)` or `powerRatio(x)`.', at)
  }
  const { display } = level
  return { type: 'level', ...(level.open && { open: level.open }), ...(display && { display }) }
}

function levelQuotient(a: ScalarKind, b: ScalarKind, at: SourceRange): ScalarKind {
  if (a.type === 'level' && b.type === 'level') {
    if (a.reference || b.reference) throw levelMismatch(a, b, 'divided', at)
    return number([0, 0, 0, 0, 0, 0, 0])
  }
  if (a.type === 'level') return levelProduct(a, b, at)
  throw fault('level-mismatch', `${describe(a)} cannot be divided by ${describe(b)}.`, 'Turn the level into a factor with `ratio(x)` or `powerRatio(x)`.', at)
}
