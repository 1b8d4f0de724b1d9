/** Arithmetic of transfer functions. Every operation is total: what cannot be formed is refused by value. */
import type { Polynomial } from '../numeric/polynomial'
import { addPolynomials, multiplyPolynomials, powerOfPolynomial, scalePolynomial, shiftPolynomial } from '../numeric/polynomial'
import { integerPower } from '../numeric/math'
import { refuse } from './outcome'
import type { Factor, Rational } from './rational'
import { MAX_ORDER, degreeOf, normalise, orderOf, proportion, refusedRational } from './rational'

export function constant(value: number): Rational {
  return normalise(value, 0, [], [])
}

/** The variable s itself. */
export function variable(): Rational {
  return { gain: 1, origin: 1, numerator: [], denominator: [] }
}

/**
 * A ratio of polynomials in s.
 * @param numerator ascending coefficients, SI units
 * @param denominator ascending coefficients, not all zero
 */
export function fromCoefficients(numerator: Polynomial, denominator: Polynomial = [1]): Rational {
  const above = trimmed(numerator)
  const below = trimmed(denominator)
  if (below.length === 0) return divisionByZero()
  if (above.length === 0) return constant(0)
  return normalise(1, 0, [{ coefficients: above, power: 1 }], [{ coefficients: below, power: 1 }])
}

function trimmed(p: Polynomial): Polynomial {
  return addPolynomials(p, [])
}

function divisionByZero(): Rational {
  return refusedRational(refuse('divide-by-zero', 'The denominator is zero for every s.'))
}

export function multiply(a: Rational, b: Rational): Rational {
  if (a.refused) return a
  if (b.refused) return b
  return normalise(a.gain * b.gain, a.origin + b.origin,
    [...a.numerator, ...b.numerator], [...a.denominator, ...b.denominator])
}

export function reciprocal(a: Rational): Rational {
  if (a.refused) return a
  if (a.gain === 0) return divisionByZero()
  return { gain: 1 / a.gain, origin: -a.origin, numerator: a.denominator, denominator: a.numerator }
}

export function divide(a: Rational, b: Rational): Rational {
  return multiply(a, reciprocal(b))
}

export function negate(a: Rational): Rational {
  return a.refused || a.gain === 0 ? a : { ...a, gain: -a.gain }
}

export function subtract(a: Rational, b: Rational): Rational {
  return add(a, negate(b))
}

/** Sum over the least common denominator; factors common to both numerators stay factors. */
export function add(a: Rational, b: Rational): Rational {
  if (a.refused || b.gain === 0) return a
  if (b.refused || a.gain === 0) return b
  const denominator = common(a.denominator, b.denominator, Math.max)
  const kept = common(a.numerator, b.numerator, Math.min)
  const origin = Math.min(a.origin, b.origin)
  const first = multipliedOut(a, origin, kept, denominator)
  const second = multipliedOut(b, origin, kept, denominator)
  if (!first || !second) return tooHigh()
  const sum = addPolynomials(first, second)
  if (sum.length === 0) return constant(0)
  return normalise(1, origin, [...kept, { coefficients: sum, power: 1 }], denominator)
}

function tooHigh(): Rational {
  return refusedRational(refuse('order-too-high',
    `The order of this transfer function is above ${MAX_ORDER}, the highest worked with.`, 'Split it into parts.'))
}

/** The factors of both lists, each to the larger (or smaller) of its two powers. */
function common(a: readonly Factor[], b: readonly Factor[], choose: (x: number, y: number) => number): Factor[] {
  const result: Factor[] = []
  for (const f of a) {
    const power = choose(f.power, powerIn(b, f.coefficients))
    if (power > 0) result.push({ coefficients: f.coefficients, power })
  }
  for (const f of b) {
    if (powerIn(a, f.coefficients) > 0) continue
    const power = choose(f.power, 0)
    if (power > 0) result.push(f)
  }
  return result
}

function powerIn(factors: readonly Factor[], coefficients: Polynomial): number {
  return factors.find(f => proportion(f.coefficients, coefficients) !== undefined)?.power ?? 0
}

