/** Magnitude and level at a frequency or over a band. */
import { hypot } from '../numeric/math'
import { analyse } from './analysis'
import { evaluateRational, logModulus } from './evaluate'
import { monotoneKnots } from './extremes'
import { DB_PER_NEPER, POLE_HERE, refuseBand, refuseFrequency } from './figure'
import type { Outcome } from './outcome'
import { found, refuse } from './outcome'
import type { Rational } from './rational'

/** |H(iω)|, in SI units of H. @param omega rad/s */
export function magnitude(r: Rational, omega: number): Outcome<number> {
  const refused = r.refused ?? refuseFrequency(omega)
  if (refused) return refused
  const value = evaluateRational(r, 0, omega)
  const size = hypot(value.re, value.im)
  return size < Infinity ? found(size) : POLE_HERE
}

/** 20·log10|H(iω)|, dB. A magnitude of zero has no level. @param omega rad/s */
export function gain(r: Rational, omega: number): Outcome<number> {
  const refused = r.refused ?? refuseFrequency(omega)
  if (refused) return refused
  const level = levelAt(r, omega)
  if (level === -Infinity) return refuse('no-level', 'The magnitude is zero here, so it has no level in dB.', 'Use magnitude().')
  return level < Infinity ? found(level * DB_PER_NEPER) : POLE_HERE
}

/** ln|H(iω)|; −∞ at a zero, +∞ at a pole. */
export function levelAt(r: Rational, omega: number): number {
  if (r.gain === 0) return -Infinity
  const level = logModulus(r, omega)
  return Number.isNaN(level) ? Infinity : level
}

export interface BandPoint {
  /** rad/s */
  readonly omega: number
  /** dB; −∞ at a null. */
  readonly gain: number
}

/**
 * Least and greatest gain over a band of frequencies, ends included, with where they are.
 * @param from rad/s @param to rad/s
 */
export function gainOverBand(r: Rational, from: number, to: number): Outcome<{ least: BandPoint, greatest: BandPoint }> {
  const refused = r.refused ?? refuseBand(from, to)
  if (refused) return refused
  let least = bandPoint(r, from)
  let greatest = least
  const inside = r.gain === 0 ? [] : monotoneKnots(r).filter(k => k.omega > from && k.omega < to)
  for (const point of [...inside.map(k => ({ omega: k.omega, gain: k.level * DB_PER_NEPER })), bandPoint(r, to)]) {
    if (point.gain < least.gain) least = point
    if (point.gain > greatest.gain) greatest = point
  }
  if (greatest.gain === Infinity) {
    return refuse('pole-in-band', 'The magnitude is unbounded in this band: a pole lies on the axis.')
  }
  return found({ least, greatest }, r.gain === 0 ? [] : analyse(r).warnings)
}

function bandPoint(r: Rational, omega: number): BandPoint {
  return { omega, gain: levelAt(r, omega) * DB_PER_NEPER }
}
