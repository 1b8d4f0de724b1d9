/** What figures need of a transfer function and a frequency. */
import { describe } from '../check/describe'
import { functionOf } from '../check/laplace'
import type { Term, Value } from '../check/term'
import { asNumber, mergedVariables, summedEffort } from '../check/term'
import { fault } from '../fault'
import { TWO_PI } from '../numeric/math'
import { FREQUENCY, isNone, sameDimension } from '../quantity/dimension'
import type { Kind, ScalarKind, TransferKind } from '../quantity/kind'
import { refuseNotRational } from '../transfer'
import type { FrequencyFunction, Outcome, Rational } from '../transfer'
import type { SourceRange } from '../types'
import type { Call } from './call'
import { argument, hasKind, mapValue, transferArgument, wrongKind } from './call'

/** The value of a figure, or a fault at the call. */
export function valueOf<T>(outcome: Outcome<T>, at: SourceRange): T {
  if (outcome.ok) return outcome.value
  throw fault(outcome.code, outcome.message, outcome.hint, at)
}

export function rationalResponse(call: Call, index = 0): { term: Term<TransferKind>, rational: () => Rational } {
  const term = transferArgument(call, index)
  const { rational } = term
  if (!rational) {
    const refused = refuseNotRational(call.name)
    throw fault(refused.code, refused.message, refused.hint, term.at)
  }
  return { term, rational }
}

export function frequencyFunction(term: Term): FrequencyFunction {
  const f = functionOf(term)
  return (re, im) => f({ re, im })
}

/** A figure of the function alone. */
export function figure<T extends Value>(call: Call, kind: Kind, effort: number, compute: (r: Rational) => Outcome<T>): Term {
  const { rational } = rationalResponse(call)
  return {
    kind, at: call.at, variables: mergedVariables(call.args), effort: summedEffort(call.args) + effort,
    run: () => valueOf(compute(rational()), call.at),
  }
}

/** A frequency argument with its mark, as a closure that gives rad/s. */
export function frequencyArgument(call: Call, index: number): (value: Value) => number {
  const term = argument(call, index)
  const kind = term.kind.type === 'list' ? term.kind.of : term.kind
  return toOmega(call, term, kind)
}

function toOmega(call: Call, term: Term, kind: Kind): (value: Value) => number {
  if (kind.type !== 'number' || kind.complex || !sameDimension(kind.dimension, FREQUENCY)) {
    throw fault('frequency-argument', `\`${call.name}\` takes a frequency in Hz or rad/s, not ${describe(kind)}.`, 'Write it with its unit: `1 kHz` or `1000 rad/s`.', term.at)
  }
  if (!kind.mark) throw fault('frequency-unmarked', `\`${call.name}\` cannot tell whether this frequency is in Hz or in rad/s.`, 'State it: `w_0 to rad/s`, or `f_0 to Hz`.', term.at)
  return kind.mark === 'Hz' ? value => asNumber(value) * TWO_PI : asNumber
}

interface AtFrequency {
  kind: ScalarKind
  effort: number
  rational: (r: Rational, omega: number) => Outcome<number>
  general?: (f: FrequencyFunction, omega: number) => Outcome<number>
  /** General functions are walked along the axis, which takes longer. */
  generalEffort?: number
}

/** A figure at a frequency, or at each of a list. */
export function atFrequency(call: Call, spec: AtFrequency): Term {
  const transfer = transferArgument(call, 0)
  const omega = frequencyArgument(call, 1)
  const frequency = argument(call, 1)
  const compute = evaluator(call, transfer, spec)
  const isList = frequency.kind.type === 'list'
  const kind: Kind = isList ? { type: 'list', of: spec.kind } : spec.kind
  return {
    kind, at: call.at, variables: mergedVariables(call.args),
    effort: summedEffort(call.args) + (transfer.rational ? spec.effort : spec.generalEffort ?? spec.effort),
    run: () => mapValue(frequency.run(), value => compute(omega(value))),
    ...(isList ? {} : { frequencies: () => ({ low: omega(frequency.run()), high: omega(frequency.run()) }) }),
  }
}

function evaluator(call: Call, transfer: Term<TransferKind>, spec: AtFrequency): (omega: number) => number {
  const { rational } = transfer
  if (rational) return omega => valueOf(spec.rational(rational(), omega), call.at)
  const { general } = spec
  if (!general) {
    const refused = refuseNotRational(call.name)
    throw fault(refused.code, refused.message, refused.hint, transfer.at)
  }
  const f = frequencyFunction(transfer)
  return omega => valueOf(general(f, omega), call.at)
}

/** `gain` and its kin are levels of a ratio: a function with a dimension has none. */
export function refuseDimension(call: Call, term: Term<TransferKind>): void {
  if (isNone(term.kind.dimension)) return
  throw fault('level-of-quantity', `\`${call.name}\` is the level of a ratio, and this function has a unit.`, 'Divide the function by a reference, such as `1 ohm`, or use `magnitude(H, f)`.', term.at)
}

export function isBand(call: Call, index: number): boolean {
  const term = argument(call, index)
  if (hasKind(term, 'band')) return true
  if (term.kind.type === 'number' || term.kind.type === 'list') return false
  throw wrongKind(call, term, 'a frequency or a `band(f_1, f_2)`')
}
