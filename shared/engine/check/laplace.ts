/** Arithmetic of functions of `s`: as rational functions while they are, else as functions of a complex number. */
import { fault } from '../fault'
import * as C from '../numeric/complex'
import { isNone, over, raised, sameDimension, times } from '../quantity/dimension'
import type { LaplaceKind, NumberKind } from '../quantity/kind'
import { dimensionText } from '../quantity/show'
import * as T from '../transfer'
import type { Rational } from '../transfer'
import type { SourceRange } from '../types'
import { describe } from './describe'
import { capital, isLaplace } from './operands'
import type { Operand } from './operands'
import { exponentKind, rationalExponent } from './powers'
import { temperatureMisuse } from './sums'
import type { CheckContext, Term } from './term'
import { asComplex, asNumber, mergedVariables, summedEffort } from './term'

/** A side of an operation in `s`: a function of `s` or a number. */
type Side = Term<LaplaceKind | NumberKind>

const noRun = () => {
  throw new Error('a function of s has no single value')
}

/** The variable `s` itself: 1/s, without a mark. */
export function laplaceVariable(at: SourceRange): Term<LaplaceKind> {
  return {
    kind: { type: 'laplace', dimension: [0, 0, -1, 0, 0, 0, 0], rational: true, monomial: true },
    at, variables: [], effort: 1, run: noRun, rational: T.variable, atS: s => s,
  }
}

export function laplaceBinary(operator: string, a: Operand, b: Operand, at: SourceRange, context: CheckContext): Term {
  if (operator === '^') return laplacePower(side(a), side(b), at)
  const [x, y] = [side(a), side(b)]
  if (operator === '+' || operator === '-') return laplaceSum(x, y, operator, at)
  warnOfHertz(x, y, operator, at, context)
  const multiply = operator === '*' || operator === '.*'
  const kind = {
    type: 'laplace' as const,
    dimension: (multiply ? times : over)(x.kind.dimension, y.kind.dimension),
    rational: isRational(x) && isRational(y),
    monomial: isMonomial(x) && isMonomial(y),
  }
  return multiply
    ? combined(kind, x, y, at, T.multiply, C.multiply)
    : combined(kind, x, y, at, T.divide, C.divide)
}

function side(operand: Operand): Side {
  const { kind } = operand
  if (kind.type === 'laplace') return { ...operand, kind }
  if (kind.type === 'number') {
    if (kind.point) throw temperatureMisuse(operand.at)
    return { ...operand, kind }
  }
  throw fault('laplace-operand', `${capital(describe(kind))} takes no part in a transfer function.`, kind.type === 'level' ? 'Turn the level into a factor with `ratio(x)`.' : 'Use single values.', operand.at)
}

function isRational(term: Side): boolean {
  return term.kind.type === 'laplace' ? term.kind.rational : !term.kind.complex
}

function isMonomial(term: Side): boolean {
  return term.kind.type === 'number' || term.kind.monomial
}

/** A side as a rational function; only called where it is one. */
export function rationalOf(term: Term): () => Rational {
  const { rational, run } = term
  return rational ?? (() => T.constant(asNumber(run())))
}

export function functionOf(term: Term): (s: C.Complex) => C.Complex {
  const { atS, run } = term
  return atS ?? (() => asComplex(run()))
}

function combined(kind: LaplaceKind, a: Side, b: Side, at: SourceRange, rational: (x: Rational, y: Rational) => Rational, complex: (x: C.Complex, y: C.Complex) => C.Complex): Term<LaplaceKind> {
  const [ra, rb] = [rationalOf(a), rationalOf(b)]
  const [fa, fb] = [functionOf(a), functionOf(b)]
  return {
    kind, at, variables: mergedVariables([a, b]), effort: summedEffort([a, b]), run: noRun,
    ...(kind.rational ? { rational: () => rational(ra(), rb()) } : {}),
    atS: s => complex(fa(s), fb(s)),
  }
}

function laplaceSum(a: Side, b: Side, sign: '+' | '-', at: SourceRange): Term<LaplaceKind> {
  const zero = [a, b].find(term => term.kind.type === 'number' && term.kind.zero)
  if (!zero && !sameDimension(a.kind.dimension, b.kind.dimension)) throw laplaceMismatch(a, b, sign, at)
  const main = zero === a ? b : a
  const kind: LaplaceKind = { type: 'laplace', dimension: main.kind.dimension, rational: isRational(a) && isRational(b), monomial: false }
  return sign === '+' ? combined(kind, a, b, at, T.add, C.add) : combined(kind, a, b, at, T.subtract, C.subtract)
}

