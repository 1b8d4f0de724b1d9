/** One line, read and compiled: what it is, and what it means to the lines below. */
import { fault } from '../fault'
import { number } from '../quantity/kind'
import type { LaplaceKind } from '../quantity/kind'
import type { Definition, Node, ParsedLine } from '../syntax/node'
import { bare } from '../syntax/node'
import type { SourceRange } from '../types'
import { Checker } from './checker'
import type { Condition } from './comparison'
import { converted } from './convert'
import { describe } from './describe'
import { rationalOf } from './laplace'
import { capital, isLaplace } from './operands'
import { memoised } from './memo'
import { readUnit } from './readUnit'
import { resolve } from './resolve'
import type { Resolved } from './resolved'
import { within } from './resolved'
import type { Entity, Scope } from './scope'
import type { CheckContext, Term } from './term'
import { betweenLimits, withTolerance } from './tolerance'
import { unknownName } from './unknown'
import { findBuiltin } from '../functions'

export type CompiledLine =
  | { type: 'value', term: Term, tree: Resolved, tolerance?: Resolved }
  | { type: 'transfer', term: Term<LaplaceKind>, tree: Resolved }
  | { type: 'function', entity: Extract<Entity, { type: 'function' }>, tree: Resolved }
  | { type: 'requirement', condition: Condition, tree: Resolved }

/** Compiles a line that has a body. Throws a Fault where it has no meaning. */
export function compileLine(line: ParsedLine, scope: Scope, context: CheckContext): CompiledLine {
  const { define, body } = line
  if (!body) throw new Error('an empty line has nothing to compile')
  if (define?.parameters) {
    const [first] = define.parameters
    return first?.name === 's' ? compileTransfer(body, scope, context) : compileFunction(define, body, scope, context)
  }
  const tree = resolve(body, readingOf(scope))
  if (within(tree).type === 'compare') return compileRequirement(tree, define, scope, context)
  const term = line.tolerance ? compileTolerance(line, line.tolerance, tree, scope, context) : compileValue(tree, define, scope, context)
  refuseValueless(term)
  const result = { type: 'value' as const, term: memoised(term, context.evaluation), tree }
  return line.tolerance ? { ...result, tolerance: resolve(line.tolerance, readingOf(scope)) } : result
}

function readingOf(scope: Scope, parameters: readonly string[] = []) {
  return { isName: (word: string) => parameters.includes(word) || scope.lookup(word) !== undefined, laplace: false }
}

function compileRequirement(tree: Resolved, define: Definition | undefined, scope: Scope, context: CheckContext): CompiledLine {
  if (define) throw fault('comparison-place', 'A comparison has no value that could be given a name.', `Leave out \`${define.name} =\`, or write a choice: \`${define.name} = condition ? a : b\`.`, define.at)
  return { type: 'requirement', condition: new Checker(scope, context).condition(tree), tree }
}

function compileValue(tree: Resolved, define: Definition | undefined, scope: Scope, context: CheckContext): Term {
  const checker = new Checker(scope, context)
  const top = within(tree)
  const call = top.type === 'to' ? within(top.value) : top
  if (call.type !== 'call' || call.name !== 'between') return checker.compile(tree)
  const [nominal, low, high] = call.args.map(arg => checker.compile(arg))
  if (!nominal || !low || !high || call.args.length !== 3) throw fault('argument-count', '`between` takes a nominal value and two limits.', 'Write `between(nominal, low, high)`.', call.at)
  const term = betweenLimits(define?.name ?? 'this value', [nominal, low, high], call.at)
  return top.type === 'to' ? converted(term, top.unit, top.unitAt, context) : term
}

function compileTolerance(line: ParsedLine, tolerance: Node, tree: Resolved, scope: Scope, context: CheckContext): Term {
  const checker = new Checker(scope, context)
  const extent = checker.compile(resolve(tolerance, readingOf(scope)))
  const term = withTolerance(line.define?.name ?? 'this value', checker.compile(tree), extent, tree.at)
  const unit = line.toleranceUnit
  return unit ? converted(term, readUnit(unit, { at: unit.at, value: bare(tolerance) }), unit.at, context) : term
}

