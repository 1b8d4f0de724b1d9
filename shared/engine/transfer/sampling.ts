/** Many values of a response at once, for drawing: the figures of gain.ts and phase.ts without an object a point. */
import { LN2, TWO_PI, atan2, degrees, ln } from '../numeric/math'
import type { Polynomial } from '../numeric/polynomial'
import type { Analysis } from './analysis'
import { analyse } from './analysis'
import { DB_PER_NEPER } from './figure'
import { phaseFromRoots } from './phase'
import type { Factor, Rational } from './rational'

/** 2^±500: a running product beyond this is brought back. */
const BIG = 3.273390607896142e150
const SMALL = 1 / BIG
const SHIFT = 500 * LN2

/** A running product of factors at one frequency. */
interface Product { re: number, im: number, log: number }

/**
 * Gain in dB and unwrapped phase in degrees at many angular frequencies. The gain is −∞ at a zero on
 * the axis and +∞ at a pole.
 * @param omega rad/s, above 0
 * @param gain filled, as long as `omega`
 * @param phase filled, as long as `omega`, if given
 */
export function sampleResponse(r: Rational, omega: Float64Array, gain: Float64Array, phase?: Float64Array): void {
  const a = analyse(r)
  const above: Product = { re: 1, im: 0, log: 0 }
  const below: Product = { re: 1, im: 0, log: 0 }
  const constant = ln(Math.abs(r.gain))
  const turns = ((r.origin % 4) + 4) % 4 * TWO_PI / 4 + (r.gain < 0 ? TWO_PI / 2 : 0)
  let [before, angle, calm] = [0, 0, 0]
  for (let i = 0; i < omega.length; i++) {
    const w = omega[i]!
    multiplyFactors(above, r.numerator, w)
    multiplyFactors(below, r.denominator, w)
    const origin = r.origin === 0 ? 0 : r.origin * ln(w)
    gain[i] = (constant + origin + logRatio(above, below)) * DB_PER_NEPER
    if (!phase) continue
    // Between points this close the phase cannot have gone far, so the branch of the last one is right.
    const close = i > 0 && w > before && w < before * CLOSE && w < calm
    if (!close) calm = endOfCalm(a, w)
    angle = close ? nearest(fineAngle(above, below) + turns, angle) : unwrapped(a, above, below, turns, w)
    before = w
    phase[i] = degrees(angle)
  }
}

/** Ratio of neighbouring frequencies up to which one point's phase tells the branch of the next. */
const CLOSE = 1.001
/** Within this ratio of a root the phase may turn fast, and the roots tell its branch. */
const NEAR = 1.03

/** The frequency up to which no root is near, or 0 where one is: rad/s. */
function endOfCalm(a: Analysis, w: number): number {
  let end = Infinity
  for (const { omega } of a.poles) end = calmUntil(omega, w, end)
  for (const { omega } of a.zeros) end = calmUntil(omega, w, end)
  return end
}

function calmUntil(omega: number, w: number, end: number): number {
  if (w > omega * NEAR || omega === 0) return end
  return w < omega / NEAR ? Math.min(end, omega / NEAR) : 0
}

function nearest(angle: number, to: number): number {
  return angle + TWO_PI * Math.round((to - angle) / TWO_PI)
}

function fineAngle(above: Product, below: Product): number {
  return atan2(above.im * below.re - above.re * below.im, above.re * below.re + above.im * below.im)
}

function multiplyFactors(product: Product, factors: readonly Factor[], w: number): void {
  product.re = 1
  product.im = 0
  product.log = 0
  const square = -w * w
  for (const f of factors) {
    const even = alternate(f.coefficients, square, 0)
    const odd = alternate(f.coefficients, square, 1) * w
    for (let k = 0; k < f.power; k++) {
      const re = product.re * even - product.im * odd
      product.im = product.re * odd + product.im * even
      product.re = re
      const size = Math.abs(re) + Math.abs(product.im)
      if (size > BIG) shift(product, SMALL, SHIFT)
      else if (size < SMALL) shift(product, BIG, -SHIFT)
    }
  }
}

/** The even (0) or odd (1) coefficients as a polynomial in −ω². */
function alternate(p: Polynomial, square: number, parity: 0 | 1): number {
  const top = p.length - 1
  let sum = 0
  for (let k = top % 2 === parity ? top : top - 1; k >= 0; k -= 2) sum = sum * square + p[k]!
  return sum
}

function shift(product: Product, factor: number, log: number): void {
  product.re *= factor
  product.im *= factor
  product.log += log
}

function logRatio(a: Product, b: Product): number {
  const x = a.re * a.re + a.im * a.im
  const y = b.re * b.re + b.im * b.im
  const ratio = x / y
  const level = ratio > 1e-290 && ratio < 1e290 ? ln(ratio) : ln(x) - ln(y)
  return level / 2 + a.log - b.log
}

/** The angle of the value on the branch that the roots tell; theirs alone right at a root on the axis. */
function unwrapped(a: Analysis, above: Product, below: Product, turns: number, w: number): number {
  const rough = phaseFromRoots(a, w)
  const result = nearest(fineAngle(above, below) + turns, rough)
  return Math.abs(result - rough) < 0.5 ? result : rough
}
