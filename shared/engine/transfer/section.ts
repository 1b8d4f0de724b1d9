/** Natural frequency, damping and class. */
import type { Analysis, Point } from './analysis'
import { secondOrder } from './analysis'
import { figureOf } from './figure'
import type { Outcome } from './outcome'
import { found, refuse } from './outcome'
import type { Rational } from './rational'

export type DampingClass = 'overdamped' | 'critically damped' | 'underdamped' | 'undamped'

export interface Section {
  /** Natural frequency, rad/s. */
  readonly omega: number
  /** Damping ratio. */
  readonly zeta: number
}

/** How close to 1 a damping ratio counts as critical. */
const CRITICAL = 1e-9

/** The complex pair with the least damping; without one the two poles of a function of order two. */
export function dominantSection(r: Rational): Outcome<Section> {
  return figureOf(r, (a) => {
    const pairs = a.poles.filter(p => p.im > 0)
    if (pairs.length > 0) return found(pairs.reduce((least, p) => p.zeta < least.zeta ? p : least))
    return a.poles.length === 2 ? realPair(r, a) : refuseSection(a)
  })
}

function refuseSection(a: Analysis): Outcome<Section> {
  return a.poles.length === 1
    ? refuse('first-order', 'A first-order function has no natural frequency or damping ratio.', 'Use cornerFrequency(H).')
    : refuse('no-complex-pair', `None of the ${a.poles.length} poles form a complex pair, and the order is not two.`, 'Use poles(H).')
}

function realPair(r: Rational, a: Analysis): Outcome<Section> {
  const [p, q] = a.poles as readonly [Point, Point]
  const product = p.re * q.re
  if (!(product > 0)) {
    return refuse('no-natural-frequency', product === 0
      ? 'One pole is at zero, so there is no natural frequency.'
      : 'The poles lie on both sides of the axis, so there is no natural frequency.')
  }
  const only = r.denominator[0]!
  if (r.denominator.length === 1 && only.power === 1 && only.coefficients.length === 3) {
    const [a0, a1, a2] = only.coefficients as readonly [number, number, number]
    return found(secondOrder(a0, a1, a2))
  }
  return found(secondOrder(product, -(p.re + q.re), 1))
}

/** rad/s */
export function naturalFrequency(r: Rational): Outcome<number> {
  const section = dominantSection(r)
  return section.ok ? found(section.value.omega, section.warnings) : section
}

export function dampingRatio(r: Rational): Outcome<number> {
  const section = dominantSection(r)
  return section.ok ? found(section.value.zeta, section.warnings) : section
}

/** 1/(2ζ). An undamped pair has none. */
export function qualityFactor(r: Rational): Outcome<number> {
  const section = dominantSection(r)
  if (!section.ok) return section
  if (section.value.zeta === 0) return refuse('undamped', 'An undamped pair of poles has no finite quality factor.')
  return found(1 / (2 * section.value.zeta), section.warnings)
}

/** Class of a function of order two. */
export function dampingClass(r: Rational): Outcome<DampingClass> {
  return figureOf(r, (a) => {
    if (a.poles.length !== 2) {
      return refuse('not-second-order', `The order is ${a.poles.length}; a damping class belongs to order two.`)
    }
    const section = dominantSection(r)
    if (!section.ok) return section
    const { zeta } = section.value
    if (zeta < 0) return refuse('unstable', 'The poles lie in the right half-plane: the function is unstable.')
    return found(classify(zeta))
  })
}

/** Class of a damping ratio ≥ 0. */
export function classify(zeta: number): DampingClass {
  if (zeta === 0) return 'undamped'
  if (Math.abs(zeta - 1) <= CRITICAL) return 'critically damped'
  return zeta > 1 ? 'overdamped' : 'underdamped'
}
