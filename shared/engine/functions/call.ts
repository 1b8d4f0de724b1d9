/** What a built-in function is given, and the checks that many of them share. */
import { describe } from '../check/describe'
import { capital } from '../check/operands'
import type { CheckContext, Term, Value } from '../check/term'
import { asNumber, isList, mergedVariables, summedEffort } from '../check/term'
import { fault } from '../fault'
import { isNone } from '../quantity/dimension'
import type { Kind, LaplaceKind, LevelKind, NumberKind, ScalarKind, TransferKind } from '../quantity/kind'
import type { Dual } from '../tolerance/dual'
import type { SourceRange } from '../types'

export interface Call {
  name: string
  args: readonly Term[]
  at: SourceRange
  context: CheckContext
}

export interface Builtin {
  /** Fewest and most arguments. */
  arity: readonly [number, number]
  usage: string
  check: (call: Call) => Term
}

export function argument(call: Call, index: number): Term {
  const term = call.args[index]
  if (!term) throw fault('argument-count', `\`${call.name}\` lacks an argument.`, undefined, call.at)
  return term
}

export function hasKind<T extends Kind['type']>(term: Term, type: T): term is Term<Extract<Kind, { type: T }>> {
  return term.kind.type === type
}

export function wrongKind(call: Call, term: Term, wanted: string, hint?: string) {
  return fault('argument-kind', `\`${call.name}\` takes ${wanted}, not ${describe(term.kind)}.`, hint, term.at)
}

/** A real or complex number, without list or level. */
export function numberArgument(call: Call, index: number): Term<NumberKind> {
  const term = argument(call, index)
  if (!hasKind(term, 'number')) throw wrongKind(call, term, 'a number', term.kind.type === 'level' ? 'Turn the level into a factor with `ratio(x)`.' : undefined)
  return term
}

export function realArgument(call: Call, index: number): Term<NumberKind> {
  const term = numberArgument(call, index)
  if (term.kind.complex) throw wrongKind(call, term, 'a real value', 'Take `abs(x)`, `re(x)` or `im(x)`.')
  return term
}

export function plainArgument(call: Call, index: number): Term<NumberKind> {
  const term = realArgument(call, index)
  if (term.kind.point || !isNone(term.kind.dimension)) throw wrongKind(call, term, 'a plain number', 'Divide it by a value of the same unit.')
  return term
}

export function levelArgument(call: Call, index: number): Term<LevelKind> {
  const term = argument(call, index)
  if (!hasKind(term, 'level') || term.kind.reference) throw wrongKind(call, term, 'a level in dB', 'Write the unit: `3 dB`.')
  return term
}

/** A transfer function by its name. */
export function transferArgument(call: Call, index: number): Term<TransferKind> {
  const term = argument(call, index)
  if (!hasKind(term, 'transfer')) {
    const hint = term.kind.type === 'laplace' ? 'Define it on a line of its own, `H(s) = …`, and give its name.' : 'Define one with `H(s) = …` and give its name: `gain(H, 1 kHz)`.'
    throw wrongKind(call, term, 'the name of a transfer function', hint)
  }
  return term
}

export function laplaceArgument(term: Term): term is Term<LaplaceKind> {
  return term.kind.type === 'laplace'
}

interface Unary {
  kind: ScalarKind
  apply: (x: Value) => Value
  dual?: (x: Dual) => Dual
  effort?: number
}

/** Elements of a list argument get the function one by one. */
export function mapped(term: Term, at: SourceRange, { kind, apply, dual, effort }: Unary): Term {
  const base = { at, variables: term.variables, effort: term.effort + (effort ?? 2) }
  const { run } = term
  if (term.kind.type === 'list') {
    return { ...base, kind: { type: 'list', of: kind }, run: () => mapValue(run(), apply) }
  }
  const inner = term.dual
  return { ...base, kind, run: () => apply(run()), ...(dual && inner ? { dual: () => dual(inner()) } : {}) }
}

export function mapValue(value: Value, apply: (x: Value) => Value): Value {
  return isList(value) ? value.map(apply) : apply(value)
}

/** The scalar kind of an argument, looking into a list. */
export function scalarOf(call: Call, index: number): ScalarKind {
  const { kind } = argument(call, index)
  if (kind.type === 'list') return kind.of
  if (kind.type === 'number' || kind.type === 'level') return kind
  throw wrongKind(call, argument(call, index), 'a number')
}

export function numberKindOf(call: Call, index: number): NumberKind {
  const kind = scalarOf(call, index)
  if (kind.type === 'number') return kind
  throw wrongKind(call, argument(call, index), 'a number', 'Turn the level into a factor with `ratio(x)` or `powerRatio(x)`.')
}

/** A value computed from several real scalars. */
export function computed(call: Call, kind: Kind, effort: number, apply: (values: number[]) => Value): Term {
  const runs = call.args.map(term => term.run)
  return {
    kind, at: call.at, variables: mergedVariables(call.args), effort: summedEffort(call.args) + effort,
    run: () => apply(runs.map(run => asNumber(run()))),
  }
}

export function domainFault(call: Call, message: string, hint?: string) {
  return fault('real-domain', capital(message), hint, call.at)
}
