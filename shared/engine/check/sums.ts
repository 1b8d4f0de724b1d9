/** Sums and differences: which may be formed, and what they keep of their sides. */
import { fault } from '../fault'
import * as C from '../numeric/complex'
import { isNone, isTimeLike, sameDimension } from '../quantity/dimension'
import type { Display, LevelKind, ListKind, NumberKind, ScalarKind } from '../quantity/kind'
import { mergedTrace } from '../quantity/kind'
import { dimensionText } from '../quantity/show'
import { addDual, negateDual } from '../tolerance/dual'
import type { SourceRange } from '../types'
import { describe } from './describe'
import { capital, elementKind, lifted } from './operands'
import type { Operation } from './operands'
import type { Term, Value } from './term'
import { asComplex, asNumber } from './term'

export type Sign = '+' | '-'

export function sum(a: Term<ScalarKind | ListKind>, b: Term<ScalarKind | ListKind>, sign: Sign, at: SourceRange): Term {
  const kind = sumKind(elementKind(a.kind), elementKind(b.kind), sign, at)
  return lifted(a, b, at, { kind, ...sumValues(kind, sign) })
}

function sumValues(kind: ScalarKind, sign: Sign): Omit<Operation, 'kind'> {
  if (kind.type === 'number' && kind.complex) {
    return { apply: (x, y) => sign === '+' ? C.add(asComplex(x), asComplex(y)) : C.subtract(asComplex(x), asComplex(y)) }
  }
  return sign === '+'
    ? { apply: (x: Value, y: Value) => asNumber(x) + asNumber(y), dual: addDual }
    : { apply: (x: Value, y: Value) => asNumber(x) - asNumber(y), dual: (x, y) => addDual(x, negateDual(y)) }
}

export function sumKind(a: ScalarKind, b: ScalarKind, sign: Sign, at: SourceRange): ScalarKind {
  if (a.type === 'level' || b.type === 'level') return levelSum(a, b, sign, at)
  if (a.point || b.point) return temperatureSum(a, b, sign, at)
  agree(a, b, sign === '+' ? 'added' : 'subtracted', at)
  return keptBySum(a, b, sign)
}

function keptBySum(a: NumberKind, b: NumberKind, sign: Sign): NumberKind {
  const main = a.zero ? b : a
  const mark = a.mark ?? b.mark
  const angle = a.zero ? b.angle : b.zero ? a.angle : a.angle && b.angle ? main.angle : undefined
  const display = a.zero || b.zero ? (main === a ? a.display : b.display) : commonDisplay(a, b)
  const open = a.open ?? b.open
  const constant = a.constant === undefined || b.constant === undefined ? undefined : sign === '+' ? a.constant + b.constant : a.constant - b.constant
  return {
    type: 'number', dimension: main.dimension, complex: a.complex || b.complex, trace: mergedTrace(a.trace, b.trace),
    ...(mark && { mark }), ...(angle && { angle }), ...(display && { display }), ...(open && { open }), ...(constant !== undefined && { constant }),
  }
}

/** A display unit survives where both sides share it. */
function commonDisplay(a: NumberKind, b: NumberKind): Display | undefined {
  if (!a.display || !b.display) return isNone(a.dimension) ? undefined : a.display ?? b.display
  return a.display
}

/** Refuses two sides that are not of one kind: for sums, comparisons, `min`, lists and choices. */
export function agree(a: NumberKind, b: NumberKind, verb: string, at: SourceRange): void {
  if (a.zero || b.zero) return
  if (!sameDimension(a.dimension, b.dimension)) throw mismatch(a, b, verb, at)
  if (a.mark && b.mark && a.mark !== b.mark && isTimeLike(a.dimension)) {
    throw fault('mark-mismatch', `A frequency in Hz and an angular frequency in rad/s cannot be ${verb}.`, 'Convert one of them first: give `w to Hz` or `f to rad/s` a line and a name of its own.', at)
  }
  if ((a.angle === 'deg' && !b.angle) || (b.angle === 'deg' && !a.angle)) {
    throw fault('angle-mismatch', `An angle in degrees and a plain number cannot be ${verb}.`, 'Give the number its unit: `30 deg`, or `0.5 rad`.', at)
  }
}

function mismatch(a: NumberKind, b: NumberKind, verb: string, at: SourceRange) {
  const percent = [a, b].find(kind => kind.display?.unit.factors.some(factor => factor.unit.symbol === 'percent' || factor.unit.symbol === 'ppm'))
  if (percent) return fault('percent-sum', `${capital(describe(percent === a ? b : a))} and a percentage cannot be ${verb}: 5 % is the number 0.05.`, 'Write `230 V*(1 + 5 %)` for 5 % more.', at)
  const [x, y] = [describe(a), describe(b)]
  const hint = isNone(a.dimension) !== isNone(b.dimension)
    ? `Give the plain number its unit (${dimensionText(isNone(a.dimension) ? b.dimension : a.dimension)}), or divide the other side by one.`
    : 'Check the formula: one of its sides lacks a factor.'
  return fault('dimension-mismatch', `${capital(x)} and ${y} cannot be ${verb}: they are quantities of different kinds.`, hint, at)
}

function levelSum(a: ScalarKind, b: ScalarKind, sign: Sign, at: SourceRange): LevelKind {
  const verb = sign === '+' ? 'added' : 'subtracted'
  if (a.type !== 'level' || b.type !== 'level') throw levelMismatch(a, b, verb, at)
  const open = a.open ?? b.open
  const display = a.display ?? b.display
  const base: LevelKind = { type: 'level', ...(open && { open }), ...(display && !display.unit.reference && { display }) }
  if (!a.reference && !b.reference) return base
  if (a.reference && b.reference) {
    if (sign === '-' && a.reference === b.reference) return { type: 'level' }
    throw fault('level-reference', `${a.reference} and ${b.reference} cannot be ${verb}.`, sign === '-' ? 'Convert one to the reference of the other first.' : 'Add the powers: convert each with `to W`.', at)
  }
  if (b.reference && sign === '-') throw fault('level-reference', `A level in ${b.reference} cannot be subtracted from a plain level in dB.`, 'Turn the difference round.', at)
  const reference = a.reference ?? b.reference
  return { type: 'level', ...(reference && { reference }) }
}

export function levelMismatch(a: ScalarKind, b: ScalarKind, verb: string, at: SourceRange) {
  return fault('level-mismatch', `${capital(describe(a))} and ${describe(b)} cannot be ${verb}: a level is the logarithm of a ratio.`, 'Turn the level into a factor with `ratio(x)` (or `powerRatio(x)`), or the factor into a level with `level(x)` (or `powerLevel(x)`).', at)
}

function temperatureSum(a: NumberKind, b: NumberKind, sign: Sign, at: SourceRange): NumberKind {
  const kelvin = (kind: NumberKind) => !kind.point && sameDimension(kind.dimension, [0, 0, 0, 0, 1, 0, 0]) && !kind.zero
  const { point: _point, display: _display, ...interval } = a.point ? a : b
  if (a.point && b.point && sign === '-') return { ...interval, type: 'number' }
  if (a.point && kelvin(b)) return { ...interval, type: 'number', point: true }
  if (b.point && kelvin(a) && sign === '+') return { ...interval, type: 'number', point: true }
  throw temperatureMisuse(at)
}

export function temperatureMisuse(at: SourceRange) {
  return fault('temperature-point', '°C marks a point on the temperature scale: to it an interval in K can be added, and two points can be subtracted; nothing else.', 'Write intervals in `K` (`20 degC + 15 K`), or convert the point with `to K`.', at)
}
