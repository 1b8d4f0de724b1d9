/**
 * Intervals with interval derivatives: enclosures of a value and of its slopes over a box.
 * R. E. Moore, "Methods and Applications of Interval Analysis", SIAM 1979, chapters 3 and 5.
 *
 * Results are widened by a few units in the last place, so that rounding cannot make a slope seem
 * of one sign when it is not.
 */
import { exp, ln, pow } from '../numeric/math'

export interface Interval { readonly low: number, readonly high: number }

/** Value and slopes; a slope is absent where it is exactly zero. */
export interface Dual { readonly value: Interval, readonly slopes: readonly (Interval | undefined)[] }

const WIDEN = 4.440892098500626e-16

const EVERYTHING: Interval = { low: -Infinity, high: Infinity }

/** The interval widened against rounding; what is not a number becomes everything. */
export function interval(low: number, high: number): Interval {
  if (Number.isNaN(low) || Number.isNaN(high)) return EVERYTHING
  return { low: low - Math.abs(low) * WIDEN, high: high + Math.abs(high) * WIDEN }
}

export function exactly(x: number): Interval {
  return { low: x, high: x }
}

export function constantDual(x: number): Dual {
  return { value: exactly(x), slopes: [] }
}

function plus(a: Interval, b: Interval): Interval {
  return interval(a.low + b.low, a.high + b.high)
}

function product(x: number, y: number): number {
  // In interval arithmetic 0·∞ is 0: the bound ∞ is never reached.
  return x === 0 || y === 0 ? 0 : x * y
}

export function times(a: Interval, b: Interval): Interval {
  const p = [product(a.low, b.low), product(a.low, b.high), product(a.high, b.low), product(a.high, b.high)]
  return interval(Math.min(...p), Math.max(...p))
}

function inverse(a: Interval): Interval {
  if (a.low <= 0 && a.high >= 0) return EVERYTHING
  return interval(1 / a.high, 1 / a.low)
}

/** f with derivative f′ enclosed by `slope`, by the chain rule. */
export function chained(inner: Dual, value: Interval, slope: Interval): Dual {
  return { value, slopes: inner.slopes.map(s => s && times(slope, s)) }
}

function mergeSlopes(a: Dual, b: Dual, merge: (x: Interval | undefined, y: Interval | undefined) => Interval | undefined): (Interval | undefined)[] {
  const length = Math.max(a.slopes.length, b.slopes.length)
  const slopes: (Interval | undefined)[] = []
  for (let i = 0; i < length; i += 1) slopes.push(merge(a.slopes[i], b.slopes[i]))
  return slopes
}

function plusOptional(x: Interval | undefined, y: Interval | undefined): Interval | undefined {
  return x && y ? plus(x, y) : x ?? y
}

export function addDual(a: Dual, b: Dual): Dual {
  return { value: plus(a.value, b.value), slopes: mergeSlopes(a, b, plusOptional) }
}

export function negateDual(a: Dual): Dual {
  return chained(a, { low: -a.value.high, high: -a.value.low }, exactly(-1))
}

export function multiplyDual(a: Dual, b: Dual): Dual {
  const slopes = mergeSlopes(a, b, (x, y) => plusOptional(x && times(x, b.value), y && times(y, a.value)))
  return { value: times(a.value, b.value), slopes }
}

export function reciprocalDual(a: Dual): Dual {
  const value = inverse(a.value)
  const square = times(value, value)
  return chained(a, value, { low: -square.high, high: -square.low })
}

/** x^n for a fixed exponent. */
export function powerDual(a: Dual, exponent: number): Dual {
  if (exponent === 0) return constantDual(1)
  if (exponent === 1) return a
  const value = powerInterval(a.value, exponent)
  const slope = exponent === 2 ? times(exactly(2), a.value) : times(exactly(exponent), powerInterval(a.value, exponent - 1))
  return chained(a, value, slope)
}

function powerInterval(a: Interval, exponent: number): Interval {
  if (Number.isInteger(exponent) && exponent > 0) return wholePower(a, exponent)
  if (a.low < 0 || (a.low === 0 && exponent < 0)) return Number.isInteger(exponent) && (a.low > 0 || a.high < 0) ? inverse(wholePower(a, -exponent)) : EVERYTHING
  const ends = [pow(a.low, exponent), pow(a.high, exponent)]
  return interval(Math.min(...ends), Math.max(...ends))
}

function wholePower(a: Interval, exponent: number): Interval {
  const ends = [pow(a.low, exponent), pow(a.high, exponent)]
  const low = Math.min(...ends)
  return interval(exponent % 2 === 0 && a.low < 0 && a.high > 0 ? 0 : low, Math.max(...ends))
}

export function rootDual(a: Dual): Dual {
  if (a.value.low < 0) return { value: EVERYTHING, slopes: a.slopes.map(s => s && EVERYTHING) }
  const value = interval(Math.sqrt(a.value.low), Math.sqrt(a.value.high))
  return chained(a, value, inverse(times(exactly(2), value)))
}

export function exponentialDual(a: Dual): Dual {
  const value = interval(exp(a.value.low), exp(a.value.high))
  return chained(a, value, value)
}

export function logarithmDual(a: Dual): Dual {
  if (a.value.low <= 0) return { value: EVERYTHING, slopes: a.slopes.map(s => s && EVERYTHING) }
  return chained(a, interval(ln(a.value.low), ln(a.value.high)), inverse(a.value))
}

/** A function that rises over its whole domain, with its derivative enclosed by the caller. */
export function risingDual(a: Dual, f: (x: number) => number, slope: Interval): Dual {
  return chained(a, interval(f(a.value.low), f(a.value.high)), slope)
}

/** A value of which only an enclosure is known: every slope may be anything. */
export function opaqueDual(value: Interval, like: readonly Dual[]): Dual {
  const length = Math.max(0, ...like.map(dual => dual.slopes.length))
  const slopes = Array.from({ length }, (_, i) => like.some(dual => dual.slopes[i]) ? EVERYTHING : undefined)
  return { value, slopes }
}

export function hullDual(a: Dual, b: Dual): Dual {
  const hull = (x: Interval, y: Interval): Interval => ({ low: Math.min(x.low, y.low), high: Math.max(x.high, y.high) })
  const zero = exactly(0)
  return { value: hull(a.value, b.value), slopes: mergeSlopes(a, b, (x, y) => x || y ? hull(x ?? zero, y ?? zero) : undefined) }
}
