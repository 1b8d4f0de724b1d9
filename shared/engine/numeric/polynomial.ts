/**
 * Polynomials with real coefficients, in ascending powers. The zero polynomial is `[]`; any other
 * has a leading coefficient that is not zero.
 */
import type { Complex } from './complex'
import { evaluateExactly } from './exact'
import { EPSILON, SMALLEST_NORMAL } from './math'

export type Polynomial = readonly number[]

export function degree(p: Polynomial): number {
  return p.length - 1
}

export function trim(coefficients: Polynomial): Polynomial {
  let length = coefficients.length
  while (length > 0 && coefficients[length - 1] === 0) length--
  return length === coefficients.length ? coefficients : coefficients.slice(0, length)
}

/**
 * Sum of two polynomials. A coefficient that is no more than the rounding of its two terms is zero:
 * `0.3*s - (0.1 + 0.2)*s` has no term in s, and so no root at some 1e17 rad/s.
 */
export function addPolynomials(a: Polynomial, b: Polynomial): Polynomial {
  const sum: number[] = []
  for (let k = 0; k < Math.max(a.length, b.length); k++) {
    const x = a[k] ?? 0
    const y = b[k] ?? 0
    const z = x + y
    sum.push(Math.abs(z) <= 2 * EPSILON * Math.max(Math.abs(x), Math.abs(y)) ? 0 : z)
  }
  return trim(sum)
}

/** Product; coefficients that leave the range of doubles become NaN rather than 0 or ∞. */
export function multiplyPolynomials(a: Polynomial, b: Polynomial): Polynomial {
  if (a.length === 0 || b.length === 0) return []
  const product = new Array<number>(a.length + b.length - 1).fill(0)
  for (let i = 0; i < a.length; i++) {
    for (let j = 0; j < b.length; j++) product[i + j]! += a[i]! * b[j]!
  }
  const last = product.length - 1
  if (leftRange(product[last]!) || leftRange(product[0]!, a[0] === 0 || b[0] === 0)) product[last] = NaN
  return product
}

function leftRange(coefficient: number, mayBeZero = false): boolean {
  const size = Math.abs(coefficient)
  if (mayBeZero && size === 0) return false
  return !(size >= SMALLEST_NORMAL && size < Infinity)
}

export function scalePolynomial(p: Polynomial, k: number): Polynomial {
  return k === 0 ? [] : p.map(c => c * k)
}

/** p(s)·s^k for k ≥ 0. */
export function shiftPolynomial(p: Polynomial, k: number): Polynomial {
  return p.length === 0 || k === 0 ? p : [...new Array<number>(k).fill(0), ...p]
}

export function powerOfPolynomial(p: Polynomial, n: number): Polynomial {
  let result: Polynomial = [1]
  for (let k = 0; k < n; k++) result = multiplyPolynomials(result, p)
  return result
}

export function derivativeOfPolynomial(p: Polynomial): Polynomial {
  return p.slice(1).map((c, k) => c * (k + 1))
}

/** Where |p(z)| is smaller than this part of the sum of its terms, more precision is called for. */
const CANCELLATION = 1e-3

/** p(re + i·im), with full relative precision unless its terms cancel to some 30 digits. */
export function evaluatePolynomial(p: Polynomial, re: number, im: number): Complex {
  const value = re === 0 ? onImaginaryAxis(p, im) : horner(p, re, im)
  const size = Math.abs(value.re) + Math.abs(value.im)
  if (size >= CANCELLATION * sumOfTerms(p, Math.abs(re) + Math.abs(im))) return value
  const exact = evaluateExactly(p, re, im)
  return Number.isFinite(exact.re) && Number.isFinite(exact.im) ? exact : value
}

/** Σ|a_k| x^k: the scale against which an error of evaluation is judged. */
export function sumOfTerms(p: Polynomial, x: number): number {
  let sum = 0
  for (let k = p.length - 1; k >= 0; k--) sum = sum * x + Math.abs(p[k]!)
  return sum
}

function horner(p: Polynomial, re: number, im: number): Complex {
  let real = 0
  let imaginary = 0
  for (let k = p.length - 1; k >= 0; k--) {
    const next = real * re - imaginary * im + p[k]!
    imaginary = real * im + imaginary * re
    real = next
  }
  return { re: real, im: imaginary }
}

/** Even and odd powers apart, so that a real part that is zero comes out as zero. */
function onImaginaryAxis(p: Polynomial, im: number): Complex {
  const square = -im * im
  let even = 0
  let odd = 0
  for (let k = p.length - 1; k >= 0; k--) {
    if (k % 2 === 0) even = even * square + p[k]!
    else odd = odd * square + p[k]!
  }
  return { re: even, im: odd * im }
}
