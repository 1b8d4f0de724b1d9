/** Overshoot, rise and settling of the step response, from the response itself and not its envelope. */
import { rootBetween } from '../numeric/bracket'
import { EPSILON } from '../numeric/math'
import type { Analysis } from './analysis'
import { isStable } from './analysis'
import { lifetime } from './cascade'
import { figureOf } from './figure'
import type { Outcome, Refusal } from './outcome'
import { found, refuse } from './outcome'
import type { Rational } from './rational'
import type { Place, Sample, TimeFunction } from './time-function'
import { finalValue, refuseImproper, stepFunction } from './time-response'

/** Steps of a search; beyond it the figure is refused rather than guessed. */
const STEPS = 400_000

/** Response relative to its final value: 1 is settled. */
interface Settled { readonly y: TimeFunction, readonly final: number, readonly until: number }

function settledFigure<T>(r: Rational, figure: (s: Settled) => Outcome<T>): Outcome<T> {
  return figureOf(r, (a) => {
    const refused = refuseUnsettled(r, a)
    if (refused) return refused
    return figure({ y: stepFunction(r), final: finalValue(r), until: a.poles.length === 0 ? 0 : lifetime(a.poles) })
  })
}

function refuseUnsettled(r: Rational, a: Analysis): Refusal | undefined {
  const improper = refuseImproper(a)
  if (improper) return improper
  if (!isStable(a)) {
    const growing = a.poles.some(p => p.re > 0)
    return growing
      ? refuse('unstable', 'A pole lies in the right half-plane: the step response grows without limit.')
      : refuse('not-settling', 'A pole lies on the axis: the step response does not settle.', 'Put in the losses that damp it.')
  }
  if (r.origin > 0) {
    return refuse('no-final-value', 'The step response returns to zero, so it has no final value to be compared with.', 'Use stepResponse(H, t).')
  }
  return undefined
}

function unresolved(): Refusal {
  return refuse('not-resolved', 'The response is too stiff to be followed: its slowest part outlasts its fastest by too much.')
}

export interface StepPeak {
  /** s */
  readonly time: number
  /** In units of H. */
  readonly value: number
  /** Part of the final value, 0.05 meaning 5 %. */
  readonly overshoot: number
}

/** Largest value of the step response beyond its final value; `undefined` where there is none. */
export function stepPeak(r: Rational): Outcome<StepPeak | undefined> {
  return settledFigure(r, (s) => {
    const best = highest(s)
    if (best === 'unresolved') return unresolved()
    return found(best.excess > 0 ? { time: best.time, value: (1 + best.excess) * s.final, overshoot: best.excess } : undefined)
  })
}

/** Largest excess over the final value, as a part of it: 0 where there is none. */
export function overshoot(r: Rational): Outcome<number> {
  const peak = stepPeak(r)
  return peak.ok ? found(peak.value?.overshoot ?? 0, peak.warnings) : peak
}

interface Highest { time: number, excess: number }

/** Rounding of a response that only approaches its final value is no overshoot. */
const EXCESS = 1e-12

function highest(s: Settled): Highest | 'unresolved' {
  let place = s.y.start()
  let best: Highest = { time: 0, excess: Math.max(EXCESS, relative(s, place.here).value) }
  for (let count = 0; place.time < s.until; count++) {
    if (count > STEPS) return 'unresolved'
    if (s.y.envelope && s.y.envelope(place.time) <= best.excess * Math.abs(s.final)) break
    const next = place.next(stepBelow(s, place, best.excess))
    const top = topWithin(s, place, next, best.excess)
    if (top && top.excess > best.excess) best = top
    place = next
  }
  return best.excess > EXCESS ? best : { time: 0, excess: 0 }
}

/** Deviation from the final value as a part of it, and its slope. */
function relative(s: Settled, sample: Sample): Sample {
  return { value: sample.value / s.final - 1, slope: sample.slope / s.final }
}

/**
 * The next step forward: the ordinary one, or a longer one within which the bound on the curvature
 * rules out that the response turns round or comes above a level. This passes quickly over the long
 * ringing of a fast mode that hardly matters.
 */
function stepBelow(s: Settled, place: Place, level: number): number {
  const ordinary = s.y.stepAt(place.time)
  const curvature = s.y.curvatureEnvelope?.(place.time)
  if (curvature === undefined) return ordinary
  const { value, slope } = relative(s, place.here)
  const most = curvature / Math.abs(s.final)
  const straight = Math.abs(slope) / most
  const below = safeAhead(level - value, slope, most)
  return Math.min(Math.max(ordinary, straight, below), Math.max(ordinary, s.until - place.time))
}

/** The largest h for which slope·h + curvature·h²/2 stays within the room. */
function safeAhead(room: number, slope: number, curvature: number): number {
  if (!(room > 0)) return 0
  const root = Math.sqrt(slope * slope + 2 * curvature * room)
  return slope > 0 ? 2 * room / (slope + root) : (root - slope) / curvature
}

