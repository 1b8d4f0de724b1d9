/**
 * Figures of a frequency function that is not rational (a delay, losses that go as √s, a line), from
 * its values alone. Phase is followed from low frequency; levels and crossings are found by scanning
 * a stated range, so what lies outside it, or is narrower than the scan, is not seen.
 */
import type { Complex } from '../numeric/complex'
import { argument, divide, isFiniteComplex, modulus } from '../numeric/complex'
import { rootBetween } from '../numeric/bracket'
import { LN2, PI, TWO_PI, degrees, exp, ln, radians } from '../numeric/math'
import { DB_PER_NEPER, refuseFrequency } from './figure'
import type { Margin } from './margins'
import type { Outcome, Refusal } from './outcome'
import { found, refuse } from './outcome'

/** Value at s = re + i·im, in SI units; parts that are not finite where it has none. */
export type FrequencyFunction = (re: number, im: number) => Complex

/** Steps of one walk along the frequency axis. */
const STEPS = 200_000
/** Largest step, as a ratio of frequencies less one, and in radians of phase. */
const WIDEST = 0.05
const TURN = 0.5
const FINEST = 1e-12
/** How far below the wanted frequency the phase is followed from. */
const START = 1e-9
/** Where a search for crossings looks, rad/s. */
const LOWEST = 1e-3
const HIGHEST = 1e13

export const UNDEFINED_HERE = refuse('undefined-at-frequency', 'The function has no finite value at this frequency.')

/** Why a figure that rests on poles and zeros cannot be had. @param figure its name as the engineer wrote it */
export function refuseNotRational(figure: string): Refusal {
  return refuse('not-rational', `${figure} rests on poles and zeros, and this function is not a ratio of polynomials in s.`,
    'It can be swept: gain, phase, attenuation, group delay and margins.')
}

/** |f(iω)|. @param omega rad/s */
export function generalMagnitude(f: FrequencyFunction, omega: number): Outcome<number> {
  const refused = refuseFrequency(omega)
  if (refused) return refused
  const value = f(0, omega)
  return isFiniteComplex(value) ? found(modulus(value)) : UNDEFINED_HERE
}

/** dB. @param omega rad/s */
export function generalGain(f: FrequencyFunction, omega: number): Outcome<number> {
  const size = generalMagnitude(f, omega)
  if (!size.ok) return size
  return size.value === 0
    ? refuse('no-level', 'The magnitude is zero here, so it has no level in dB.', 'Use magnitude().')
    : found(ln(size.value) * DB_PER_NEPER)
}

/** Unwrapped phase, degrees. @param omega rad/s, above 0 */
export function generalPhase(f: FrequencyFunction, omega: number): Outcome<number> {
  const refused = refuseFrequency(omega)
  if (refused) return refused
  if (omega === 0) return refuse('frequency-range', 'The phase of this function is followed from low frequency, so it needs a frequency above zero.')
  let last: PhasePoint | undefined
  const end = walk(f, omega * START, omega, point => (last = point, true))
  return end === 'done' && last ? found(degrees(last.phase)) : refuseWalk(end)
}

interface PhasePoint { readonly omega: number, readonly phase: number, readonly value: Complex }

type WalkEnd = 'done' | 'undefined' | 'too-long'

function refuseWalk(end: WalkEnd): Refusal {
  return end === 'too-long'
    ? refuse('not-resolved', 'The phase turns too often below this frequency to be followed.')
    : UNDEFINED_HERE
}

/** Phase in degrees at `to`, followed on from a known one; undefined where it turns too often or has no value. */
export function phaseFurther(f: FrequencyFunction, phase: number, from: number, to: number): number | undefined {
  let last: PhasePoint = { omega: from, phase: radians(phase), value: f(0, from) }
  return walkFrom(f, last, to, point => (last = point, true)) === 'done' ? degrees(last.phase) : undefined
}

/** Visits frequencies from low to high, so close together that the phase can be followed; `visit` ends it by false. */
function walk(f: FrequencyFunction, from: number, to: number, visit: (point: PhasePoint) => boolean): WalkEnd {
  const first = startOf(f, from)
  return first ? walkFrom(f, first, to, visit) : 'undefined'
}

function walkFrom(f: FrequencyFunction, first: PhasePoint, to: number, visit: (point: PhasePoint) => boolean): WalkEnd {
  let point = first
  let step = WIDEST
  if (!visit(point)) return 'done'
  for (let count = 0; count < STEPS; count++) {
    if (point.omega >= to) return 'done'
    const next = follow(f, point, Math.min(to, point.omega * (1 + step)))
    if (next === 'undefined') return 'undefined'
    if (next === 'turns' && step > FINEST) {
      step /= 2
      continue
    }
    point = next === 'turns' ? jump(f, point, point.omega * (1 + step)) : next
    if (!visit(point)) return 'done'
    step = Math.min(WIDEST, step * 1.5)
  }
  return 'too-long'
}

