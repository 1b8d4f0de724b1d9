/** Roots of a real function between two points at which its sign differs. */
import { EPSILON } from './math'

const STEPS = 200

/**
 * Root of a continuous function between a and b, by R. P. Brent's method (Algorithms for
 * Minimization without Derivatives, 1973, chapter 4), to the last digits of x.
 * @returns undefined where the signs at a and b are the same: an end is never passed off as a root
 */
export function rootBetween(f: (x: number) => number, a: number, b: number): number | undefined {
  const fa = f(a)
  const fb = f(b)
  if (fa === 0) return a
  if (fb === 0) return b
  if (!(Math.sign(fa) * Math.sign(fb) < 0)) return undefined
  return brent(f, { a, b, c: a, fa, fb, fc: fa, step: b - a, before: b - a })
}

interface State { a: number, b: number, c: number, fa: number, fb: number, fc: number, step: number, before: number }

/** b is the best point, a the one before, c the one that brackets the root with b. */
function brent(f: (x: number) => number, s: State): number {
  for (let count = 0; count < STEPS; count++) {
    if ((s.fb > 0) === (s.fc > 0)) restart(s)
    if (Math.abs(s.fc) < Math.abs(s.fb)) swap(s)
    const tolerance = EPSILON * Math.abs(s.b)
    const half = (s.c - s.b) / 2
    if (Math.abs(half) <= tolerance || s.fb === 0) return s.b
    propose(s, half, tolerance)
    s.a = s.b
    s.fa = s.fb
    s.b += Math.abs(s.step) > tolerance ? s.step : (half > 0 ? tolerance : -tolerance)
    s.fb = f(s.b)
  }
  return s.b
}

function restart(s: State): void {
  s.c = s.a
  s.fc = s.fa
  s.step = s.b - s.a
  s.before = s.step
}

function swap(s: State): void {
  s.a = s.b
  s.b = s.c
  s.c = s.a
  s.fa = s.fb
  s.fb = s.fc
  s.fc = s.fa
}

/** The next step: interpolation where it converges, bisection where it does not. */
function propose(s: State, half: number, tolerance: number): void {
  if (Math.abs(s.before) >= tolerance && Math.abs(s.fa) > Math.abs(s.fb)) {
    const [p, q] = interpolate(s, half)
    if (2 * p < Math.min(3 * half * q - Math.abs(tolerance * q), Math.abs(s.before * q))) {
      s.before = s.step
      s.step = p / q
      return
    }
  }
  s.step = half
  s.before = half
}

/** Numerator (≥ 0) and denominator of the interpolated step. */
function interpolate(s: State, half: number): [number, number] {
  const r = s.fb / s.fa
  let p: number
  let q: number
  if (s.a === s.c) {
    p = 2 * half * r
    q = 1 - r
  }
  else {
    const t = s.fa / s.fc
    const u = s.fb / s.fc
    p = r * (2 * half * t * (t - u) - (s.b - s.a) * (u - 1))
    q = (t - 1) * (u - 1) * (r - 1)
  }
  return p > 0 ? [p, -q] : [-p, q]
}
