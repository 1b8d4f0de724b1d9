/** Roots of real polynomials of degree one and two, without cancellation. */
import type { Complex } from './complex'
import { differenceOfProducts } from './exact'
import { EPSILON, log2, powerOfTwo } from './math'

/** Root of a0 + a1·x. */
export function linearRoot(a0: number, a1: number): Complex {
  return { re: -a0 / a1 + 0, im: 0 }
}

/**
 * Both roots of a0 + a1·x + a2·x², a0 and a2 not zero. The discriminant is formed exactly and
 * rounded once; where it is less than the rounding of the coefficients, the root is double.
 */
export function quadraticRoots(a0: number, a1: number, a2: number): [Complex, Complex] {
  const shift = Math.round((log2(Math.abs(a0)) - log2(Math.abs(a2))) / 2)
  const c = a0 * powerOfTwo(-Math.round(log2(Math.abs(a0))))
  const unit = powerOfTwo(shift)
  const level = powerOfTwo(-Math.round(log2(Math.abs(a0))) + shift)
  const b = a1 * level / 2
  const a = a2 * level * unit
  const roots = scaledRoots(c, b, a)
  return [
    { re: roots[0].re * unit, im: roots[0].im * unit },
    { re: roots[1].re * unit, im: roots[1].im * unit },
  ]
}

/** Roots of c + 2b·x + a·x² with |c| and |a| near 1. */
function scaledRoots(c: number, b: number, a: number): [Complex, Complex] {
  if (Math.abs(b) > 1e100) return realPair(c, 2 * b, a)
  const discriminant = differenceOfProducts(b, b, a, c)
  const centre = -b / a + 0
  if (Math.abs(discriminant) <= 2 * EPSILON * b * b) {
    return [{ re: centre, im: 0 }, { re: centre, im: 0 }]
  }
  if (discriminant < 0) {
    const im = Math.sqrt(-discriminant) / Math.abs(a)
    return [{ re: centre, im }, { re: centre, im: -im }]
  }
  const root = Math.sqrt(discriminant)
  return realPair(c, b < 0 ? b - root : b + root, a)
}

/** The larger root −q/a and the smaller −c/q, smaller first. */
function realPair(c: number, q: number, a: number): [Complex, Complex] {
  return [{ re: -c / q, im: 0 }, { re: -q / a, im: 0 }]
}
