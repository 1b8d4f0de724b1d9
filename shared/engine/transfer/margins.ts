/** Gain and phase margin of a loop gain L, for negative feedback around 1 + L. */
import { rootBetween } from '../numeric/bracket'
import { degrees, hypot } from '../numeric/math'
import type { Analysis } from './analysis'
import { evaluateScaled, logModulus } from './evaluate'
import { levelCrossings, monotoneKnots } from './extremes'
import { DB_PER_NEPER, figureOf } from './figure'
import type { Outcome } from './outcome'
import { found, refuse } from './outcome'
import { delayAt, phaseAt } from './phase'
import type { Rational } from './rational'
import { axisFrequencies, resolvingGrid } from './response'

export interface Margin {
  /** dB or degrees; Infinity where the curve makes no crossing: unbounded. */
  readonly margin: number
  /** The crossing it belongs to, rad/s; 0 or Infinity for the limits. */
  readonly omega?: number
}

const UNBOUNDED: Margin = { margin: Infinity }
/** A phase margin this small, degrees, is the critical point itself. */
const ON_POINT = 1e-9

/** Smallest −20·log10|L| over the frequencies at which L is real and negative, dB. */
export function gainMargin(r: Rational): Outcome<Margin> {
  return figureOf(r, (a) => {
    const crossings = phaseCrossings(r, a).map(omega => ({ omega, margin: -logModulus(r, omega) * DB_PER_NEPER }))
    if (a.low.order === 0 && a.low.negative) crossings.push({ omega: 0, margin: -a.low.logSize * DB_PER_NEPER })
    if (a.high.order === 0 && a.high.negative) crossings.push({ omega: Infinity, margin: -a.high.logSize * DB_PER_NEPER })
    // A loop that stays at −180° (two integrators) passes through the critical point without crossing.
    for (const at of phaseMargins(r, a)) if (Math.abs(at.margin) <= ON_POINT) crossings.push({ omega: at.omega, margin: 0 })
    return found(smallest(crossings))
  })
}

/** Smallest 180° + phase, taken within (−180°, 180°], over the frequencies at which |L| = 1; degrees. */
export function phaseMargin(r: Rational): Outcome<Margin> {
  return figureOf(r, (a) => {
    if (monotoneKnots(r).every(k => Math.abs(k.level) < 1e-9)) {
      return refuse('gain-is-one', 'The gain is 0 dB at every frequency, so there is no crossing to take a margin at.')
    }
    return found(smallest(phaseMargins(r, a)))
  })
}

interface Crossing { omega: number, margin: number }

function smallest(crossings: readonly Crossing[]): Margin {
  return crossings.reduce<Margin>((least, c) => c.margin < least.margin ? { ...c, margin: c.margin + 0 } : least, UNBOUNDED)
}

function phaseMargins(r: Rational, a: Analysis): Crossing[] {
  return levelCrossings(r, 0).map(omega => ({ omega, margin: wrapped(180 + degrees(phaseAt(r, a, omega))) }))
}

/** Into (−180, 180]. */
export function wrapped(angle: number): number {
  return angle - 360 * Math.ceil((angle - 180) / 360)
}

/** Angular frequencies at which L passes through the negative real axis. */
function phaseCrossings(r: Rational, a: Analysis): number[] {
  const grid = resolvingGrid(a)
  const breaks = [...axisFrequencies(a.poles), ...axisFrequencies(a.zeros)]
  const result: number[] = []
  for (let k = 1; k < grid.length; k++) {
    const from = grid[k - 1]!
    const to = grid[k]!
    if (breaks.includes(from) || breaks.includes(to)) continue
    result.push(...crossingsBetween(r, from, to))
  }
  return result
}

/** The interval is first split where the phase turns round, so that a pair of crossings is not missed. */
function crossingsBetween(r: Rational, from: number, to: number): number[] {
  const delay = (omega: number) => delayAt(r, omega)
  const turn = Math.sign(delay(from)) * Math.sign(delay(to)) < 0 ? rootBetween(delay, from, to) : undefined
  const parts = turn === undefined ? [[from, to]] : [[from, turn], [turn, to]]
  return parts.flatMap(([x, y]) => {
    const at = Math.sign(direction(r, x!).im) * Math.sign(direction(r, y!).im) < 0
      ? rootBetween(omega => direction(r, omega).im, x!, y!)
      : undefined
    return at !== undefined && direction(r, at).re < 0 ? [at] : []
  })
}

/** L(iω) as a unit vector. */
function direction(r: Rational, omega: number): { re: number, im: number } {
  const v = evaluateScaled(r, 0, omega)
  const size = hypot(v.re, v.im)
  return { re: v.re / size, im: v.im / size }
}
