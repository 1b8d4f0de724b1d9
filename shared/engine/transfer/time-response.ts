/** Step and impulse response of a rational function, by whichever method keeps the digits. */
import type { Analysis, Level } from './analysis'
import { analyse } from './analysis'
import { cascade } from './cascade'
import { evaluateRational, ratioOfProducts } from './evaluate'
import { figureOf } from './figure'
import { partialFractions } from './modes'
import type { Outcome, Refusal } from './outcome'
import { found, refuse } from './outcome'
import type { Rational } from './rational'
import type { Sample, TimeFunction } from './time-function'

const stepResponses = new WeakMap<Rational, TimeFunction>()
const impulseResponses = new WeakMap<Rational, TimeFunction>()

/** Response to a unit step. The function must not be refused, zero or improper. */
export function stepFunction(r: Rational): TimeFunction {
  return remembered(stepResponses, r, true)
}

function remembered(store: WeakMap<Rational, TimeFunction>, r: Rational, step: boolean): TimeFunction {
  const before = store.get(r)
  if (before) return before
  const result = timeFunction(r, step)
  store.set(r, result)
  return result
}

function timeFunction(r: Rational, step: boolean): TimeFunction {
  const a = analyse(r)
  const lead = leadingCoefficient(a)
  const constant = step && r.origin === 0 ? finalValue(r) : 0
  if (!step || r.origin >= 0) {
    const modes = partialFractions(lead, a.zeros, a.poles, constant, step)
    if (modes) return modes
  }
  return cascade(lead, a.zeros, a.poles, step)
}

/**
 * K of K·∏(s − zeros)/∏(s − poles). Where pairs that nearly coincide were cancelled, K is taken so
 * that the value at low frequency, and with it the final value of the step, is kept exactly.
 */
function leadingCoefficient(a: Analysis): Level {
  if (a.warnings.length === 0) return a.high.coefficient
  const minus = (p: { re: number, im: number }) => ({ re: -p.re, im: -p.im })
  const nonZero = (p: { omega: number }) => p.omega > 0
  const k = ratioOfProducts(a.low.coefficient, a.poles.filter(nonZero).map(minus), a.zeros.filter(nonZero).map(minus))
  return { mantissa: k.re, exponent: 0 }
}

/** H(0): 0 where there is a zero at s = 0. */
export function finalValue(r: Rational): number {
  return r.origin > 0 ? 0 : evaluateRational(r, 0, 0).re
}

/** Why there is no response in time at all. */
export function refuseImproper(a: Analysis): Refusal | undefined {
  if (a.high.order <= 0) return undefined
  return refuse('improper', 'The order of the numerator exceeds that of the denominator, so a step gives an impulse at t = 0.')
}

/** Response to a unit step of the input at t = 0, in units of H. @param time s, 0 meaning just after the step */
export function stepResponse(r: Rational, time: number): Outcome<number> {
  return responseAt(r, time, () => stepFunction(r).at(time))
}

/** Response to a unit impulse, in units of H per second, without the impulse itself at t = 0. @param time s */
export function impulseResponse(r: Rational, time: number): Outcome<number> {
  return responseAt(r, time, () => remembered(impulseResponses, r, false).at(time))
}

function responseAt(r: Rational, time: number, sample: () => Sample): Outcome<number> {
  if (r.refused) return r.refused
  if (!Number.isFinite(time)) return refuse('time-range', 'A time must be finite.')
  if (r.gain === 0 || time < 0) return found(0)
  return figureOf(r, (a) => {
    const improper = refuseImproper(a)
    if (improper) return improper
    const { value } = sample()
    return Number.isFinite(value)
      ? found(value)
      : refuse('response-range', 'The response has grown beyond the range of numbers at this time.')
  })
}
