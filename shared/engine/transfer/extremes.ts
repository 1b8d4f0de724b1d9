/** Where the modulus rises and falls, and where it passes a level. */
import { rootBetween } from '../numeric/bracket'
import type { Analysis } from './analysis'
import { analyse } from './analysis'
import { logModulus } from './evaluate'
import type { Rational } from './rational'
import { axisFrequencies, logarithmicSlope, resolvingGrid } from './response'

/** ln of the modulus at an angular frequency; at 0 and ∞ the limit. */
export interface Knot { readonly omega: number, readonly level: number }

const known = new WeakMap<Rational, readonly Knot[]>()

/**
 * Frequencies between which the modulus is monotone, from 0 to ∞ inclusive, with its level at each.
 * Zeros and poles on the axis are among them, at −∞ and +∞.
 */
export function monotoneKnots(r: Rational): readonly Knot[] {
  const before = known.get(r)
  if (before) return before
  const a = analyse(r)
  const knots = [limit(a, 'low'), ...interiorKnots(r, a), limit(a, 'high')]
  known.set(r, knots)
  return knots
}

function limit(a: Analysis, side: 'low' | 'high'): Knot {
  const { order, logSize } = a[side]
  const rises = side === 'low' ? -order : order
  return { omega: side === 'low' ? 0 : Infinity, level: order === 0 ? logSize : rises > 0 ? Infinity : -Infinity }
}

function interiorKnots(r: Rational, a: Analysis): Knot[] {
  const grid = resolvingGrid(a)
  const breaks = [
    ...axisFrequencies(a.poles).map(omega => ({ omega, level: Infinity })),
    ...axisFrequencies(a.zeros).map(omega => ({ omega, level: -Infinity })),
  ]
  const isBreak = (omega: number) => breaks.some(b => b.omega === omega)
  const slope = (omega: number) => logarithmicSlope(r, omega).re
  const found: Knot[] = [...breaks]
  let last: { omega: number, slope: number } | undefined
  for (const omega of grid) {
    const here = isBreak(omega) ? undefined : { omega, slope: slope(omega) }
    if (last && here && Math.sign(last.slope) * Math.sign(here.slope) < 0) {
      const at = rootBetween(slope, last.omega, omega)
      if (at !== undefined) found.push({ omega: at, level: logModulus(r, at) })
    }
    if (!here || here.slope !== 0) last = here
  }
  return found.sort((x, y) => x.omega - y.omega)
}

/** Largest modulus over all frequencies; of equals (within 1e-9) the lowest frequency. */
export function largest(r: Rational): Knot {
  const knots = monotoneKnots(r)
  let top = -Infinity
  for (const k of knots) top = Math.max(top, k.level)
  return knots.find(k => k.level >= top - EQUAL)!
}

/** Relative difference below which two moduli are equal. */
export const EQUAL = 1e-9

/** Rising angular frequencies at which the modulus passes a level (ln of the modulus). */
export function levelCrossings(r: Rational, level: number): number[] {
  const knots = monotoneKnots(r)
  const over = (omega: number) => logModulus(r, omega) - level
  const result: number[] = []
  for (let k = 1; k < knots.length; k++) {
    const from = knots[k - 1]!
    const to = knots[k]!
    if (!(Math.sign(from.level - level) * Math.sign(to.level - level) < 0)) continue
    const sides = finiteSides(r, from, to, level)
    const at = sides && rootBetween(over, sides[0], sides[1])
    if (at !== undefined) result.push(at)
  }
  return result
}

/** Frequencies inside (from, to) on either side of the level, where an end is 0, ∞, or a root on the axis. */
function finiteSides(r: Rational, from: Knot, to: Knot, level: number): [number, number] | undefined {
  const start = inside(from.omega, to.omega, r)
  const low = Number.isFinite(from.level) && from.omega > 0
    ? from.omega
    : approach(r, start, from, level)
  const high = Number.isFinite(to.level) && to.omega < Infinity
    ? to.omega
    : approach(r, start, to, level)
  return low === undefined || high === undefined ? undefined : [low, high]
}

function inside(from: number, to: number, r: Rational): number {
  if (to < Infinity) return from > 0 ? (from + to) / 2 : to / 2
  if (from > 0) return 2 * from
  const { corner, poles, zeros } = analyse(r)
  return corner || poles.at(-1)?.omega || zeros.at(-1)?.omega || 1
}

/** From `start` towards an end until the modulus is on that end's side of the level. */
function approach(r: Rational, start: number, end: Knot, level: number): number | undefined {
  const side = Math.sign(end.level - level)
  let omega = start
  for (let count = 0; count < 1100; count++) {
    if (Math.sign(logModulus(r, omega) - level) === side) return omega
    const next = end.omega === 0 ? omega / 2 : end.omega === Infinity ? omega * 2 : (omega + end.omega) / 2
    if (next === omega || next === end.omega) return undefined
    omega = next
  }
  return undefined
}