function laplaceMismatch(a: Side, b: Side, sign: '+' | '-', at: SourceRange) {
  const onlyTime = [a, b].every(term => term.kind.dimension.every((exponent, i) => i === 2 || exponent === 0))
  const hint = onlyTime
    ? '`s` has the unit 1/s. Write `s/w_0` with a `w_0` in rad/s (or `s*T`), or define the normalised function `B(p) = …` and write `H(s) = B(s/w_0)`.'
    : 'Check the coefficients: each term must come to the same unit.'
  return fault('dimension-mismatch', `Terms in ${unitOf(a)} and ${unitOf(b)} cannot be ${sign === '+' ? 'added' : 'subtracted'}.`, hint, at)
}

function unitOf(term: Side): string {
  return isNone(term.kind.dimension) ? 'plain numbers' : dimensionText(term.kind.dimension)
}

/** L9: `s` is in rad/s where it meets a frequency, so hertz beside it lack a 2π. */
function warnOfHertz(a: Side, b: Side, operator: string, at: SourceRange, context: CheckContext): void {
  const hertz = (term: Side) => term.kind.type === 'number' && term.kind.mark === 'Hz'
  const plain = (term: Side) => isLaplace(term) && term.kind.monomial
  const over = operator === '/' || operator === './'
  if (!(plain(a) && hertz(b)) && !(!over && plain(b) && hertz(a))) return
  context.warn('laplace-hertz', `\`s\` ${over ? 'over' : 'times'} a value in Hz lacks a factor of 2π.`, 'Write `s/(2*pi*f)`, or state the corner in rad/s: `s/(1000 rad/s)`.', at)
}

function laplacePower(a: Side, b: Side, at: SourceRange): Term<LaplaceKind> {
  const [fa, fb] = [functionOf(a), functionOf(b)]
  const base = { at, variables: mergedVariables([a, b]), effort: summedEffort([a, b]), run: noRun }
  const atS = (s: C.Complex) => C.power(fa(s), fb(s))
  if (isLaplace(b)) {
    if (!isNone(b.kind.dimension) || !isNone(a.kind.dimension)) throw fault('exponent-dimension', 'Base and exponent of a power with `s` in its exponent are plain numbers.', 'Write `exp(-s*T)` with a time `T`.', at)
    return { ...base, kind: { type: 'laplace', dimension: a.kind.dimension, rational: false, monomial: false }, atS }
  }
  const exponent = exponentKind(b.kind as NumberKind, b.at)
  const value = isNone(a.kind.dimension) ? exponent.constant : rationalExponent(exponent, b.at)
  const whole = value !== undefined && Number.isInteger(value) && isLaplace(a) && a.kind.rational
  const kind: LaplaceKind = {
    type: 'laplace',
    dimension: value === undefined ? a.kind.dimension : raised(a.kind.dimension, value),
    rational: whole,
    monomial: isMonomial(a),
  }
  if (!whole) return { ...base, kind, atS }
  const ra = rationalOf(a)
  return { ...base, kind, atS, rational: () => T.power(ra(), value) }
}

export function negatedLaplace(a: Operand, at: SourceRange): Term {
  const [ra, fa] = [a.rational, functionOf(a)]
  return { ...a, at, ...(ra ? { rational: () => T.negate(ra()) } : {}), atS: s => C.negate(fa(s)) }
}

/** A function without rational form, such as `exp(-s*T)` or `sqrt(s*T)`. */
export function laplaceFunction(a: Term<LaplaceKind>, dimension: LaplaceKind['dimension'], apply: (z: C.Complex) => C.Complex, at: SourceRange): Term<LaplaceKind> {
  const fa = functionOf(a)
  return { at, variables: a.variables, effort: a.effort + 4, run: noRun, kind: { type: 'laplace', dimension, rational: false, monomial: false }, atS: s => apply(fa(s)) }
}

/** `inner` put in the place of the variable of `outer`. */
export function composed(outer: Term, inner: Term<LaplaceKind>, kind: LaplaceKind, at: SourceRange): Term<LaplaceKind> {
  const [ro, ri] = [outer.rational, inner.rational]
  const [fo, fi] = [functionOf(outer), functionOf(inner)]
  return {
    kind, at, variables: mergedVariables([outer, inner]), effort: outer.effort + inner.effort + 10, run: noRun,
    ...(ro && ri && kind.rational ? { rational: () => T.compose(ro(), ri()) } : {}),
    atS: s => fo(fi(s)),
  }
}
