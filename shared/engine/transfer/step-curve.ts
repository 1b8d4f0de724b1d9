/** The step response as a curve, with its duration chosen so that what matters is seen. */
import { TWO_PI, exp, floorDecade } from '../numeric/math'
import type { Analysis } from './analysis'
import { figureOf } from './figure'
import type { Outcome } from './outcome'
import { found, refuse } from './outcome'
import type { Rational } from './rational'
import { settlingTime } from './step-figures'
import { finalValue, refuseImproper, stepFunction } from './time-response'

export interface StepCurve {
  /** s, evenly spaced from 0 to the duration. */
  readonly time: Float64Array
  /** In units of H. */
  readonly value: Float64Array
  /** Where the response settles. */
  readonly finalValue?: number
}

/** Cycles of an oscillation shown at most, so that they can be told apart. */
const CYCLES = 25
/** Damping ratio below which a pair of poles is seen to oscillate. */
const LIGHT = 0.3
/** Part of its final value that the response is shown to settle to. */
const BAND = 0.01
/** Time constants of the slowest mode shown where nothing better is known. */
const CONSTANTS = 6

/** A round duration (1, 2 or 5 times a power of ten), s. */
export function automaticDuration(r: Rational): Outcome<number> {
  return figureOf(r, (a) => {
    const improper = refuseImproper(a)
    if (improper) return improper
    const settling = settlingTime(r, BAND)
    const wanted = settling.ok && settling.value > 0 ? settling.value * 1.2 : byPoles(a)
    return found(rounded(Math.min(wanted, readable(a))))
  })
}

function byPoles(a: Analysis): number {
  const growing = Math.max(0, ...a.poles.map(p => p.re))
  if (growing > 0) return CONSTANTS / growing
  const decays = a.poles.filter(p => p.re < 0).map(p => -p.re)
  if (decays.length > 0) return CONSTANTS / Math.min(...decays)
  const turns = a.poles.map(p => p.omega).filter(w => w > 0)
  if (turns.length > 0) return CONSTANTS * TWO_PI / Math.min(...turns)
  return a.low.order < 0 ? CONSTANTS * exp(a.low.logSize / a.low.order) : 1
}

/** A high Q settles over more cycles than can be drawn: then the first ones, but not less than the slow modes need. */
function readable(a: Analysis): number {
  const light = a.poles.filter(p => p.im > 0 && Math.abs(p.zeta) < LIGHT).map(p => p.im)
  if (light.length === 0) return Infinity
  const others = a.poles.filter(p => p.re < 0 && !(Math.abs(p.zeta) < LIGHT)).map(p => -p.re)
  const slow = others.length > 0 ? CONSTANTS / Math.min(...others) : 0
  return Math.max(CYCLES * TWO_PI / Math.min(...light), slow)
}

function rounded(time: number): number {
  const decade = floorDecade(time)
  const step = [1, 2, 5, 10].find(k => k * decade >= time * (1 - 1e-9)) ?? 10
  return step * decade
}

/**
 * Step response from 0 to a duration.
 * @param duration s, above 0
 * @param points at least 2
 */
export function stepCurve(r: Rational, duration: number, points: number): Outcome<StepCurve> {
  if (!(duration > 0 && duration < Infinity)) return refuse('duration-range', 'The duration must be finite and above zero.')
  return figureOf(r, (a) => {
    const improper = refuseImproper(a)
    if (improper) return improper
    const count = Math.max(2, Math.min(20_000, Math.floor(points)))
    const time = new Float64Array(count)
    const value = new Float64Array(count)
    let place = stepFunction(r).start()
    const by = duration / (count - 1)
    for (let k = 0; k < count; k++) {
      time[k] = k * by
      value[k] = place.here.value
      place = place.next(by)
    }
    if (!value.every(Number.isFinite)) {
      return refuse('response-range', 'The response grows beyond the range of numbers within this duration.', 'Shorten the duration.')
    }
    const settles = r.origin >= 0 && a.poles.every(p => p.re < 0)
    return found(settles ? { time, value, finalValue: finalValue(r) } : { time, value })
  })
}
