/** All roots of a polynomial with real coefficients, in conjugate pairs, multiple ones as such. */
import type { Complex } from './complex'
import { modulus, reciprocal, squareRoot } from './complex'
import { EPSILON, hypot, log2, powerOfTwo } from './math'
import type { Polynomial } from './polynomial'
import { derivativeOfPolynomial, evaluatePolynomial, sumOfTerms, trim } from './polynomial'
import { linearRoot, quadraticRoots } from './quadratic'
import { iterateRoots } from './simultaneous'

/** A root whose real part is within its error, and below this part of its modulus, is on the axis. */
const AXIS = 1e-12
/** Roots further apart than this part of their modulus are never merged. */
const WIDEST = 0.05

export interface Root extends Complex {
  /** How far the rounding of the coefficients can have moved it, absolute. */
  readonly error: number
}

/**
 * Roots of a polynomial, each as often as its multiplicity, by rising modulus; of a pair the one in
 * the upper half-plane first. Degrees one and two are in closed form, an even polynomial is solved
 * in s², so that its roots on the axis are on the axis.
 * @param coefficients ascending, finite
 */
export function rootsOf(coefficients: Polynomial): Root[] {
  const p = trim(coefficients)
  let low = 0
  while (low < p.length && p[low] === 0) low++
  const atOrigin = new Array<Root>(Math.max(0, Math.min(low, p.length - 1))).fill({ re: 0, im: 0, error: 0 })
  const rest = p.slice(low)
  return rest.length < 2 ? atOrigin : [...atOrigin, ...inOrder(nonZeroRoots(rest))]
}

function nonZeroRoots(p: Polynomial): Root[] {
  if (p.length === 2) return [exactRoot(linearRoot(p[0]!, p[1]!))]
  if (p.length === 3) return quadraticRoots(p[0]!, p[1]!, p[2]!).map(exactRoot)
  if (p.length % 2 === 1 && p.every((c, k) => k % 2 === 0 || c === 0)) return rootsOfEven(p)
  return generalRoots(p)
}

function exactRoot(z: Complex): Root {
  return { re: z.re, im: z.im, error: 2 * EPSILON * modulus(z) }
}

function rootsOfEven(p: Polynomial): Root[] {
  return nonZeroRoots(p.filter((_, k) => k % 2 === 0)).flatMap((x) => {
    const z = squareRoot(x)
    const error = x.error / (2 * modulus(z)) + EPSILON * modulus(z)
    return [{ re: z.re, im: z.im, error }, { re: 0 - z.re, im: 0 - z.im, error }]
  })
}

/** Scales by powers of two (exact) so that first and last coefficient are near 1, and iterates. */
function generalRoots(p: Polynomial): Root[] {
  const degree = p.length - 1
  const first = log2(Math.abs(p[0]!))
  const shift = Math.round((first - log2(Math.abs(p[degree]!))) / degree)
  const scaled = p.map((c, k) => timesPowerOfTwo(c, k * shift - Math.round(first)))
  if (!scaled.every(Number.isFinite) || scaled[degree] === 0) return p.slice(1).map(() => ({ re: NaN, im: NaN, error: NaN }))
  const unit = powerOfTwo(shift)
  const at = iterateRoots(scaled)
  const points = Array.from(at.re, (re, k) => ({ re, im: at.im[k]! }))
  return paired(mergeClusters(scaled, points)).map(z => ({ re: z.re * unit, im: z.im * unit, error: z.error * unit }))
}

/** In two steps, since 2^k alone may be out of range where the product is not. */
function timesPowerOfTwo(x: number, k: number): number {
  const half = Math.trunc(k / 2)
  return x * powerOfTwo(half) * powerOfTwo(k - half)
}

/** Roots that lie closer together than the rounding of the coefficients tells apart become one, at their mean. */
function mergeClusters(p: Polynomial, points: readonly Complex[]): Root[] {
  const group = points.map((_, k) => k)
  for (let i = 0; i < points.length; i++) {
    for (let j = i + 1; j < points.length; j++) {
      if (group[i] === group[j] || !indistinct(p, points, i, j)) continue
      const old = group[j]
      for (let k = 0; k < group.length; k++) if (group[k] === old) group[k] = group[i]!
    }
  }
  return points.map((z, k) => {
    const members = points.filter((_, j) => group[j] === group[k])
    return members.length === 1 ? simpleRoot(p, z) : meanRoot(members)
  })
}

/** Whether p half way between two roots is still mere rounding of its coefficients. */
function indistinct(p: Polynomial, points: readonly Complex[], i: number, j: number): boolean {
  const a = points[i]!
  const b = points[j]!
  const apart = hypot(a.re - b.re, a.im - b.im) / 2
  const centre = { re: (a.re + b.re) / 2, im: (a.im + b.im) / 2 }
  if (apart > WIDEST * modulus(centre)) return false
  const [near, at] = fromNearerEnd(p, centre)
  return modulus(evaluatePolynomial(near, at.re, at.im)) <= EPSILON * sumOfTerms(near, modulus(at))
}

/** p and z, or for |z| > 1 the reversed polynomial and 1/z, whose values stay in range. */
function fromNearerEnd(p: Polynomial, z: Complex): [Polynomial, Complex] {
  return modulus(z) > 1 ? [[...p].reverse(), reciprocal(z)] : [p, z]
}

function simpleRoot(p: Polynomial, z: Complex): Root {
  const size = modulus(z)
  const [near, at] = fromNearerEnd(p, z)
  const slope = modulus(at) * modulus(evaluatePolynomial(derivativeOfPolynomial(near), at.re, at.im))
  const error = EPSILON * size * (sumOfTerms(near, modulus(at)) / slope + 1)
  const onAxis = Math.abs(z.re) <= Math.min(error, AXIS * size)
  return { re: onAxis ? 0 : z.re, im: z.im, error }
}

function meanRoot(members: readonly Complex[]): Root {
  let re = 0
  let im = 0
  for (const z of members) {
    re += z.re / members.length
    im += z.im / members.length
  }
  let radius = 0
  for (const z of members) radius = Math.max(radius, hypot(z.re - re, z.im - im))
  return { re, im, error: Math.max(radius, EPSILON * hypot(re, im)) }
}

/** Makes conjugates exact, and roots real that are real within their error. */
function paired(roots: readonly Root[]): Root[] {
  const result: Root[] = []
  const below = roots.filter(z => z.im < 0 && !isReal(z))
  for (const z of roots) {
    if (isReal(z)) result.push({ re: z.re, im: 0, error: z.error })
    else if (z.im > 0) {
      const index = nearest(below, z)
      const partner = index < 0 ? { re: z.re, im: -z.im } : below.splice(index, 1)[0]!
      const pair = { re: (z.re + partner.re) / 2, im: (z.im - partner.im) / 2, error: z.error }
      result.push(pair, { ...pair, im: -pair.im })
    }
  }
  return result
}

function isReal(z: Root): boolean {
  return Math.abs(z.im) <= Math.min(z.error, 1e-3 * Math.abs(z.re)) || Math.abs(z.im) <= EPSILON * Math.abs(z.re)
}

function nearest(candidates: readonly Complex[], z: Complex): number {
  let best = -1
  let distance = Infinity
  candidates.forEach((c, k) => {
    const d = hypot(c.re - z.re, c.im + z.im)
    if (d < distance) {
      distance = d
      best = k
    }
  })
  return best
}

function inOrder(roots: readonly Root[]): Root[] {
  return [...roots].sort((a, b) => modulus(a) - modulus(b) || a.re - b.re || b.im - a.im)
}
