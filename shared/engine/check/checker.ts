/** A read line is checked and compiled, once, to closures. */
import { fault } from '../fault'
import { findBuiltin, usageOf } from '../functions'
import { LIMITS } from '../limits'
import { NONE } from '../quantity/dimension'
import { PLAIN, number } from '../quantity/kind'
import type { ScalarKind } from '../quantity/kind'
import { sharedKind } from '../functions/several'
import { isFunctionName } from '../syntax/words'
import { constantDual } from '../tolerance/dual'
import type { SourceRange } from '../types'
import { called } from './calls'
import { comparison } from './comparison'
import type { Condition } from './comparison'
import { converted } from './convert'
import { describe } from './describe'
import { isScalar, isValues, operand } from './operands'
import { laplaceBinary, laplaceVariable, negatedLaplace } from './laplace'
import { powerTerm } from './powers'
import { product, quotient } from './products'
import type { Resolved, ResolvedOf } from './resolved'
import { within } from './resolved'
import type { Entity, Scope } from './scope'
import { sum, temperatureMisuse } from './sums'
import type { CheckContext, Term, Value } from './term'
import { isComplexValue, mergedVariables, summedEffort } from './term'
import { unknownName } from './unknown'
import { withUnit } from './units'
import { written } from './writeOut'

const NOTHING = { variables: [], effort: 1 } as const

export class Checker {
  constructor(
    private readonly scope: Scope,
    readonly context: CheckContext,
    private readonly locals: ReadonlyMap<string, Term> = new Map(),
  ) {}

  compile(node: Resolved): Term {
    this.context.countNode()
    switch (node.type) {
      case 'number': return this.literal(node)
      case 'constant': return constantTerm(node)
      case 'variable': return laplaceVariable(node.at)
      case 'name': return this.name(node.name, node.at)
      case 'unit': return withUnit(one(node.at), node.unit, node.at)
      case 'quantity': return withUnit(this.compile(node.number), node.unit, node.at)
      case 'bracket': return { ...this.compile(node.inner), at: node.at }
      case 'list': return this.list(node)
      case 'negate': return this.negate(node)
      case 'binary': return this.binary(node)
      case 'to': return { ...converted(this.compile(node.value), node.unit, node.unitAt, this.context), at: node.at }
      case 'choice': return this.choice(node)
      case 'call': return this.call(node)
      case 'series': return { ...NOTHING, kind: { type: 'series' }, at: node.at, run: () => node.name }
      case 'compare': throw fault('comparison-place', 'A comparison stands alone on its line as a requirement, or as the condition of `? :`.', 'Give the value a line and a name of its own, then compare the name.', node.at)
    }
  }

  private literal(node: ResolvedOf<'number'>): Term {
    const { value, at } = node
    const kind = number(NONE, { constant: value, trace: { ...PLAIN, literal: true }, ...(value === 0 && { zero: true as const }) })
    return { ...NOTHING, kind, at, run: () => value, dual: () => constantDual(value) }
  }

  private entity(name: string, at: SourceRange): Entity {
    const entity = this.scope.lookup(name)
    if (!entity) throw unknownName(name, this.scope, at)
    if (entity.type === 'failed') throw fault('depends-on-error', `\`${name}\` has no value: there is an error in line ${entity.line}.`, `Mend line ${entity.line} first.`, at)
    return entity
  }

  private name(name: string, at: SourceRange): Term {
    const local = this.locals.get(name)
    if (local) return { ...local, at }
    if (isFunctionName(name)) throw fault('bare-function', `\`${name}\` is a function.`, `Write \`${usageOf(name) ?? `${name}(…)`}\`.`, at)
    const entity = this.entity(name, at)
    switch (entity.type) {
      case 'value': return { ...entity.term, at }
      case 'transfer': return { ...entity.term, at, kind: { type: 'transfer', dimension: entity.term.kind.dimension, rational: entity.term.kind.rational } }
      case 'function': return { ...NOTHING, at, kind: { type: 'function', parameters: [...entity.parameters] }, run: () => name }
      case 'failed': throw unknownName(name, this.scope, at)
    }
  }

  private list(node: ResolvedOf<'list'>): Term {
    if (node.items.length > LIMITS.listLength) throw fault('list-length', `A list holds at most ${LIMITS.listLength} items.`, 'Split it up.', node.at)
    const items = node.items.map(item => this.compile(item))
    const kinds = items.map((item): ScalarKind => {
      if (isScalar(item.kind)) return item.kind
      throw fault('list-item', `A list holds single values, not ${describe(item.kind)}.`, 'Write `[a, b, c]`.', item.at)
    })
    const kind = sharedKind(kinds, node.at)
    const runs = items.map(item => item.run)
    return { kind: { type: 'list', of: kind }, at: node.at, variables: mergedVariables(items), effort: summedEffort(items), run: () => runs.map(run => run()) }
  }

  private negate(node: ResolvedOf<'negate'>): Term {
    const inner = this.compile(node.inner)
    const side = operand(inner, written(node.inner))
    if (!isValues(side)) return negatedLaplace(side, node.at)
    if (side.kind.type === 'number' && side.kind.point) throw temperatureMisuse(node.at)
    const minus = this.literal({ type: 'number', value: -1, text: '-1', at: node.at })
    const negated = product({ ...minus, kind: number(NONE, { constant: -1, trace: { ...PLAIN, literal: true } }) }, side, node.at)
    return keepDisplay(negated, side)
  }

