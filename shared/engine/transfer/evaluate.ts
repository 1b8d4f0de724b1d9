/** Values of rational functions, without overflow on the way. */
import type { Complex } from '../numeric/complex'
import { divide as divideComplex, multiply as multiplyComplex } from '../numeric/complex'
import { evaluatePolynomial } from '../numeric/polynomial'
import { LN2, hypot, ln, powerOfTwo } from '../numeric/math'
import type { Factor, Rational } from './rational'

/** (re + i·im)·2^exponent: a product of many factors has no other bounds than an integer's. */
export interface Scaled { readonly re: number, readonly im: number, readonly exponent: number }

const BIG = 1.2676506002282294e30
const SMALL = 1 / BIG
const STEP = 100

function rescale(re: number, im: number, exponent: number): Scaled {
  let size = Math.max(Math.abs(re), Math.abs(im))
  if (size === 0 || !(size < Infinity)) return { re, im, exponent }
  let x = re
  let y = im
  let e = exponent
  while (size > BIG) {
    x *= SMALL
    y *= SMALL
    size *= SMALL
    e += STEP
  }
  while (size < SMALL) {
    x *= BIG
    y *= BIG
    size *= BIG
    e -= STEP
  }
  return { re: x, im: y, exponent: e }
}

function times(a: Scaled, z: Complex, count: number): Scaled {
  const factor = rescale(z.re, z.im, 0)
  let result = a
  for (let k = 0; k < count; k++) {
    const product = multiplyComplex(result, factor)
    result = rescale(product.re, product.im, result.exponent + factor.exponent)
  }
  return result
}

function product(start: Scaled, factors: readonly Factor[], re: number, im: number): Scaled {
  let result = start
  for (const f of factors) result = times(result, evaluatePolynomial(f.coefficients, re, im), f.power)
  return result
}

/** r(re + i·im) with its exponent apart. At a pole the parts are not finite. */
export function evaluateScaled(r: Rational, re: number, im: number): Scaled {
  const s = { re, im }
  const unit: Scaled = { re: 1, im: 0, exponent: 0 }
  const above = product(times(rescale(r.gain, 0, 0), s, Math.max(r.origin, 0)), r.numerator, re, im)
  const below = product(times(unit, s, Math.max(-r.origin, 0)), r.denominator, re, im)
  if (below.re === 0 && below.im === 0) return { re: above.re === 0 && above.im === 0 ? NaN : Infinity, im: 0, exponent: 0 }
  const quotient = divideComplex(above, below)
  return rescale(quotient.re, quotient.im, above.exponent - below.exponent)
}

/**
 * Value of a rational function at a complex s.
 * @param re real part of s, 1/s
 * @param im imaginary part of s: the angular frequency, rad/s
 * @returns the value in SI units; `{ re: Infinity, im: 0 }` at a pole, NaN for a refused function
 */
export function evaluateRational(r: Rational, re: number, im: number): Complex {
  return unscaled(evaluateScaled(r, re, im))
}

/** ln|r(iω)|: −∞ at a zero on the axis, +∞ at a pole. */
export function logModulus(r: Rational, omega: number): number {
  const v = evaluateScaled(r, 0, omega)
  return ln(hypot(v.re, v.im)) + v.exponent * LN2
}

/** lead·∏above/∏below, without overflow on the way. */
export function ratioOfProducts(
  lead: { mantissa: number, exponent: number }, above: readonly Complex[], below: readonly Complex[],
): Complex {
  let top: Scaled = { re: lead.mantissa, im: 0, exponent: lead.exponent }
  for (const z of above) top = times(top, z, 1)
  let bottom: Scaled = { re: 1, im: 0, exponent: 0 }
  for (const z of below) bottom = times(bottom, z, 1)
  const quotient = divideComplex(top, bottom)
  return unscaled({ re: quotient.re, im: quotient.im, exponent: top.exponent - bottom.exponent })
}

function unscaled(v: Scaled): Complex {
  if (v.exponent === 0) return { re: v.re, im: v.im }
  const half = powerOfTwo(Math.trunc(v.exponent / 2))
  const rest = powerOfTwo(v.exponent - Math.trunc(v.exponent / 2))
  return { re: v.re * half * rest, im: v.im * half * rest }
}
