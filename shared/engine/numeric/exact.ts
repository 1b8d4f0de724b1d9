/**
 * Sums and products with their rounding errors kept ("double-double" numbers), for the few places
 * where a polynomial nearly cancels: close roots, deep nulls.
 *
 * D. E. Knuth, The Art of Computer Programming, vol. 2, section 4.2.2 (sum);
 * T. J. Dekker, Numerische Mathematik 18 (1971) (product).
 */
import type { Complex } from './complex'

/** A number as an unevaluated sum; |low| is at most half a unit in the last place of `high`. */
export interface Pair { readonly high: number, readonly low: number }

const SPLITTER = 134217729

export function exactSum(a: number, b: number): Pair {
  const high = a + b
  const part = high - a
  return { high, low: (a - (high - part)) + (b - part) }
}

/** Error-free as long as the product neither overflows nor comes near the smallest normal number. */
export function exactProduct(a: number, b: number): Pair {
  const high = a * b
  const ta = SPLITTER * a
  const ah = ta - (ta - a)
  const al = a - ah
  const tb = SPLITTER * b
  const bh = tb - (tb - b)
  const bl = b - bh
  return { high, low: al * bl - (((high - ah * bh) - al * bh) - ah * bl) }
}

export function addPairs(a: Pair, b: Pair): Pair {
  const s = exactSum(a.high, b.high)
  const t = exactSum(a.low, b.low)
  const u = quickSum(s.high, s.low + t.high)
  return quickSum(u.high, u.low + t.low)
}

export function addToPair(a: Pair, b: number): Pair {
  const s = exactSum(a.high, b)
  return quickSum(s.high, s.low + a.low)
}

export function scalePair(a: Pair, k: number): Pair {
  const p = exactProduct(a.high, k)
  return quickSum(p.high, p.low + a.low * k)
}

export function negatePair(a: Pair): Pair {
  return { high: -a.high, low: -a.low }
}

function quickSum(a: number, b: number): Pair {
  const high = a + b
  return { high, low: b - (high - a) }
}

/** a·d − b·c, rounded once (W. Kahan's use of exact products). */
export function differenceOfProducts(a: number, d: number, b: number, c: number): number {
  const p = exactProduct(a, d)
  const q = exactProduct(b, c)
  return addPairs(p, negatePair(q)).high
}

/**
 * Value of a polynomial with real coefficients at a complex point, as if computed with twice the
 * working precision and then rounded.
 * @param coefficients ascending
 */
export function evaluateExactly(coefficients: readonly number[], re: number, im: number): Complex {
  let real: Pair = { high: 0, low: 0 }
  let imaginary: Pair = { high: 0, low: 0 }
  for (let k = coefficients.length - 1; k >= 0; k--) {
    const nextReal = addToPair(
      addPairs(scalePair(real, re), negatePair(scalePair(imaginary, im))), coefficients[k]!)
    imaginary = addPairs(scalePair(real, im), scalePair(imaginary, re))
    real = nextReal
  }
  return { re: real.high, im: imaginary.high }
}
