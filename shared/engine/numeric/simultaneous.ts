/**
 * All roots of a polynomial at once by the Ehrlich–Aberth iteration.
 *
 * O. Aberth, Mathematics of Computation 27 (1973); starting points from the Newton polygon after
 * D. A. Bini, Numerical Algorithms 13 (1996), which places them right over any number of decades.
 * A first pass works in doubles down to the rounding of the evaluation, a second evaluates with
 * twice the precision, so that the result is as good as the coefficients allow.
 */
import type { Polynomial } from './polynomial'
import { evaluateExactly } from './exact'
import { EPSILON, TWO_PI, cos, exp, hypot, ln, sin } from './math'

const FIRST_SWEEPS = 60
const SECOND_SWEEPS = 80
/** Turns the starting points off the real axis, on which the iteration would be trapped. */
const TURN = 0.7

interface Estimate { re: Float64Array, im: Float64Array }

/** Work shared by one run; `reversed` is p(1/z)·z^n, evaluated where |z| > 1. */
interface Run { degree: number, forward: Side, reversed: Side, at: Estimate, settled: boolean[] }

interface Side { p: Polynomial, derivative: Polynomial }

/**
 * @param p ascending, degree ≥ 1, neither end coefficient zero, scaled so that none is out of range
 * @returns real and imaginary parts of the roots, in no particular order
 */
export function iterateRoots(p: Polynomial): Estimate {
  const degree = p.length - 1
  const run: Run = {
    degree,
    forward: side(p),
    reversed: side([...p].reverse()),
    at: startingPoints(p),
    settled: new Array<boolean>(degree).fill(false),
  }
  sweep(run, FIRST_SWEEPS, inDoubles)
  run.settled.fill(false)
  sweep(run, SECOND_SWEEPS, inTwicePrecision)
  return run.at
}

function side(p: Polynomial): Side {
  return { p, derivative: p.slice(1).map((c, k) => c * (k + 1)) }
}

function startingPoints(p: Polynomial): Estimate {
  const degree = p.length - 1
  const re = new Float64Array(degree)
  const im = new Float64Array(degree)
  const hull = newtonPolygon(p)
  let index = 0
  for (let h = 1; h < hull.length; h++) {
    const from = hull[h - 1]!
    const to = hull[h]!
    const count = to - from
    const radius = exp((ln(Math.abs(p[from]!)) - ln(Math.abs(p[to]!))) / count)
    for (let k = 0; k < count; k++) {
      const angle = TWO_PI * (k / count + from / degree) + TURN
      re[index] = radius * cos(angle)
      im[index] = radius * sin(angle)
      index++
    }
  }
  return { re, im }
}

/** Indices on the upper convex hull of the points (k, ln|p_k|). */
function newtonPolygon(p: Polynomial): number[] {
  const hull: number[] = []
  const height = p.map(c => c === 0 ? -Infinity : ln(Math.abs(c)))
  for (let k = 0; k < p.length; k++) {
    if (height[k] === -Infinity) continue
    while (hull.length >= 2) {
      const a = hull[hull.length - 2]!
      const b = hull[hull.length - 1]!
      const turn = (b - a) * (height[k]! - height[a]!) - (k - a) * (height[b]! - height[a]!)
      if (turn < 0) break
      hull.pop()
    }
    hull.push(k)
  }
  return hull
}

/** Newton's quotient p'/p at a point of the plane, and whether p there is mere rounding. */
interface Quotient { re: number, im: number, settled: boolean }

function sweep(run: Run, sweeps: number, quotient: (s: Side, re: number, im: number) => Quotient): void {
  const { re, im } = run.at
  for (let count = 0; count < sweeps && run.settled.includes(false); count++) {
    for (let k = 0; k < run.degree; k++) {
      if (run.settled[k]) continue
      const q = logarithmicDerivative(run, re[k]!, im[k]!, quotient)
      if (q.settled) {
        run.settled[k] = true
        continue
      }
      const step = aberthStep(run, k, q)
      re[k]! -= step.re
      im[k]! -= step.im
      run.settled[k] = hypot(step.re, step.im) <= EPSILON / 2 * hypot(re[k]!, im[k]!)
    }
  }
}

function logarithmicDerivative(run: Run, re: number, im: number, quotient: (s: Side, re: number, im: number) => Quotient): Quotient {
  const square = re * re + im * im
  if (square <= 1) return quotient(run.forward, re, im)
  const wr = re / square
  const wi = -im / square
  const q = quotient(run.reversed, wr, wi)
  // p'(z)/p(z) = w·(n − w·q'(w)/q(w)) with w = 1/z
  const ur = run.degree - (wr * q.re - wi * q.im)
  const ui = -(wr * q.im + wi * q.re)
  return { re: wr * ur - wi * ui, im: wr * ui + wi * ur, settled: q.settled }
}

/** 1/(p'/p − Σ 1/(z − z_j)). */
function aberthStep(run: Run, k: number, q: Quotient): { re: number, im: number } {
  const { re, im } = run.at
  let sr = q.re
  let si = q.im
  for (let j = 0; j < run.degree; j++) {
    if (j === k) continue
    const dr = re[k]! - re[j]!
    const di = im[k]! - im[j]!
    const d = dr * dr + di * di
    if (d === 0) continue
    sr -= dr / d
    si += di / d
  }
  const size = sr * sr + si * si
  return size > 0 ? { re: sr / size, im: -si / size } : { re: 0, im: 0 }
}

function inDoubles(s: Side, re: number, im: number): Quotient {
  const { p } = s
  const size = hypot(re, im)
  let vr = 0
  let vi = 0
  let dr = 0
  let di = 0
  let sum = 0
  for (let k = p.length - 1; k >= 0; k--) {
    const nextDerivative = dr * re - di * im + vr
    di = dr * im + di * re + vi
    dr = nextDerivative
    const next = vr * re - vi * im + p[k]!
    vi = vr * im + vi * re
    vr = next
    sum = sum * size + Math.abs(p[k]!)
  }
  return ratio(dr, di, vr, vi, 2 * p.length * EPSILON * sum)
}

function inTwicePrecision(s: Side, re: number, im: number): Quotient {
  const v = evaluateExactly(s.p, re, im)
  const d = evaluateExactly(s.derivative, re, im)
  return ratio(d.re, d.im, v.re, v.im, 0)
}

function ratio(dr: number, di: number, vr: number, vi: number, floor: number): Quotient {
  const size = hypot(vr, vi)
  if (size <= floor) return { re: 0, im: 0, settled: true }
  const ur = vr / size
  const ui = vi / size
  return { re: (dr * ur + di * ui) / size, im: (di * ur - dr * ui) / size, settled: false }
}
