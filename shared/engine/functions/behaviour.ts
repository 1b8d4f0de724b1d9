/** Damping, and figures of the step and impulse response. */
import type { Term } from '../check/term'
import { asNumber, mergedVariables, summedEffort } from '../check/term'
import { fault } from '../fault'
import { FREQUENCY, NONE, TIME, sameDimension, times } from '../quantity/dimension'
import { COUNT, number } from '../quantity/kind'
import type { Kind } from '../quantity/kind'
import { findUnit } from '../quantity/unitTable'
import { unitProduct } from '../quantity/unitProduct'
import * as T from '../transfer'
import type { Outcome, Rational } from '../transfer'
import type { Builtin, Call } from './call'
import { argument, mapValue, plainArgument, transferArgument, wrongKind } from './call'
import { figure, rationalResponse, valueOf } from './responseOf'

const EFFORT = { roots: 2500, walk: 6000 } as const

function ofFunction(usage: string, kind: Kind | (() => Kind), effort: number, compute: (r: Rational) => Outcome<number | string>): Builtin {
  return { arity: [1, 1], usage, check: call => figure(call, typeof kind === 'function' ? kind() : kind, effort, compute) }
}

function percentKind(): Kind {
  const unit = findUnit('percent')
  if (!unit) throw new Error('the table of units lacks percent')
  return number(NONE, { display: { unit: unitProduct([{ unit, power: 1 }]), fixed: false } })
}

function atTime(compute: (r: Rational, time: number) => Outcome<number>, perSecond: boolean): (call: Call) => Term {
  return (call) => {
    const { rational } = rationalResponse(call)
    const transfer = transferArgument(call, 0)
    const time = argument(call, 1)
    const timeKind = time.kind.type === 'list' ? time.kind.of : time.kind
    if (timeKind.type !== 'number' || timeKind.complex || !(sameDimension(timeKind.dimension, TIME) || timeKind.zero)) throw wrongKind(call, time, 'a time', 'Write it with its unit: `10 us`.')
    const kind = number(perSecond ? times(transfer.kind.dimension, FREQUENCY) : transfer.kind.dimension)
    return {
      kind: time.kind.type === 'list' ? { type: 'list', of: kind } : kind,
      at: call.at, variables: mergedVariables(call.args), effort: summedEffort(call.args) + EFFORT.roots,
      run: () => mapValue(time.run(), t => valueOf(compute(rational(), asNumber(t)), call.at)),
    }
  }
}

function checkSettling(call: Call): Term {
  const { rational } = rationalResponse(call)
  const band = plainArgument(call, 1)
  if (band.kind.constant !== undefined && !(band.kind.constant > 0 && band.kind.constant < 1)) throw fault('band-range', 'The settling band is a part of the final value, between 0 and 100 %.', 'Write `2 %`.', band.at)
  return {
    kind: number(TIME), at: call.at, variables: mergedVariables(call.args), effort: summedEffort(call.args) + EFFORT.walk,
    run: () => valueOf(T.settlingTime(rational(), asNumber(band.run())), call.at),
  }
}

const RATE = number(FREQUENCY, { mark: 'rad/s' })

export const BEHAVIOUR: Record<string, Builtin> = {
  naturalFrequency: ofFunction('naturalFrequency(H)', RATE, EFFORT.roots, T.naturalFrequency),
  dampingRatio: ofFunction('dampingRatio(H)', COUNT, EFFORT.roots, T.dampingRatio),
  qualityFactor: ofFunction('qualityFactor(H)', COUNT, EFFORT.roots, T.qualityFactor),
  dampingClass: ofFunction('dampingClass(H)', { type: 'text' }, EFFORT.roots, T.dampingClass),
  stepResponse: { arity: [2, 2], usage: 'stepResponse(H, t)', check: atTime(T.stepResponse, false) },
  impulseResponse: { arity: [2, 2], usage: 'impulseResponse(H, t)', check: atTime(T.impulseResponse, true) },
  overshoot: ofFunction('overshoot(H)', percentKind, EFFORT.walk, T.overshoot),
  riseTime: ofFunction('riseTime(H)', number(TIME), EFFORT.walk, T.riseTime),
  settlingTime: { arity: [2, 2], usage: 'settlingTime(H, 2 %)', check: checkSettling },
}