function refuseValueless(term: Term): void {
  const { kind } = term
  if (kind.type === 'number' || kind.type === 'level' || kind.type === 'list' || kind.type === 'text') return
  if (kind.type === 'transfer') throw fault('bare-transfer', 'A transfer function is given no second name.', 'Write `G(s) = H(s)`.', term.at)
  throw fault('no-value', `${capital(describe(kind))} has no value of its own.`, kind.type === 'function' ? 'Call it with values.' : 'It stands as an argument only.', term.at)
}

/** `H(s) = …`; a constant is a transfer function too. */
function compileTransfer(body: Node, scope: Scope, context: CheckContext): CompiledLine {
  const tree = resolve(body, { isName: word => scope.lookup(word) !== undefined, laplace: true })
  const checked = new Checker(scope, context).compile(tree)
  return { type: 'transfer', term: memoised(asLaplace(checked), context.evaluation), tree }
}

function asLaplace(term: Term): Term<LaplaceKind> {
  if (isLaplace(term)) return term
  const { kind } = term
  if (kind.type !== 'number' || kind.point) throw fault('transfer-kind', `A transfer function is a function of \`s\`, not ${describe(kind)}.`, 'Write a ratio of polynomials in `s`, such as `1/(1 + s*R*C)`.', term.at)
  const laplace: LaplaceKind = { type: 'laplace', dimension: kind.dimension, rational: !kind.complex, monomial: true }
  const { run } = term
  return {
    kind: laplace, at: term.at, variables: term.variables, effort: term.effort, run,
    ...(laplace.rational ? { rational: rationalOf(term) } : {}),
    atS: () => {
      const value = run()
      return typeof value === 'object' && 're' in value ? value : { re: Number(value), im: 0 }
    },
  }
}

/** `f(x, …) = …`: checked anew at each call, with the kinds of its arguments. */
function compileFunction(define: Definition, body: Node, scope: Scope, context: CheckContext): CompiledLine {
  const parameters = define.parameters?.map(parameter => parameter.name) ?? []
  const tree = resolve(body, readingOf(scope, parameters))
  if (within(tree).type === 'compare') throw fault('comparison-place', 'A function gives a value, not a comparison.', 'Write the comparison as a requirement on a line of its own.', body.at)
  checkWords(tree, parameters, scope)
  const instantiate = (args: readonly Term[], at: SourceRange, calling: CheckContext): Term => {
    const locals = new Map(parameters.map((name, i) => [name, memoised(args[i] ?? missing(at), calling.evaluation)]))
    return memoised(new Checker(scope, calling, locals).compile(tree), calling.evaluation)
  }
  context.countNode()
  return { type: 'function', entity: { type: 'function', parameters, instantiate }, tree }
}

function missing(at: SourceRange): Term {
  return { kind: number([0, 0, 0, 0, 0, 0, 0]), at, variables: [], effort: 1, run: () => NaN }
}

/** Without arguments the kinds are open, but unknown words can be told already. */
function checkWords(node: Resolved, parameters: readonly string[], scope: Scope): void {
  if (node.type === 'name' && !parameters.includes(node.name)) requireKnown(node.name, scope, node.at)
  if (node.type === 'call' && !findBuiltin(node.name) && !parameters.includes(node.name)) requireKnown(node.name, scope, node.nameAt)
  for (const child of childrenOf(node)) checkWords(child, parameters, scope)
}

function requireKnown(name: string, scope: Scope, at: SourceRange): void {
  const entity = scope.lookup(name)
  if (!entity) throw unknownName(name, scope, at)
  if (entity.type === 'failed') throw fault('depends-on-error', `\`${name}\` has no value: there is an error in line ${entity.line}.`, `Mend line ${entity.line} first.`, at)
}

export function childrenOf(node: Resolved): Resolved[] {
  switch (node.type) {
    case 'bracket': case 'negate': return [node.inner]
    case 'binary': return [node.left, node.right]
    case 'list': return node.items
    case 'call': return node.args
    case 'compare': return node.sides
    case 'choice': return [node.condition, node.yes, node.no]
    case 'to': return [node.value]
    case 'quantity': return [node.number]
    default: return []
  }
}
