/** Preferred values as functions of a line. */
import type { Term } from '../check/term'
import { asNumber } from '../check/term'
import { fault } from '../fault'
import { general } from '../quantity/kind'
import { preferredValue } from '../selection/preferred'
import type { Choice } from '../selection/preferred'
import { isSeries } from '../selection/series'
import type { Builtin, Call } from './call'
import { argument, domainFault, mapped, numberKindOf, wrongKind } from './call'

/** A bare series name arrives as text behind a term of kind `series`. */
function seriesArgument(call: Call) {
  const term = argument(call, 1)
  const name = term.kind.type === 'series' ? term.run() : ''
  if (typeof name === 'string' && isSeries(name)) return name
  throw fault('unknown-series', 'The second argument is a series of preferred values.', 'Write one of E3, E6, E12, E24, E48, E96, E192.', term.at)
}

function choose(choice: Choice): (call: Call) => Term {
  return (call) => {
    const kind = numberKindOf(call, 0)
    if (kind.complex || kind.point) throw wrongKind(call, argument(call, 0), 'a real value')
    const series = seriesArgument(call)
    return mapped(argument(call, 0), call.at, {
      kind: general(kind), effort: 200,
      apply: (x) => {
        const value = asNumber(x)
        if (!(value > 0)) throw domainFault(call, 'preferred values are above zero.', 'Take `abs(x)`.')
        return preferredValue(value, series, choice)
      },
    })
  }
}

export const SELECTION: Record<string, Builtin> = {
  preferred: { arity: [2, 2], usage: 'preferred(x, E24)', check: choose('nearest') },
  preferredAbove: { arity: [2, 2], usage: 'preferredAbove(x, E24)', check: choose('above') },
  preferredBelow: { arity: [2, 2], usage: 'preferredBelow(x, E24)', check: choose('below') },
}
