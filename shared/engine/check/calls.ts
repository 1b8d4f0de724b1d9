/** Calls of functions that the sheet defines: transfer functions and ordinary ones. */
import { Fault, fault } from '../fault'
import { FREQUENCY, isNone, sameDimension } from '../quantity/dimension'
import type { LaplaceKind, NumberKind } from '../quantity/kind'
import { number } from '../quantity/kind'
import { evaluateRational } from '../transfer'
import type { SourceRange } from '../types'
import { describe } from './describe'
import { composed, functionOf } from './laplace'
import { isLaplace } from './operands'
import { finiteComplex } from './products'
import type { ResolvedOf } from './resolved'
import type { Entity } from './scope'
import type { CheckContext, Term, Value } from './term'
import { asComplex, isList, mergedVariables } from './term'
import { written } from './writeOut'

type Callable = Extract<Entity, { type: 'transfer' | 'function' }>

export function called(node: ResolvedOf<'call'>, entity: Callable, args: readonly Term[], context: CheckContext): Term {
  if (entity.type === 'transfer') return transferAt(node, entity.term, args)
  if (args.length !== entity.parameters.length) {
    throw fault('argument-count', `\`${node.name}\` takes ${entity.parameters.length} ${entity.parameters.length === 1 ? 'argument' : 'arguments'}, not ${args.length}.`, `Write \`${node.name}(${entity.parameters.join(', ')})\`.`, node.at)
  }
  try {
    return entity.instantiate(args, node.at, context)
  }
  catch (error) {
    throw inside(error, node)
  }
}

/** A fault within the body of a function stands at the call: the body itself is in order. */
function inside(error: unknown, node: ResolvedOf<'call'>): unknown {
  if (!(error instanceof Fault) || error.problem.code === 'too-much-work') return error
  const call = `${node.name}(${node.args.map(written).join(', ')})`
  const { message, code, hint } = error.problem
  return fault(code, message.startsWith('In `') ? message : `In \`${call}\`: ${message}`, hint, node.at)
}

function transferAt(node: ResolvedOf<'call'>, transfer: Term<LaplaceKind>, args: readonly Term[]): Term {
  const [arg] = args
  if (!arg || args.length !== 1) throw fault('argument-count', `\`${node.name}\` is a transfer function and takes one argument.`, `Write \`${node.name}(s)\` inside another transfer function, or \`${node.name}(2*pi*i*f)\` for its value.`, node.at)
  if (isLaplace(arg)) {
    if (!sameDimension(arg.kind.dimension, FREQUENCY)) throw wrongVariable(node, arg)
    return composed(transfer, arg, { type: 'laplace', dimension: transfer.kind.dimension, rational: transfer.kind.rational && arg.kind.rational, monomial: false }, node.at)
  }
  const kind = arg.kind.type === 'list' ? arg.kind.of : arg.kind
  if (kind.type !== 'number' || kind.point) throw wrongVariable(node, arg)
  refuseHertz(node, kind, arg.at)
  if (!kind.zero && !sameDimension(kind.dimension, FREQUENCY)) throw wrongVariable(node, arg)
  return valueAt(node, transfer, arg, kind)
}

function wrongVariable(node: ResolvedOf<'call'>, arg: Term) {
  const plain = 'dimension' in arg.kind && isNone(arg.kind.dimension)
  const hint = plain
    ? `Define the normalised function with a parameter of another name, \`${node.name}(p) = …\`, then \`${node.name}(s/w_0)\` can be formed.`
    : `Write \`${node.name}(s)\`, or \`${node.name}(2*pi*i*f)\` for its value at a frequency.`
  return fault('laplace-argument', `\`${node.name}\` takes \`s\`, which is in 1/s, not ${describe(arg.kind)}.`, hint, arg.at)
}

function refuseHertz(node: ResolvedOf<'call'>, kind: NumberKind, at: SourceRange): void {
  if (kind.mark !== 'Hz') return
  throw fault('laplace-hertz', `\`${node.name}\` takes \`s\` in 1/s; a value in Hz lacks its 2π.`, `Write \`${node.name}(2*pi*i*f)\`, or \`gain(${node.name}, f)\` and \`phase(${node.name}, f)\`.`, at)
}

function valueAt(node: ResolvedOf<'call'>, transfer: Term<LaplaceKind>, arg: Term, kind: NumberKind): Term {
  const { rational } = transfer
  const f = functionOf(transfer)
  const real = rational !== undefined && !kind.complex
  const at = (value: Value): Value => {
    const s = asComplex(value)
    const result = finiteComplex(rational ? evaluateRational(rational(), s.re, s.im) : f(s), node.at)
    return real ? result.re : result
  }
  const result = number(transfer.kind.dimension, { complex: !real })
  const { run } = arg
  const base = { at: node.at, variables: mergedVariables([transfer, arg]), effort: transfer.effort + arg.effort + 40 }
  if (arg.kind.type !== 'list') return { ...base, kind: result, run: () => at(run()) }
  return { ...base, kind: { type: 'list', of: result }, run: () => mapList(run(), at) }
}

function mapList(value: Value, apply: (x: Value) => Value): Value {
  return isList(value) ? value.map(apply) : apply(value)
}
