/**
 * The only elementary functions that recorded results may use.
 *
 * `Math.sin`, `Math.exp` and their kin differ in the last digits from one JavaScript engine to the
 * next, so a result recorded on the server could not be reproduced in a browser. The functions here
 * are written in `+ − × ÷` and `Math.sqrt`, which IEEE 754 defines to the last bit.
 */
import stdAcos from '@stdlib/math-base-special-acos'
import stdAsin from '@stdlib/math-base-special-asin'
import stdAtan from '@stdlib/math-base-special-atan'
import stdAtan2 from '@stdlib/math-base-special-atan2'
import stdCbrt from '@stdlib/math-base-special-cbrt'
import stdCos from '@stdlib/math-base-special-cos'
import stdCosh from '@stdlib/math-base-special-cosh'
import stdExp from '@stdlib/math-base-special-exp'
import stdExpm1 from '@stdlib/math-base-special-expm1'
import stdHypot from '@stdlib/math-base-special-hypot'
import stdLn from '@stdlib/math-base-special-ln'
import stdLog10 from '@stdlib/math-base-special-log10'
import stdLog1p from '@stdlib/math-base-special-log1p'
import stdLog2 from '@stdlib/math-base-special-log2'
import stdPow from '@stdlib/math-base-special-pow'
import stdSin from '@stdlib/math-base-special-sin'
import stdSinh from '@stdlib/math-base-special-sinh'
import stdTan from '@stdlib/math-base-special-tan'
import stdTanh from '@stdlib/math-base-special-tanh'

type Unary = (x: number) => number
type Binary = (x: number, y: number) => number

export const PI = 3.141592653589793
export const TWO_PI = 6.283185307179586
export const LN10 = 2.302585092994046
export const LN2 = 0.6931471805599453
/** Distance from 1 to the next double. */
export const EPSILON = 2.220446049250313e-16
/** Smallest double with full precision. */
export const SMALLEST_NORMAL = 2.2250738585072014e-308

/** Angles in radians. */
export const sin: Unary = stdSin
export const cos: Unary = stdCos
export const tan: Unary = stdTan
export const asin: Unary = stdAsin
export const acos: Unary = stdAcos
export const atan: Unary = stdAtan
/** Angle of the point (x, y): `atan2(y, x)`, in (−π, π]. */
export const atan2: Binary = stdAtan2
export const exp: Unary = stdExp
/** e^x − 1 without cancellation near 0. */
export const expm1: Unary = stdExpm1
/** Natural logarithm. */
export const ln: Unary = stdLn
/** ln(1 + x) without cancellation near 0. */
export const log1p: Unary = stdLog1p
export const log10: Unary = stdLog10
export const log2: Unary = stdLog2
export const pow: Binary = stdPow
export const sinh: Unary = stdSinh
export const cosh: Unary = stdCosh
export const tanh: Unary = stdTanh
export const cbrt: Unary = stdCbrt
/** √(x² + y²) without overflow. */
export const hypot: Binary = stdHypot

/** 2^k for integer k, exact over the whole range of doubles. */
export function powerOfTwo(k: number): number {
  let result = 1
  let base = k < 0 ? 0.5 : 2
  let left = Math.abs(k)
  while (left > 0) {
    if (left % 2 === 1) result *= base
    left = Math.floor(left / 2)
    if (left > 0) base *= base
  }
  return result
}

/** x^n for integer n by repeated squaring; exact where the product is. */
export function integerPower(x: number, n: number): number {
  if (n < 0) return 1 / integerPower(x, -n)
  let result = 1
  let base = x
  let left = n
  while (left > 0) {
    if (left % 2 === 1) result *= base
    left = Math.floor(left / 2)
    if (left > 0) base *= base
  }
  return result
}

/** Level in decibels of a ratio of amplitudes. */
export function decibels(ratio: number): number {
  return 20 * log10(ratio)
}

export function degrees(radians: number): number {
  return radians * (180 / PI)
}

export function radians(angle: number): number {
  return angle * (PI / 180)
}

/** 10^k for integer k, rounded once where |k| ≤ 22. */
export function powerOfTen(k: number): number {
  return k < 0 ? 1 / integerPower(10, -k) : integerPower(10, k)
}

/** Largest power of ten that is not above x > 0. */
export function floorDecade(x: number): number {
  const k = Math.floor(log10(x))
  return powerOfTen(powerOfTen(k) > x ? k - 1 : k)
}

/** Smallest power of ten that is not below x > 0. */
export function ceilDecade(x: number): number {
  const decade = floorDecade(x)
  return decade < x ? powerOfTen(Math.round(log10(decade)) + 1) : decade
}
