/** Complex arithmetic on plain pairs, with the same bits on every machine. */
import { atan2, cos, cosh, exp as realExp, hypot, ln, sin, sinh } from './math'

export interface Complex { readonly re: number, readonly im: number }

export const ZERO: Complex = { re: 0, im: 0 }
export const ONE: Complex = { re: 1, im: 0 }
export const I: Complex = { re: 0, im: 1 }

export function complex(re: number, im = 0): Complex {
  return { re, im }
}

export function isFiniteComplex(z: Complex): boolean {
  return Number.isFinite(z.re) && Number.isFinite(z.im)
}

export function add(a: Complex, b: Complex): Complex {
  return { re: a.re + b.re, im: a.im + b.im }
}

export function subtract(a: Complex, b: Complex): Complex {
  return { re: a.re - b.re, im: a.im - b.im }
}

export function negate(z: Complex): Complex {
  return { re: -z.re, im: -z.im }
}

export function conjugate(z: Complex): Complex {
  return { re: z.re, im: -z.im }
}

export function scale(z: Complex, k: number): Complex {
  return { re: z.re * k, im: z.im * k }
}

export function multiply(a: Complex, b: Complex): Complex {
  return { re: a.re * b.re - a.im * b.im, im: a.re * b.im + a.im * b.re }
}

/**
 * Quotient without overflow in between: R. L. Smith, "Algorithm 116: Complex division",
 * Communications of the ACM 5 (1962), with the operands scaled by a power of two beforehand
 * (M. Baudin and R. L. Smith, arXiv:1210.4539).
 */
export function divide(a: Complex, b: Complex): Complex {
  const size = Math.max(Math.abs(b.re), Math.abs(b.im))
  if (size > 1e150) return divideByModerate(scale(a, TWO_MINUS_500), scale(b, TWO_MINUS_500))
  if (size < 1e-150 && size > 0) return divideByModerate(scale(a, TWO_500), scale(b, TWO_500))
  return divideByModerate(a, b)
}

function divideByModerate(a: Complex, b: Complex): Complex {
  if (Math.abs(b.re) >= Math.abs(b.im)) {
    const ratio = b.im / b.re
    const denominator = b.re + b.im * ratio
    return { re: (a.re + a.im * ratio) / denominator, im: (a.im - a.re * ratio) / denominator }
  }
  const ratio = b.re / b.im
  const denominator = b.re * ratio + b.im
  return { re: (a.re * ratio + a.im) / denominator, im: (a.im * ratio - a.re) / denominator }
}

export function reciprocal(z: Complex): Complex {
  return divide(ONE, z)
}

/** Modulus. */
export function modulus(z: Complex): number {
  return hypot(z.re, z.im)
}

/** Principal argument in (−π, π]. */
export function argument(z: Complex): number {
  return atan2(z.im, z.re)
}

export function exponential(z: Complex): Complex {
  const size = realExp(z.re)
  if (z.im === 0) return { re: size, im: 0 }
  return { re: size * cos(z.im), im: size * sin(z.im) }
}

/** Principal natural logarithm. */
export function logarithm(z: Complex): Complex {
  return { re: ln(modulus(z)), im: argument(z) }
}

/** Principal square root, without cancellation in either part. */
export function squareRoot(z: Complex): Complex {
  if (z.re === 0 && z.im === 0) return ZERO
  const half = Math.sqrt((Math.abs(z.re) + modulus(z)) / 2)
  if (z.re >= 0) return { re: half, im: z.im / (2 * half) }
  return { re: Math.abs(z.im) / (2 * half), im: z.im < 0 ? -half : half }
}

/** z^n for integer n by repeated multiplication. */
export function integerPower(z: Complex, n: number): Complex {
  if (n < 0) return reciprocal(integerPower(z, -n))
  let result = ONE
  let base = z
  let left = n
  while (left > 0) {
    if (left % 2 === 1) result = multiply(result, base)
    left = Math.floor(left / 2)
    if (left > 0) base = multiply(base, base)
  }
  return result
}

/** Principal power. Integer real exponents are multiplied out; 0^w is 0 for Re w > 0. */
export function power(z: Complex, w: Complex): Complex {
  if (w.im === 0 && Number.isInteger(w.re) && Math.abs(w.re) <= 1024) return integerPower(z, w.re)
  if (z.re === 0 && z.im === 0) return w.re > 0 ? ZERO : { re: NaN, im: NaN }
  return exponential(multiply(w, logarithm(z)))
}

export function sine(z: Complex): Complex {
  return { re: sin(z.re) * cosh(z.im), im: cos(z.re) * sinh(z.im) }
}

export function cosine(z: Complex): Complex {
  return { re: cos(z.re) * cosh(z.im), im: -sin(z.re) * sinh(z.im) }
}

export function tangent(z: Complex): Complex {
  return divide(sine(z), cosine(z))
}

export function hyperbolicSine(z: Complex): Complex {
  return { re: sinh(z.re) * cos(z.im), im: cosh(z.re) * sin(z.im) }
}

export function hyperbolicCosine(z: Complex): Complex {
  return { re: cosh(z.re) * cos(z.im), im: sinh(z.re) * sin(z.im) }
}

/** tanh, written so that a long lossy line (large real part) gives ±1 rather than ∞/∞. */
export function hyperbolicTangent(z: Complex): Complex {
  if (Math.abs(z.re) > 20) {
    const decay = 4 * realExp(-2 * Math.abs(z.re))
    return { re: z.re > 0 ? 1 : -1, im: decay * sin(z.im) * cos(z.im) }
  }
  return divide(hyperbolicSine(z), hyperbolicCosine(z))
}

const TWO_500 = 3.273390607896142e150
const TWO_MINUS_500 = 3.054936363499605e-151