/** The maximum between two places, if the slope changes from rising to falling there and it can exceed a level. */
function topWithin(s: Settled, from: Place, to: Place, level: number): Highest | undefined {
  const start = relative(s, from.here)
  const by = to.time - from.time
  if (!(start.slope > 0) || !(relative(s, to.here).slope <= 0)) return undefined
  // Within a step the slope does not rise again: the maximum is below the tangent.
  if (start.value + start.slope * by <= level) return undefined
  const ahead = rootBetween(x => relative(s, sampleAhead(from, to, x)).slope, 0, by)
  return ahead === undefined ? undefined : { time: from.time + ahead, excess: relative(s, from.look(ahead)).value }
}

function sampleAhead(from: Place, to: Place, ahead: number): Sample {
  if (ahead === 0) return from.here
  return ahead === to.time - from.time ? to.here : from.look(ahead)
}

/** From the first crossing of 10 % to the first of 90 % of the final value, s. 0 where the response jumps past both. */
export function riseTime(r: Rational): Outcome<number> {
  return settledFigure(r, (s) => {
    const from = firstReach(s, 0.1)
    const to = firstReach(s, 0.9)
    return from === undefined || to === undefined ? unresolved() : found(to - from)
  })
}

/** When the response first reaches a part of its final value, s. */
export function reachTime(r: Rational, part: number): Outcome<number> {
  return settledFigure(r, (s) => {
    const time = firstReach(s, part)
    return time === undefined ? unresolved() : found(time)
  })
}

function firstReach(s: Settled, part: number): number | undefined {
  let place = s.y.start()
  const level = part - 1
  if (relative(s, place.here).value >= level) return 0
  for (let count = 0; count <= STEPS && place.time <= s.until; count++) {
    const from = place
    const to = from.next(stepBelow(s, from, level))
    const short = (x: number) => relative(s, sampleAhead(from, to, x)).value - level
    const by = to.time - from.time
    const top = topWithin(s, from, to, level)
    const passed = short(by) >= 0 ? by : top && top.excess >= level ? top.time - from.time : undefined
    if (passed !== undefined) {
      const ahead = rootBetween(short, 0, passed)
      return ahead === undefined ? undefined : from.time + ahead
    }
    place = to
  }
  return undefined
}

/**
 * The last instant at which the response is outside the band about its final value, s. 0 where it
 * never is.
 * @param band part of the final value: 0.02 for 2 %
 */
export function settlingTime(r: Rational, band: number): Outcome<number> {
  if (!(band > 0 && band < Infinity)) return refuse('band-range', 'A settling band must be greater than zero.')
  return settledFigure(r, (s) => {
    const last = s.y.envelope && s.y.curvatureEnvelope ? lastFromEnvelope(s, band) : lastByWalk(s, band)
    return last === undefined ? unresolved() : found(last)
  })
}

/**
 * Backwards from where the envelope alone keeps the response within the band, by steps so short that
 * its slope and the bound on its curvature rule out a crossing within them.
 */
function lastFromEnvelope(s: Settled, band: number): number | undefined {
  const limit = band * Math.abs(s.final)
  const envelope = (t: number) => s.y.envelope!(t)
  if (envelope(0) <= limit) return 0
  let end = s.y.stepAt(0)
  while (envelope(end) > limit) end *= 2
  let time = rootBetween(t => envelope(t) - limit, 0, end) ?? end
  for (let count = 0; count < STEPS; count++) {
    const here = s.y.at(time)
    const off = { value: here.value - s.final, slope: here.slope }
    const farthest = Math.max(0, time - safeStep(off, limit, s.y.curvatureEnvelope!(time)))
    const step = safeStep(off, limit, s.y.curvatureEnvelope!(farthest))
    if (!(step > EPSILON * time)) return time
    if (time - step <= 0) return 0
    time -= step
  }
  return undefined
}

/** How far back the distance from the final value stays within the limit, on either side. */
function safeStep(off: Sample, limit: number, curvature: number): number {
  return Math.min(safeAhead(limit - off.value, -off.slope, curvature), safeAhead(limit + off.value, off.slope, curvature))
}

/** Forward to where all has died away, keeping the last crossing, which alone is then closed in on. */
function lastByWalk(s: Settled, band: number): number | undefined {
  let place = s.y.start()
  let last = () => 0
  for (let count = 0; place.time < s.until; count++) {
    if (count > STEPS) return undefined
    const next = place.next(s.y.stepAt(place.time))
    last = lastWithin(s, place, next, band) ?? last
    place = next
  }
  return last()
}

/** Finds the last crossing of the band between two places, an extremum that pokes out of it included. */
function lastWithin(s: Settled, from: Place, to: Place, band: number): (() => number) | undefined {
  const by = to.time - from.time
  const sample = (x: number) => relative(s, sampleAhead(from, to, x))
  const out = (x: number) => Math.abs(sample(x).value) - band
  if (out(by) > 0) return () => to.time
  if (out(0) > 0) return () => from.time + (rootBetween(out, 0, by) ?? by)
  const { value, slope } = sample(0)
  const turns = Math.sign(slope) * Math.sign(sample(by).slope) < 0
  if (!turns || Math.abs(value) + Math.abs(slope) * by <= band) return undefined
  const turn = rootBetween(x => sample(x).slope, 0, by)
  if (turn === undefined || out(turn) <= 0) return undefined
  return () => from.time + (rootBetween(out, turn, by) ?? turn)
}
