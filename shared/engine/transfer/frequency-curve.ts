/** The frequency response as a curve, with the range chosen and the marks that belong on it. */
import { modulus } from '../numeric/complex'
import { TWO_PI, ceilDecade, exp, floorDecade, ln, pow } from '../numeric/math'
import type { Analysis } from './analysis'
import { cornerFrequency } from './asymptotes'
import { monotoneKnots } from './extremes'
import { DB_PER_NEPER, figureOf, refuseBand } from './figure'
import { gain } from './gain'
import type { FrequencyFunction } from './general'
import { generalPhase, phaseFurther } from './general'
import type { Outcome } from './outcome'
import { found, refuse } from './outcome'
import { halfPowerEdges, resonance } from './passband'
import type { Rational } from './rational'
import { sampleResponse } from './sampling'

/** Arrays of equal length. */
export interface FrequencyCurve {
  /** Hz, rising, logarithmically spaced and closer about resonances. */
  readonly frequency: Float64Array
  /** dB */
  readonly gain: Float64Array
  /** Degrees, unwrapped. */
  readonly phase: Float64Array
}

/** Hz */
export interface FrequencyRange { readonly from: number, readonly to: number }

export interface CurveMark {
  readonly kind: 'corner' | 'peak' | 'cut-off'
  /** Hz */
  readonly frequency: number
  /** dB */
  readonly gain: number
}

/** Decades shown beyond the lowest and the highest root. */
const BEYOND = 10
/** Where a function without roots away from s = 0 is shown, Hz. */
const PLAIN: FrequencyRange = { from: 1, to: 1e6 }
/** A root just off a power of ten does not cost a further decade. */
const SLACK = 1.001
/** Distances from a resonance, in units of its half width, at which the curve gets points of its own. */
const CLOSE = [0, 0.15, 0.35, 0.6, 1, 1.6, 2.5, 4, 7, 12, 20, 40]
/** Damping ratio below which a pair of roots is a resonance to be resolved. */
const LIGHT = 0.3

const REVERSED = refuse('band-range', 'A plot must run from a frequency above zero to a higher one.')

/** Whole decades that hold all poles and zeros with a decade to spare. */
export function automaticRange(r: Rational): Outcome<FrequencyRange> {
  return figureOf(r, (a) => {
    const sizes = [...a.poles, ...a.zeros].map(z => z.omega).filter(w => w > 0)
    if (sizes.length === 0) return found(aroundUnity(a))
    const lowest = Math.min(...sizes) / TWO_PI
    const highest = Math.max(...sizes) / TWO_PI
    return found({ from: floorDecade(lowest / BEYOND * SLACK), to: ceilDecade(highest * BEYOND / SLACK) })
  })
}

/** Two decades on either side of where K·s^n has a gain of one. */
function aroundUnity(a: Analysis): FrequencyRange {
  if (a.low.order === 0) return PLAIN
  const unity = pow(10, Math.round(-a.low.logSize / a.low.order / ln(10))) / TWO_PI
  const centre = floorDecade(unity)
  return { from: centre / 100, to: centre * 100 }
}

/**
 * Curve between two frequencies.
 * @param from Hz, above 0
 * @param to Hz
 * @param points of the even spacing; some more are put in about resonances
 */
export function frequencyCurve(r: Rational, from: number, to: number, points: number): Outcome<FrequencyCurve> {
  if (refuseBand(from, to) || !(from > 0) || from === to) return REVERSED
  return figureOf(r, (a) => {
    const frequency = spaced(r, a, from, to, points)
    const omega = frequency.map(f => f * TWO_PI)
    const level = new Float64Array(frequency.length)
    const phase = new Float64Array(frequency.length)
    sampleResponse(r, omega, level, phase)
    return found({ frequency, gain: bounded(level), phase })
  })
}

/** Evenly by logarithm, with the extremes of the modulus and the neighbourhood of every light pair. */
function spaced(r: Rational, a: Analysis, from: number, to: number, points: number): Float64Array {
  const count = Math.max(2, Math.min(20_000, Math.floor(points)))
  const ratio = ln(to / from) / (count - 1)
  const result = new Set<number>([from, to])
  for (let k = 1; k < count - 1; k++) result.add(from * exp(ratio * k))
  const inside = (omega: number) => {
    const f = omega / TWO_PI
    if (f > from && f < to) result.add(f)
  }
  for (const knot of monotoneKnots(r)) inside(knot.omega)
  for (const z of [...a.poles, ...a.zeros]) {
    if (z.im <= 0 || Math.abs(z.zeta) > LIGHT) continue
    const half = Math.max(Math.abs(z.re), 1e-6 * z.im)
    for (const times of CLOSE) {
      inside(z.im - times * half)
      inside(z.im + times * half)
    }
  }
  return Float64Array.from(result).sort()
}

/** A null or a pole on the axis takes the least or greatest level beside it, so that every point can be drawn. */
function bounded(level: Float64Array): Float64Array {
  let top = -Infinity
  let bottom = Infinity
  for (const g of level) {
    if (!Number.isFinite(g)) continue
    top = Math.max(top, g)
    bottom = Math.min(bottom, g)
  }
  return level.map(g => Number.isFinite(g) ? g : g === -Infinity ? bottom : top)
}

/** Corner, peak and half-power edges, as far as the function has them, by rising frequency. */
export function curveMarks(r: Rational): CurveMark[] {
  const marks: CurveMark[] = []
  const add = (kind: CurveMark['kind'], frequency: number) => {
    const level = gain(r, frequency * TWO_PI)
    if (level.ok) marks.push({ kind, frequency, gain: level.value })
  }
  const corner = cornerFrequency(r)
  if (corner.ok) add('corner', corner.value)
  const peak = resonance(r)
  if (peak.ok) add('peak', peak.value.omega / TWO_PI)
  const edges = halfPowerEdges(r)
  if (edges.ok) for (const frequency of edges.value) add('cut-off', frequency)
  return marks.sort((a, b) => a.frequency - b.frequency)
}

/** The same for a function that is not rational: evenly spaced, without refinement. */
export function generalFrequencyCurve(f: FrequencyFunction, from: number, to: number, points: number): Outcome<FrequencyCurve> {
  if (refuseBand(from, to) || !(from > 0) || from === to) return REVERSED
  const count = Math.max(2, Math.min(5_000, Math.floor(points)))
  const frequency = Float64Array.from({ length: count }, (_, k) => from * exp(ln(to / from) * k / (count - 1)))
  frequency[count - 1] = to
  const first = generalPhase(f, from * TWO_PI)
  if (!first.ok) return first
  const level = new Float64Array(count)
  const phase = new Float64Array(count)
  for (let k = 0; k < count; k++) {
    const omega = frequency[k]! * TWO_PI
    const turned = k === 0 ? first.value : phaseFurther(f, phase[k - 1]!, frequency[k - 1]! * TWO_PI, omega)
    if (turned === undefined) return refuse('not-resolved', 'The phase turns too often in this range to be followed.', 'Narrow the range.')
    level[k] = ln(modulus(f(0, omega))) * DB_PER_NEPER
    phase[k] = turned
  }
  return found({ frequency, gain: bounded(level), phase })
}
