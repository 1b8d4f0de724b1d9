/** Levels and ratios, and the limits and nominal of a value with tolerance. */
import type { Term } from '../check/term'
import { asNumber } from '../check/term'
import * as M from '../numeric/math'
import { isNone } from '../quantity/dimension'
import { COUNT, LEVEL, general } from '../quantity/kind'
import type { ScalarKind } from '../quantity/kind'
import { constantDual, exponentialDual, logarithmDual, multiplyDual } from '../tolerance/dual'
import { worstCase } from '../tolerance/bounds'
import type { Builtin, Call } from './call'
import { argument, domainFault, mapped, numberKindOf, scalarOf, wrongKind } from './call'

function toFactor(decade: number): (call: Call) => Term {
  return (call) => {
    const kind = scalarOf(call, 0)
    if (kind.type !== 'level' || kind.reference) throw wrongKind(call, argument(call, 0), 'a level in dB', 'Write the unit: `3 dB`.')
    return mapped(argument(call, 0), call.at, {
      kind: COUNT, effort: 4, apply: x => M.pow(10, asNumber(x) / decade),
      dual: x => exponentialDual(multiplyDual(x, constantDual(M.LN10 / decade))),
    })
  }
}

function toLevel(decade: number): (call: Call) => Term {
  return (call) => {
    const kind = numberKindOf(call, 0)
    const term = argument(call, 0)
    if (kind.point || !isNone(kind.dimension)) throw wrongKind(call, term, 'a ratio', 'Divide by the reference: `level(V/(1 V))`.')
    if (kind.complex) throw wrongKind(call, term, 'a real ratio', 'Take its modulus: `level(abs(z))`.')
    return mapped(term, call.at, {
      kind: LEVEL, effort: 4,
      apply: (x) => {
        const ratio = asNumber(x)
        if (ratio <= 0) throw domainFault(call, 'only a ratio above zero has a level.', 'Take its modulus: `level(abs(x))`.')
        return decade * M.log10(ratio)
      },
      dual: x => multiplyDual(logarithmDual(x), constantDual(decade / M.LN10)),
    })
  }
}

/** The kind of a limit or nominal: as the value's, without what belongs to one number only. */
function ownKind(call: Call): ScalarKind {
  const { kind } = argument(call, 0)
  if (kind.type === 'level') return kind
  if (kind.type !== 'number') throw wrongKind(call, argument(call, 0), 'a single value')
  return kind
}

function limit(side: 'low' | 'high'): (call: Call) => Term {
  return (call) => {
    const kind = ownKind(call)
    const term = argument(call, 0)
    if (kind.type === 'number' && kind.complex) throw wrongKind(call, term, 'a real value', 'Take `abs(x)`, `re(x)` or `im(x)`.')
    const { evaluation } = call.context
    let found: number | undefined
    return {
      kind: kind.type === 'number' ? general(kind) : kind, at: call.at, variables: [], effort: 1,
      run: () => found ??= worstCase(term, evaluation)[side],
    }
  }
}

function checkNominal(call: Call): Term {
  const kind = ownKind(call)
  const term = argument(call, 0)
  const { evaluation } = call.context
  return { kind, at: call.at, variables: [], effort: 1, run: () => evaluation.atNominal(term.variables, term.run) }
}

export const LEVELS: Record<string, Builtin> = {
  ratio: { arity: [1, 1], usage: 'ratio(level)', check: toFactor(20) },
  powerRatio: { arity: [1, 1], usage: 'powerRatio(level)', check: toFactor(10) },
  level: { arity: [1, 1], usage: 'level(ratio)', check: toLevel(20) },
  powerLevel: { arity: [1, 1], usage: 'powerLevel(ratio)', check: toLevel(10) },
  low: { arity: [1, 1], usage: 'low(x)', check: limit('low') },
  high: { arity: [1, 1], usage: 'high(x)', check: limit('high') },
  nominal: { arity: [1, 1], usage: 'nominal(x)', check: checkNominal },
}