/** The branch of the phase at the low end: 90° times the slope there in units of 20 dB/decade, or 180° less. */
function startOf(f: FrequencyFunction, omega: number): PhasePoint | undefined {
  const value = f(0, omega)
  const above = f(0, omega * 2)
  if (!isFiniteComplex(value) || modulus(value) === 0) return undefined
  const slope = Math.round(2 * (ln(modulus(above)) - ln(modulus(value))) / LN2) / 2
  const expected = Number.isFinite(slope) ? slope * PI / 2 : 0
  const off = argument(value) - expected
  return { omega, value, phase: expected + off - TWO_PI * Math.ceil((off - PI / 2) / TWO_PI) }
}

function follow(f: FrequencyFunction, from: PhasePoint, to: number): PhasePoint | 'turns' | 'undefined' {
  const value = f(0, to)
  const middle = f(0, (from.omega + to) / 2)
  if (!isFiniteComplex(value) || !isFiniteComplex(middle)) return 'undefined'
  const first = argument(divide(middle, from.value))
  const second = argument(divide(value, middle))
  if (!(Math.abs(first) < TURN && Math.abs(second) < TURN)) return 'turns'
  return { omega: to, value, phase: from.phase + first + second }
}

/** Across a root on the axis, which counts as just left: a zero turns the phase up, a pole down. */
function jump(f: FrequencyFunction, from: PhasePoint, to: number): PhasePoint {
  const value = f(0, to)
  const turn = argument(divide(value, from.value))
  const isPole = modulus(f(0, (from.omega + to) / 2)) > modulus(value)
  const isJump = Math.abs(turn) > 3
  const step = !isJump ? turn : isPole ? -Math.abs(turn) : Math.abs(turn)
  return { omega: to, value, phase: from.phase + step }
}

/** −dφ/dω, s, by extrapolated differences. @param omega rad/s, above 0 */
export function generalGroupDelay(f: FrequencyFunction, omega: number): Outcome<number> {
  const refused = refuseFrequency(omega)
  if (refused) return refused
  if (omega === 0) return refuse('frequency-range', 'The group delay of this function needs a frequency above zero.')
  if (!isFiniteComplex(f(0, omega))) return UNDEFINED_HERE
  const slope = extrapolatedSlope((h) => {
    const turn = argument(divide(f(0, omega + h), f(0, omega - h)))
    return Math.abs(turn) < TURN ? turn / (2 * h) : NaN
  }, omega / 8)
  return slope === undefined ? refuse('not-resolved', 'The phase jumps at this frequency.') : found(-slope + 0)
}

/**
 * Limit of a difference quotient that is even in h, by C. J. F. Ridders' method (Advances in
 * Engineering Software 4 (1982)): halved steps, extrapolated, until the estimate stops improving.
 */
function extrapolatedSlope(quotient: (h: number) => number, start: number): number | undefined {
  let h = start
  let value = quotient(h)
  for (let count = 0; Number.isNaN(value) && count < 40; count++) value = quotient(h /= 2)
  if (Number.isNaN(value)) return undefined
  let row = [value]
  let best = value
  let error = Infinity
  for (let k = 1; k < 12; k++) {
    const next = [quotient(h /= 2)]
    let factor = 4
    for (let j = 1; j <= k; j++, factor *= 4) {
      next.push((next[j - 1]! * factor - row[j - 1]!) / (factor - 1))
      const estimate = Math.max(Math.abs(next[j]! - next[j - 1]!), Math.abs(next[j]! - row[j - 1]!))
      if (estimate <= error) {
        error = estimate
        best = next[j]!
      }
    }
    if (Math.abs(next[k]! - row[k - 1]!) >= 2 * error) break
    row = next
  }
  return best
}

/** Smallest −20·log10|f| where f is real and negative, dB; Infinity where there is no such place. */
export function generalGainMargin(f: FrequencyFunction, from = LOWEST, to = HIGHEST): Outcome<Margin> {
  let least: Margin = { margin: Infinity }
  const end = scan(f, from, to, (a, b) => {
    const turns = Math.round((a.phase + PI) / TWO_PI)
    for (let k = turns - 1; k <= turns + 1; k++) {
      const target = TWO_PI * k - PI
      if (!((a.phase - target) * (b.phase - target) < 0 || b.phase === target)) continue
      const at = rootBetween(omega => argument(negated(f(0, omega))), a.omega, b.omega) ?? b.omega
      const margin = -ln(modulus(f(0, at))) * DB_PER_NEPER
      if (margin < least.margin) least = { margin, omega: at }
    }
    // Once the gain is below the crossing found, and falling, later crossings leave more margin.
    const passed = exp(-least.margin / DB_PER_NEPER)
    return !(passed > 0 && modulus(b.value) < passed / 10)
  })
  const nothing = least.margin === Infinity
  return end === 'undefined' || (nothing && end === 'too-long') ? refuseWalk(end) : found(least)
}

function negated(z: Complex): Complex {
  return { re: -z.re, im: -z.im }
}

function scan(f: FrequencyFunction, from: number, to: number, visit: (a: PhasePoint, b: PhasePoint) => boolean): WalkEnd {
  let last: PhasePoint | undefined
  return walk(f, from, to, (point) => {
    const go = last === undefined || visit(last, point)
    last = point
    return go
  })
}