/** r·denominator / (kept·s^origin) as one polynomial; undefined where its degree is beyond the limit. */
function multipliedOut(r: Rational, origin: number, kept: readonly Factor[], denominator: readonly Factor[]): Polynomial | undefined {
  const quotient = normalise(r.gain, r.origin - origin, [...r.numerator, ...denominator], [...kept, ...r.denominator])
  if (quotient.refused || quotient.denominator.length > 0) return undefined
  return expand(quotient)
}

/** Numerator with gain and powers of s, multiplied out. */
function expand(r: Rational): Polynomial {
  let product: Polynomial = [r.gain]
  for (const f of r.numerator) product = multiplyPolynomials(product, powerOfPolynomial(f.coefficients, f.power))
  return shiftPolynomial(product, Math.max(r.origin, 0))
}

/** a^n for integer n. */
export function power(a: Rational, n: number): Rational {
  if (a.refused) return a
  if (!Number.isInteger(n)) {
    return refusedRational(refuse('fractional-power', 'A rational function takes integer powers only.'))
  }
  if (n === 0) return constant(1)
  if (n < 0) return power(reciprocal(a), -n)
  if (orderOf(a) * n > MAX_ORDER) return tooHigh()
  const raise = (f: Factor): Factor => ({ coefficients: f.coefficients, power: f.power * n })
  return normalise(integerPower(a.gain, n), a.origin * n, a.numerator.map(raise), a.denominator.map(raise))
}

/** outer(inner(s)): the function `outer` with its variable replaced, as in `B(s/w_c)`. */
export function compose(outer: Rational, inner: Rational): Rational {
  if (outer.refused) return outer
  if (inner.refused) return inner
  if (orderOf(outer) * orderOf(inner) > MAX_ORDER) return tooHigh()
  if (inner.gain === 0 && outer.origin < 0) return divisionByZero()
  let result = multiply(constant(outer.gain), power(inner, outer.origin))
  for (const f of outer.numerator) result = multiply(result, power(substitute(f.coefficients, inner), f.power))
  for (const f of outer.denominator) result = divide(result, power(substitute(f.coefficients, inner), f.power))
  return result
}

/** p(x) for x = n/d, as Σ a_k n^k d^(m−k) / d^m. */
function substitute(p: Polynomial, x: Rational): Rational {
  const m = p.length - 1
  const above = expand(x)
  const below = expand({ gain: 1, origin: -x.origin, numerator: x.denominator, denominator: [] })
  let sum: Polynomial = []
  for (let k = 0; k <= m; k++) {
    const term = multiplyPolynomials(powerOfPolynomial(above, k), powerOfPolynomial(below, m - k))
    sum = addPolynomials(sum, scalePolynomial(term, p[k]!))
  }
  if (sum.length === 0) return constant(0)
  const denominator = x.denominator.map(f => ({ coefficients: f.coefficients, power: f.power * m }))
  return normalise(1, -Math.max(-x.origin, 0) * m, [{ coefficients: sum, power: 1 }], denominator)
}

/** Two blocks one after the other, the second not loading the first. */
export function series(a: Rational, b: Rational): Rational {
  return multiply(a, b)
}

/** Impedances in parallel: a·b/(a + b). */
export function parallel(a: Rational, b: Rational): Rational {
  if (a.refused) return a
  if (b.refused) return b
  if (a.gain === 0 || b.gain === 0) return constant(0)
  return reciprocal(add(reciprocal(a), reciprocal(b)))
}

/** Closed loop forward/(1 + forward·back), for negative feedback through `back`. */
export function feedback(forward: Rational, back: Rational = constant(1)): Rational {
  return divide(forward, add(constant(1), multiply(forward, back)))
}

/** Polynomials of numerator and denominator, multiplied out, ascending. */
export function toCoefficients(r: Rational): { numerator: Polynomial, denominator: Polynomial } {
  return {
    numerator: r.gain === 0 ? [] : expand(r),
    denominator: expand({ gain: 1, origin: -r.origin, numerator: r.denominator, denominator: [] }),
  }
}

/** Degrees of numerator and denominator without the powers of s at the origin. */
export function finiteDegrees(r: Rational): { zeros: number, poles: number } {
  return { zeros: degreeOf(r.numerator), poles: degreeOf(r.denominator) }
}
