/** Lower triangular complex matrices and their exponential. */
import { cos, exp, hypot, log2, powerOfTwo, sin } from './math'

/** Element (i, j), j ≤ i, at i·size + j; above the diagonal zero. */
export interface Triangular { readonly size: number, readonly re: Float64Array, readonly im: Float64Array }

export function triangular(size: number): Triangular {
  return { size, re: new Float64Array(size * size), im: new Float64Array(size * size) }
}

/** Order of the Taylor polynomial: its remainder at norm 1/2 is below 2e-22. */
const ORDER = 16

/**
 * e^(A·t) by scaling and squaring, the diagonal set exactly at every stage, without which slow modes
 * beside fast ones would lose a digit with every few squarings
 * (A. H. Al-Mohy and N. J. Higham, SIAM J. Matrix Anal. Appl. 31 (2009), section 2).
 */
export function exponentialOf(a: Triangular, t: number): Triangular {
  const norm = largestRow(a) * Math.abs(t)
  const stages = norm > 0.5 ? Math.min(1000, Math.ceil(log2(norm / 0.5))) : 0
  let part = t * powerOfTwo(-stages)
  let result = taylor(a, part)
  setDiagonal(result, a, part)
  for (let k = 0; k < stages; k++) {
    result = product(result, result)
    part *= 2
    setDiagonal(result, a, part)
  }
  return result
}

function largestRow(a: Triangular): number {
  let largest = 0
  for (let i = 0; i < a.size; i++) {
    let sum = 0
    for (let j = 0; j <= i; j++) sum += hypot(a.re[i * a.size + j]!, a.im[i * a.size + j]!)
    largest = Math.max(largest, sum)
  }
  return largest
}

/** I + B·(I + B/2·(I + B/3·(…))) with B = A·t. */
function taylor(a: Triangular, t: number): Triangular {
  let result = identity(a.size)
  for (let k = ORDER; k >= 1; k--) {
    result = product(a, result)
    const factor = t / k
    for (let i = 0; i < result.re.length; i++) {
      result.re[i]! *= factor
      result.im[i]! *= factor
    }
    for (let i = 0; i < a.size; i++) result.re[i * a.size + i]! += 1
  }
  return result
}

function identity(size: number): Triangular {
  const result = triangular(size)
  for (let i = 0; i < size; i++) result.re[i * size + i] = 1
  return result
}

function product(a: Triangular, b: Triangular): Triangular {
  const n = a.size
  const result = triangular(n)
  for (let i = 0; i < n; i++) {
    for (let k = 0; k <= i; k++) {
      const ar = a.re[i * n + k]!
      const ai = a.im[i * n + k]!
      if (ar === 0 && ai === 0) continue
      for (let j = 0; j <= k; j++) {
        const br = b.re[k * n + j]!
        const bi = b.im[k * n + j]!
        result.re[i * n + j]! += ar * br - ai * bi
        result.im[i * n + j]! += ar * bi + ai * br
      }
    }
  }
  return result
}

function setDiagonal(result: Triangular, a: Triangular, t: number): void {
  for (let i = 0; i < a.size; i++) {
    const at = i * a.size + i
    const size = exp(a.re[at]! * t)
    const angle = a.im[at]! * t
    result.re[at] = angle === 0 ? size : size * cos(angle)
    result.im[at] = angle === 0 ? 0 : size * sin(angle)
  }
}
