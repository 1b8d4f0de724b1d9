/** A rational function of s with its factors kept as they were written. */
import type { Polynomial } from '../numeric/polynomial'
import { EPSILON, integerPower } from '../numeric/math'
import type { Refusal } from './outcome'
import { refuse } from './outcome'

/** A polynomial in s (ascending, SI units) to a positive power; neither end coefficient is zero. */
export interface Factor { readonly coefficients: Polynomial, readonly power: number }

/**
 * gain · s^origin · ∏ numerator / ∏ denominator.
 *
 * Factors are kept as written because multiplying them out loses digits: the poles of a product are
 * the poles of its factors. A function that could not be formed (division by zero, order beyond the
 * limit) carries the reason in `refused`, which every operation hands on.
 */
export interface Rational {
  readonly gain: number
  /** Zeros at s = 0, negative for poles. */
  readonly origin: number
  readonly numerator: readonly Factor[]
  readonly denominator: readonly Factor[]
  readonly refused?: Refusal
}

/** Highest order of numerator and denominator that is worked with. */
export const MAX_ORDER = 64

/** Coefficients as far apart as the roundings of one formula written in two ways count as equal. */
const EQUAL = 8 * EPSILON

export function refusedRational(refused: Refusal): Rational {
  return { gain: NaN, origin: 0, numerator: [], denominator: [], refused }
}

/** Degree of a product of factors. */
export function degreeOf(factors: readonly Factor[]): number {
  let sum = 0
  for (const f of factors) sum += (f.coefficients.length - 1) * f.power
  return sum
}

export function numeratorDegree(r: Rational): number {
  return degreeOf(r.numerator) + Math.max(r.origin, 0)
}

export function denominatorDegree(r: Rational): number {
  return degreeOf(r.denominator) + Math.max(-r.origin, 0)
}

/** Order: the larger of the two degrees. */
export function orderOf(r: Rational): number {
  return Math.max(numeratorDegree(r), denominatorDegree(r))
}

export function isConstant(r: Rational): boolean {
  return r.origin === 0 && r.numerator.length === 0 && r.denominator.length === 0
}

/** k where b = k·a, or undefined where the polynomials are not proportional. */
export function proportion(a: Polynomial, b: Polynomial): number | undefined {
  if (a.length !== b.length) return undefined
  const k = b[b.length - 1]! / a[a.length - 1]!
  for (let i = 0; i < a.length; i++) {
    const expected = a[i]! * k
    if (!(Math.abs(b[i]! - expected) <= EQUAL * Math.abs(expected))) return undefined
  }
  return k
}

/**
 * Brings parts to normal form: powers of s apart, equal factors merged, factors common to numerator
 * and denominator cancelled. Coefficients out of range and orders beyond the limit are refused.
 */
export function normalise(gain: number, origin: number, numerator: readonly Factor[], denominator: readonly Factor[]): Rational {
  if (gain === 0) return { gain: 0, origin: 0, numerator: [], denominator: [] }
  const state = { gain, origin, above: [] as Factor[], below: [] as Factor[] }
  for (const f of numerator) absorb(state, f, 1)
  for (const f of denominator) absorb(state, f, -1)
  const result: Rational = { gain: state.gain, origin: state.origin, numerator: state.above, denominator: state.below }
  return unusable(result) ?? result
}

interface Parts { gain: number, origin: number, above: Factor[], below: Factor[] }

function absorb(state: Parts, factor: Factor, side: 1 | -1): void {
  if (factor.power === 0) return
  let low = 0
  while (low < factor.coefficients.length && factor.coefficients[low] === 0) low++
  const coefficients = low > 0 ? factor.coefficients.slice(low) : factor.coefficients
  state.origin += side * low * factor.power
  if (coefficients.length <= 1) {
    state.gain *= integerPower(coefficients[0] ?? 0, side * factor.power)
    return
  }
  place(state, { coefficients, power: factor.power }, side)
}

/** Cancels a factor against its equals on the other side, and merges what is left into its own. */
function place(state: Parts, factor: Factor, side: 1 | -1): void {
  const own = side === 1 ? state.above : state.below
  const other = side === 1 ? state.below : state.above
  let power = factor.power
  const opposite = findEqual(other, factor.coefficients)
  if (opposite) {
    const common = Math.min(power, opposite.factor.power)
    state.gain *= integerPower(opposite.ratio, side * common)
    power -= common
    replacePower(other, opposite.index, opposite.factor.power - common)
  }
  if (power === 0) return
  const same = findEqual(own, factor.coefficients)
  if (same) {
    state.gain *= integerPower(same.ratio, side * power)
    replacePower(own, same.index, same.factor.power + power)
  }
  else own.push({ coefficients: factor.coefficients, power })
}

function findEqual(factors: readonly Factor[], coefficients: Polynomial) {
  for (let index = 0; index < factors.length; index++) {
    const factor = factors[index]!
    const ratio = proportion(factor.coefficients, coefficients)
    if (ratio !== undefined) return { index, factor, ratio: equalExactly(factor.coefficients, coefficients) ? 1 : ratio }
  }
  return undefined
}

function equalExactly(a: Polynomial, b: Polynomial): boolean {
  return a.every((c, k) => c === b[k])
}

function replacePower(factors: Factor[], index: number, power: number): void {
  if (power === 0) factors.splice(index, 1)
  else factors[index] = { coefficients: factors[index]!.coefficients, power }
}

function unusable(r: Rational): Rational | undefined {
  const finite = (f: Factor) => f.coefficients.every(c => Number.isFinite(c))
  if (!Number.isFinite(r.gain) || r.gain === 0 || !r.numerator.every(finite) || !r.denominator.every(finite)) {
    return refusedRational(refuse('coefficient-range',
      'The coefficients of this transfer function leave the range of floating-point numbers.',
      'Keep it as a product of sections of low order instead of multiplying it out.'))
  }
  if (orderOf(r) > MAX_ORDER) {
    return refusedRational(refuse('order-too-high',
      `The order of this transfer function is ${orderOf(r)}; the highest worked with is ${MAX_ORDER}.`,
      'Split it into parts.'))
  }
  return undefined
}
