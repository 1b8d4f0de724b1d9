/** Straight-line limits of the response, poles and zeros. */
import type { Complex } from '../numeric/complex'
import { TWO_PI, ln } from '../numeric/math'
import type { Analysis, Point } from './analysis'
import { DB_PER_NEPER, figureOf } from './figure'
import type { Outcome } from './outcome'
import { found, refuse } from './outcome'
import type { Rational } from './rational'

export interface StraightLine {
  readonly side: 'low' | 'high'
  /** dB/decade, a multiple of 20. */
  readonly slope: number
  /** Level of the line at 1 Hz, dB. */
  readonly gainAtOneHertz: number
}

/** Low- and high-frequency asymptotes. */
export function asymptotes(r: Rational): Outcome<[StraightLine, StraightLine]> {
  return figureOf(r, a => found([line(a, 'low'), line(a, 'high')]))
}

function line(a: Analysis, side: 'low' | 'high'): StraightLine {
  const { order, logSize } = a[side]
  return { side, slope: 20 * order, gainAtOneHertz: (logSize + order * ln(TWO_PI)) * DB_PER_NEPER }
}

/** Slope of the low-frequency asymptote, dB/decade. */
export function lowSlope(r: Rational): Outcome<number> {
  return figureOf(r, a => found(20 * a.low.order))
}

/** Slope of the high-frequency asymptote, dB/decade. */
export function highSlope(r: Rational): Outcome<number> {
  return figureOf(r, a => found(20 * a.high.order))
}

/** Where the two asymptotes meet, Hz. */
export function cornerFrequency(r: Rational): Outcome<number> {
  return figureOf(r, a => a.corner === undefined
    ? refuse('parallel-asymptotes', 'The low- and high-frequency asymptotes are parallel: they do not meet.', 'Use poles(H) and zeros(H).')
    : found(a.corner / TWO_PI))
}

/** Poles, rad/s, each as often as its multiplicity, by rising modulus. */
export function poles(r: Rational): Outcome<Complex[]> {
  return figureOf(r, a => found(a.poles.map(plain)))
}

/** Zeros, rad/s, likewise. */
export function zeros(r: Rational): Outcome<Complex[]> {
  return figureOf(r, a => found(a.zeros.map(plain)))
}

function plain(p: Point): Complex {
  return { re: p.re, im: p.im }
}
