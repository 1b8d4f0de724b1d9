/** Logarithmic slope, group delay and the frequencies at which anything can happen. */
import { evaluatePolynomial, sumOfTerms } from '../numeric/polynomial'
import type { Polynomial } from '../numeric/polynomial'
import { EPSILON, pow } from '../numeric/math'
import type { Analysis, Point } from './analysis'
import { isOnAxis } from './analysis'
import type { Factor, Rational } from './rational'

/** d ln H/d ln ω at s = iω: `re` is the slope of the modulus, `im` ω times that of the phase. */
export interface Slope { readonly re: number, readonly im: number }

interface Sum { re: number, im: number, size: number }

/** Slope below the rounding of its terms is returned as zero, so that a flat response has no spurious extremes. */
export function logarithmicSlope(r: Rational, omega: number): Slope {
  const sum: Sum = { re: r.origin, im: 0, size: Math.abs(r.origin) }
  addFactors(sum, r.numerator, omega, 1)
  addFactors(sum, r.denominator, omega, -1)
  return Math.abs(sum.re) <= 8 * EPSILON * sum.size ? { re: 0, im: sum.im } : { re: sum.re, im: sum.im }
}

function addFactors(sum: Sum, factors: readonly Factor[], omega: number, sign: 1 | -1): void {
  for (const f of factors) {
    const p = evaluatePolynomial(f.coefficients, 0, omega)
    const d = evaluatePolynomial(timesVariable(f.coefficients), 0, omega)
    const size = Math.max(Math.abs(p.re), Math.abs(p.im))
    const pr = p.re / size
    const pi = p.im / size
    const scale = f.power / (size * (pr * pr + pi * pi))
    sum.re += sign * scale * (d.re * pr + d.im * pi)
    sum.im += sign * scale * (d.im * pr - d.re * pi)
    sum.size += scale * sumOfTerms(f.coefficients, omega) * f.power * f.coefficients.length
  }
}

/** Coefficients of s·p′(s). */
function timesVariable(p: Polynomial): Polynomial {
  return p.map((c, k) => c * k)
}

/** Points in an ordinary decade, and the ratio by which they close in on the frequency of a root. */
const PER_DECADE = 16
const CLOSING = 1.6
/** How far beyond the lowest and highest root to look. */
const BEYOND = 1e3
/** Closest approach to a root on the axis, relative. */
const CLOSEST = 1e-13

/**
 * Angular frequencies that resolve every feature of the response: evenly by decades, and closing in
 * geometrically on the frequency of each root as far as its distance from the axis.
 */
export function resolvingGrid(a: Analysis): number[] {
  const roots = [...a.poles, ...a.zeros].filter(z => z.im >= 0 && z.omega > 0)
  if (roots.length === 0) return []
  const lowest = Math.min(...roots.map(z => z.omega)) / BEYOND
  const highest = Math.max(...roots.map(z => z.omega)) * BEYOND
  const grid: number[] = []
  const ratio = pow(10, 1 / PER_DECADE)
  for (let w = lowest; w < highest; w *= ratio) grid.push(w)
  let last: Point | undefined
  for (const z of roots) {
    if (last && last.re === z.re && last.im === z.im) continue
    closeIn(grid, z)
    last = z
  }
  return grid.sort((x, y) => x - y).filter((w, k, all) => k === 0 || w > all[k - 1]!)
}

function closeIn(grid: number[], z: Point): void {
  const centre = z.im > 0 ? z.im : z.omega
  grid.push(centre)
  if (z.im === 0) return
  let distance = Math.max(Math.abs(z.re) / 16, CLOSEST * centre)
  while (distance < centre / 2) {
    grid.push(centre - distance, centre + distance)
    distance *= CLOSING
  }
}

/** Angular frequencies of the roots on the axis, rising: the modulus is 0 or ∞ there. */
export function axisFrequencies(points: readonly Point[]): number[] {
  const result: number[] = []
  for (const z of points) {
    if (isOnAxis(z) && z.im > 0 && !result.includes(z.im)) result.push(z.im)
  }
  return result.sort((x, y) => x - y)
}
