/**
 * The normal distribution's quantiles: M. J. Wichura, "Algorithm AS 241: the percentage points of the
 * normal distribution", Applied Statistics 37 (1988) 477, its double-precision variant.
 */
import { ln } from './math'

/** Coefficients of its rational approximations, highest power first. */
const CENTRE = [2509.0809287301227, 33430.57558358813, 67265.7709270087, 45921.95393154987, 13731.69376550946, 1971.5909503065513, 133.14166789178438, 3.3871328727963665]
const CENTRE_BELOW = [5226.495278852854, 28729.085735721943, 39307.89580009271, 21213.794301586597, 5394.196021424751, 687.1870074920579, 42.31333070160091, 1.0]
const NEAR = [0.0007745450142783414, 0.022723844989269184, 0.2417807251774506, 1.2704582524523684, 3.6478483247632045, 5.769497221460691, 4.630337846156546, 1.4234371107496835]
const NEAR_BELOW = [1.0507500716444169e-09, 0.0005475938084995345, 0.015198666563616457, 0.14810397642748008, 0.6897673349851, 1.6763848301838038, 2.053191626637759, 1.0]
const FAR = [2.0103343992922881e-07, 2.7115555687434876e-05, 0.0012426609473880784, 0.026532189526576124, 0.29656057182850487, 1.7848265399172913, 5.463784911164114, 6.657904643501103]
const FAR_BELOW = [2.0442631033899397e-15, 1.421511758316446e-07, 1.8463183175100548e-05, 0.0007868691311456133, 0.014875361290850615, 0.1369298809227358, 0.599832206555888, 1.0]

function polynomial(coefficients: readonly number[], x: number): number {
  let value = 0
  for (const coefficient of coefficients) value = value * x + coefficient
  return value
}

/** Quantile of the standard normal distribution for 0 < p < 1; relative error about 1e-15. */
export function normalQuantile(p: number): number {
  const q = p - 0.5
  if (Math.abs(q) <= 0.425) {
    const r = 0.180625 - q * q
    return q * polynomial(CENTRE, r) / polynomial(CENTRE_BELOW, r)
  }
  const r = Math.sqrt(-ln(q < 0 ? p : 1 - p))
  const x = r <= 5 ? polynomial(NEAR, r - 1.6) / polynomial(NEAR_BELOW, r - 1.6) : polynomial(FAR, r - 5) / polynomial(FAR_BELOW, r - 5)
  return q < 0 ? -x : x
}

const HALVINGS = 60

/** Part of the standard normal distribution below −x, x ≥ 0: the inverse of the quantile, by bisection. */
export function normalTail(x: number): number {
  let [low, high] = [0, 0.5]
  for (let step = 0; step < HALVINGS; step += 1) {
    const middle = (low + high) / 2
    if (normalQuantile(middle) < -x) low = middle
    else high = middle
  }
  return (low + high) / 2
}
