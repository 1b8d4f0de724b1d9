/** Powers: exponents are plain numbers; on a dimensioned base a rational constant (L7). */
import { fault } from '../fault'
import * as C from '../numeric/complex'
import { integerPower, pow } from '../numeric/math'
import { asFraction, isNone, raised } from '../quantity/dimension'
import type { ListKind, NumberKind, ScalarKind } from '../quantity/kind'
import { mergedTrace, number } from '../quantity/kind'
import { exponentialDual, logarithmDual, multiplyDual, powerDual } from '../tolerance/dual'
import type { SourceRange } from '../types'
import { describe } from './describe'
import { elementKind, lifted } from './operands'
import type { Operation } from './operands'
import { finite, finiteComplex } from './products'
import { temperatureMisuse } from './sums'
import type { Term } from './term'
import { asComplex, asNumber } from './term'

export function powerTerm(a: Term<ScalarKind | ListKind>, b: Term<ScalarKind | ListKind>, at: SourceRange): Term {
  const base = elementKind(a.kind)
  const exponent = exponentKind(elementKind(b.kind), b.at)
  if (base.type === 'level') throw fault('level-mismatch', `${describe(base)} cannot be raised to a power.`, 'Turn the level into a factor with `ratio(x)` or `powerRatio(x)`.', a.at)
  if (base.point) throw temperatureMisuse(at)
  const kind = powerKind(base, exponent, b.at)
  return lifted(a, b, at, kind.complex ? complexPower(kind, at) : realPower(kind, exponent.constant, at))
}

export function exponentKind(kind: ScalarKind, at: SourceRange): NumberKind {
  if (kind.type === 'level') throw fault('level-mismatch', `An exponent is a plain number, not ${describe(kind)}.`, '10^(dB/20) is `ratio(x)`, and 10^(dB/10) is `powerRatio(x)`.', at)
  if (kind.point || !isNone(kind.dimension)) throw fault('exponent-dimension', `An exponent is a plain number, not ${describe(kind)}.`, 'Divide it by a value of the same unit.', at)
  return kind
}

function powerKind(base: NumberKind, exponent: NumberKind, at: SourceRange): NumberKind {
  const complex = base.complex || exponent.complex
  const merged = mergedTrace(base.trace, exponent.trace)
  if (isNone(base.dimension)) {
    const constant = base.constant !== undefined && exponent.constant !== undefined ? pow(base.constant, exponent.constant) : undefined
    return number(base.dimension, { complex, trace: merged, ...(constant !== undefined && Number.isFinite(constant) ? { constant } : {}) })
  }
  const value = rationalExponent(exponent, at)
  const trace = value < 0 ? { ...merged, overPi: merged.overPi || base.trace.pi } : merged
  return number(raised(base.dimension, value), { complex, trace, ...(base.mark && { mark: base.mark }) })
}

/** The constant to which a base with a dimension is raised. */
export function rationalExponent(exponent: NumberKind, at: SourceRange): number {
  const { constant } = exponent
  if (constant === undefined || exponent.complex) throw fault('exponent-constant', 'A quantity with a unit can be raised to a constant only.', 'Write the exponent as a number, such as `2` or `(1/2)`, or divide the base by its unit first.', at)
  if (!asFraction(constant)) throw fault('exponent-rational', `A quantity with a unit can be raised to a simple fraction only, not to ${constant}.`, 'Write `(1/3)`, or divide the base by its unit first.', at)
  return constant
}

function complexPower(kind: NumberKind, at: SourceRange): Operation {
  return { kind, apply: (x, y) => finiteComplex(C.power(asComplex(x), asComplex(y)), at) }
}

function realPower(kind: NumberKind, constant: number | undefined, at: SourceRange): Operation {
  return {
    kind,
    apply: (x, y) => finite(powerOfReal(asNumber(x), asNumber(y), at), kind, at),
    dual: constant === undefined
      ? (x, y) => exponentialDual(multiplyDual(y, logarithmDual(x)))
      : x => powerDual(x, constant),
  }
}

/** x^y, by repeated multiplication for small whole y so that squares are products. */
export function powerOfReal(x: number, y: number, at: SourceRange): number {
  if (x === 0 && y < 0) throw fault('divide-by-zero', 'Zero cannot be raised to a negative power.', 'Check the values that the base is made of.', at)
  if (Number.isInteger(y) && Math.abs(y) <= 64) return y < 0 ? 1 / integerPower(x, -y) : integerPower(x, y)
  if (x < 0 && !Number.isInteger(y)) throw fault('real-domain', `A negative number has no real power ${y}.`, 'For a complex result write the base as a complex number: `(-1 + 0i)^0.5`.', at)
  return pow(x, y)
}