  private binary(node: ResolvedOf<'binary'>): Term {
    const { right, operator, at } = node
    if (right.type === 'unit' && (operator === '*') && (right.unit.point || right.unit.level || right.unit.reference)) {
      const left = this.compile(node.left)
      if (left.kind.type === 'number') return withUnit(left, right.unit, at)
    }
    const [a, b] = [operand(this.compile(node.left), written(node.left)), operand(this.compile(right), written(right))]
    if (!isValues(a) || !isValues(b)) return laplaceBinary(operator, a, b, at, this.context)
    refuseListProduct(node, a, b)
    switch (operator) {
      case '+': case '-': return sum(a, b, operator, at)
      case '*': case '.*': return product(a, b, at)
      case '/': case './': return quotient(a, b, at)
      case '^': case '.^': return powerTerm(a, b, at)
    }
  }

  /** A comparison as a condition, or the parts of a requirement. */
  condition(node: Resolved): Condition {
    const inner = within(node)
    if (inner.type !== 'compare') throw fault('condition', 'The condition of `? :` is a comparison.', 'Write `x > 0 ? a : b`.', node.at)
    return comparison(inner, side => this.compile(side))
  }

  private choice(node: ResolvedOf<'choice'>): Term {
    const condition = this.condition(node.condition)
    const [yes, no] = [this.compile(node.yes), this.compile(node.no)]
    if (!isScalar(yes.kind) || !isScalar(no.kind)) throw fault('choice-kind', 'Both ways of a choice are single values.', 'Choose between numbers, quantities or levels.', node.at)
    const kind = sharedKind([yes.kind, no.kind], node.at)
    const complex = kind.type === 'number' && kind.complex
    const pick = () => condition.holds() ? yes.run() : no.run()
    const terms = [...condition.terms, yes, no]
    return {
      kind, at: node.at, variables: mergedVariables(terms), effort: summedEffort(terms),
      run: complex ? () => complexOf(pick()) : pick,
    }
  }

  private call(node: ResolvedOf<'call'>): Term {
    const { name, at } = node
    if (name === 'between') throw fault('between-place', '`between` stands at the top of a definition.', 'Write `name = between(nominal, low, high)` on a line of its own.', at)
    const builtin = findBuiltin(name)
    if (builtin) {
      const [fewest, most] = builtin.arity
      if (node.args.length < fewest || node.args.length > most) throw wrongCount(node, builtin.usage)
      const args = node.args.map(arg => this.compile(arg))
      return { ...builtin.check({ name, args, at, context: this.context }), at }
    }
    if (this.locals.has(name)) throw notFunction(node)
    const entity = this.entity(name, node.nameAt)
    if (entity.type === 'value' || entity.type === 'failed') throw notFunction(node)
    return { ...called(node, entity, node.args.map(arg => this.compile(arg)), this.context), at }
  }
}

function one(at: SourceRange): Term {
  return { ...NOTHING, kind: number(NONE, { constant: 1, trace: { ...PLAIN, literal: true } }), at, run: () => 1, dual: () => constantDual(1) }
}

const PI = 3.141592653589793
const EULER = 2.718281828459045

function constantTerm(node: ResolvedOf<'constant'>): Term {
  const { at } = node
  if (node.name === 'i') return { ...NOTHING, kind: number(NONE, { complex: true }), at, run: () => ({ re: 0, im: 1 }) }
  const value = node.name === 'pi' ? PI : EULER
  return { ...NOTHING, kind: number(NONE, { constant: value, trace: { ...PLAIN, pi: node.name === 'pi' } }), at, run: () => value, dual: () => constantDual(value) }
}

function complexOf(value: Value): Value {
  return isComplexValue(value) || typeof value !== 'number' ? value : { re: value, im: 0 }
}

/** A sign in front changes nothing of how a value is shown. */
function keepDisplay(term: Term, like: Term): Term {
  if (term.kind.type !== 'number' || like.kind.type !== 'number') return term
  const { display, angle, zero } = like.kind
  return { ...term, kind: { ...term.kind, ...(display && { display }), ...(angle && { angle }), ...(zero && { zero }) } }
}

function refuseListProduct(node: ResolvedOf<'binary'>, a: Term, b: Term): void {
  if (a.kind.type !== 'list' || b.kind.type !== 'list') return
  const { operator } = node
  if (operator !== '*' && operator !== '/' && operator !== '^') return
  throw fault('list-product', `Between two lists \`${operator}\` can be read in two ways.`, `Write \`${written(node.left)} .${operator} ${written(node.right)}\` for item by item, or \`sum(${written(node.left)} .* ${written(node.right)})\` for the sum of products.`, node.at)
}

function wrongCount(node: ResolvedOf<'call'>, usage: string) {
  const comma = node.args.some((arg, i) => arg.type === 'number' && i + 1 < node.args.length && ['number', 'quantity'].includes(node.args[i + 1]?.type ?? ''))
  const hint = comma ? `Write \`${usage}\`. Decimals are written with a point, not with a comma.` : `Write \`${usage}\`.`
  return fault('argument-count', `\`${node.name}\` does not take ${node.args.length} ${node.args.length === 1 ? 'argument' : 'arguments'}.`, hint, node.at)
}

function notFunction(node: ResolvedOf<'call'>) {
  return fault('not-a-function', `\`${node.name}\` is a value, not a function.`, `Write \`${node.name}*(${node.args.map(written).join(', ')})\` for a product.`, node.at)
}
