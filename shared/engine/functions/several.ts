/** Functions of several values of one kind: extremes, sums, means, parallel connection. */
import { describe } from '../check/describe'
import { laplaceBinary } from '../check/laplace'
import { capital, isValues, operand } from '../check/operands'
import { finite, quotient } from '../check/products'
import { agree, levelMismatch, sum, temperatureMisuse } from '../check/sums'
import type { Term, Value } from '../check/term'
import { asComplex, asNumber, isList, mergedVariables, summedEffort } from '../check/term'
import { fault } from '../fault'
import * as C from '../numeric/complex'
import * as M from '../numeric/math'
import type { LevelKind, NumberKind, ScalarKind } from '../quantity/kind'
import { general } from '../quantity/kind'
import type { SourceRange } from '../types'
import { hullDual } from '../tolerance/dual'
import type { Dual } from '../tolerance/dual'
import type { Builtin, Call } from './call'
import { wrongKind } from './call'

/** The kind that all arguments, or the items of a single list, share. */
function commonKind(call: Call): ScalarKind {
  const kinds = call.args.map((term) => {
    if (term.kind.type === 'list' && call.args.length === 1) return term.kind.of
    if (term.kind.type === 'number' || term.kind.type === 'level') return term.kind
    throw wrongKind(call, term, 'values, or one list')
  })
  return sharedKind(kinds, call.at)
}

/** The kind of values that stand side by side in a list, a choice or an extreme. */
export function sharedKind(kinds: readonly ScalarKind[], at: SourceRange): ScalarKind {
  const [first, ...rest] = kinds
  if (!first) throw fault('empty-list', 'A list holds at least one value.', 'Write `[a, b, c]`.', at)
  let shared: ScalarKind = first
  for (const kind of rest) shared = pairKind(shared, kind, at)
  return shared
}

function pairKind(a: ScalarKind, b: ScalarKind, at: SourceRange): ScalarKind {
  if (a.type === 'level' && b.type === 'level') {
    if (a.reference !== b.reference) throw levelMismatch(a, b, 'put side by side', at)
    const open = a.open ?? b.open
    return { ...a, ...(open && { open }) } satisfies LevelKind
  }
  if (a.type === 'level' || b.type === 'level') throw levelMismatch(a, b, 'put side by side', at)
  if (Boolean(a.point) !== Boolean(b.point)) throw temperatureMisuse(at)
  agree(a, b, 'put side by side', at)
  const main = a.zero ? b : a
  const mark = a.mark ?? b.mark
  const open = a.open ?? b.open
  const trace = { parts: a.trace.parts || b.trace.parts, pi: a.trace.pi || b.trace.pi, overPi: a.trace.overPi || b.trace.overPi, lostHertz: a.trace.lostHertz || b.trace.lostHertz, literal: a.trace.literal && b.trace.literal }
  return { ...general(main), complex: a.complex || b.complex, trace, ...(mark && { mark }), ...(open && { open }) } satisfies NumberKind
}

function valuesOf(call: Call): () => readonly Value[] {
  const runs = call.args.map(term => term.run)
  return () => {
    const values = runs.map(run => run())
    const [only] = values
    return values.length === 1 && only !== undefined && isList(only) ? only : values
  }
}

function gathered(call: Call, kind: ScalarKind, apply: (values: readonly Value[]) => Value, dual?: (parts: Dual[]) => Dual): Term {
  const values = valuesOf(call)
  const duals = call.args.map(term => term.dual)
  const allDual = dual && call.args.length > 1 && duals.every(part => part !== undefined)
  return {
    kind, at: call.at, variables: mergedVariables(call.args), effort: summedEffort(call.args) + 8,
    run: () => {
      const list = values()
      if (list.length === 0) throw fault('empty-list', `\`${call.name}\` of an empty list has no value.`, 'The function gave no items here.', call.at)
      return apply(list)
    },
    ...(allDual ? { dual: () => dual(duals.flatMap(part => part ? [part()] : [])) } : {}),
  }
}

function extreme(pick: (...values: number[]) => number): (call: Call) => Term {
  return (call) => {
    const kind = commonKind(call)
    if (kind.type === 'number' && kind.complex) throw fault('complex-order', 'Complex values have no order.', 'Compare their moduli: `abs(x)`.', call.at)
    return gathered(call, kind, values => pick(...values.map(asNumber)), parts => parts.reduce((a, b) => extremeDual(a, b, pick)))
  }
}

function extremeDual(a: Dual, b: Dual, pick: (...values: number[]) => number): Dual {
  const hull = hullDual(a, b)
  return { value: { low: pick(a.value.low, b.value.low), high: pick(a.value.high, b.value.high) }, slopes: hull.slopes }
}

function total(values: readonly Value[], complex: boolean): Value {
  return complex ? values.map(asComplex).reduce(C.add) : values.map(asNumber).reduce((a, b) => a + b)
}

function checkSum(divide: boolean): (call: Call) => Term {
  return (call) => {
    const kind = commonKind(call)
    if (kind.type === 'level') throw fault('level-mismatch', `Levels in dB are not ${divide ? 'averaged' : 'summed'} as a list.`, 'Add the powers: `powerLevel(sum(powerRatio([a, b])))`; levels in series are added with `+`.', call.at)
    if (kind.point) throw temperatureMisuse(call.at)
    return gathered(call, kind, (values) => {
      const all = total(values, kind.complex)
      if (!divide) return all
      return kind.complex ? C.scale(asComplex(all), 1 / values.length) : asNumber(all) / values.length
    })
  }
}

function checkHypot(call: Call): Term {
  const kind = commonKind(call)
  if (kind.type === 'level' || kind.complex || kind.point) throw fault('argument-kind', `\`hypot\` takes real values of one kind, not ${describe(kind)}.`, 'Take `abs(z)` of a complex value.', call.at)
  return gathered(call, kind, values => values.map(value => Math.abs(asNumber(value))).reduce((a, b) => finite(M.hypot(a, b), kind, call.at)))
}

/** Impedances in parallel: 1/(1/a + 1/b + …), for values and for functions of `s`. */
function checkParallel(call: Call): Term {
  const parts = call.args.map(term => operand(term, call.name))
  const one: Term = { kind: { type: 'number', dimension: [0, 0, 0, 0, 0, 0, 0], complex: false, constant: 1, trace: { parts: false, pi: false, overPi: false, lostHertz: false, literal: true } }, at: call.at, variables: [], effort: 1, run: () => 1, dual: () => ({ value: { low: 1, high: 1 }, slopes: [] }) }
  const combine = (operator: '+' | '/', a: Term, b: Term): Term => {
    const [x, y] = [operand(a, call.name), operand(b, call.name)]
    if (!isValues(x) || !isValues(y)) return laplaceBinary(operator, x, y, call.at, call.context)
    return operator === '+' ? sum(x, y, '+', call.at) : quotient(x, y, call.at)
  }
  for (const part of parts) refuseParallelLevel(part, call)
  if (parts.length === 1 && parts[0]?.kind.type === 'list') return parallelList(call, parts[0], parts[0].kind.of)
  const admittance = parts.map(part => combine('/', one, part)).reduce((a, b) => combine('+', a, b))
  return { ...combine('/', one, admittance), at: call.at }
}

function refuseParallelLevel(part: Term, call: Call): void {
  const kind = part.kind.type === 'list' ? part.kind.of : part.kind
  if (kind.type === 'level') throw fault('argument-kind', `${capital(describe(kind))} has no parallel connection.`, 'Give impedances or values.', call.at)
}

function parallelList(call: Call, term: Term, kind: ScalarKind): Term {
  return gathered({ ...call, args: [term] }, kind, (values) => {
    const inverse = (z: C.Complex) => C.reciprocal(z)
    if (kind.type === 'number' && kind.complex) return inverse(values.map(value => inverse(asComplex(value))).reduce(C.add))
    return finite(1 / finite(values.map(value => 1 / asNumber(value)).reduce((a, b) => a + b), kind, call.at), kind, call.at)
  })
}

export const SEVERAL: Record<string, Builtin> = {
  min: { arity: [1, 100], usage: 'min(a, b, …) or min(list)', check: extreme(Math.min) },
  max: { arity: [1, 100], usage: 'max(a, b, …) or max(list)', check: extreme(Math.max) },
  sum: { arity: [1, 100], usage: 'sum(list)', check: checkSum(false) },
  mean: { arity: [1, 100], usage: 'mean(list)', check: checkSum(true) },
  hypot: { arity: [1, 100], usage: 'hypot(a, b, …)', check: checkHypot },
  parallel: { arity: [1, 100], usage: 'parallel(a, b, …)', check: checkParallel },
}
