/**
 * Lines of one shape, such as `R_1*C_1 to us` and `R_2*C_2 to us`, are checked and compiled once:
 * the closures read their names from slots that are filled before each run. Only single real values
 * without tolerances take part; everything else is compiled line by line.
 */
import { childrenOf, compileLine } from '../check/line'
import type { Entity } from '../check/scope'
import type { Resolved } from '../check/resolved'
import type { Term } from '../check/term'
import { Fault } from '../fault'
import type { ScalarKind } from '../quantity/kind'
import { parseLine } from '../syntax/parse'
import { constantDual } from '../tolerance/dual'
import { Evaluation } from './evaluation'

export interface Shape {
  readonly kind: ScalarKind
  /** Steps, without those of the values that go in. */
  readonly effort: number
  readonly slots: Float64Array
  /** The slots that are used, in order of first use. */
  readonly uses: readonly number[]
  /** Value in SI units (levels in dB), from what is in the slots. Throws a Fault where there is none. */
  readonly run: () => number
}

const NOWHERE = { from: 0, to: 0 }

/** A kind that a slot can have: a single real value. */
export function fitsSlot(term: Term): term is Term<ScalarKind> {
  const { kind } = term
  return term.variables.length === 0 && (kind.type === 'level' || (kind.type === 'number' && !kind.complex)) && !kind.open
}

/**
 * Compiles the shape of a line.
 * @param names of the slots, in order, with the kind of each
 * @returns undefined where the line has to be compiled by itself: it has an error, a warning, or another kind of result
 */
export function compileShape(source: string, names: ReadonlyMap<string, ScalarKind>): Shape | undefined {
  const slots = new Float64Array(names.size)
  const entities = new Map<string, Entity>([...names].map(([name, kind], i) => [name, slotEntity(slots, i, kind)]))
  let warned = false
  const context = { evaluation: new Evaluation(false), countNode: () => {}, warn: () => { warned = true } }
  try {
    const compiled = compileLine(parseLine(source), { lookup: name => entities.get(name), definedBelow: () => undefined }, context)
    if (warned || compiled.type !== 'value' || !fitsSlot(compiled.term)) return undefined
    const { kind, effort, run } = compiled.term
    const order = [...names.keys()]
    return { kind, effort, slots, uses: usesOf(compiled.tree, order), run: () => run() as number }
  }
  catch (error) {
    if (error instanceof Fault || error instanceof RangeError) return undefined
    throw error
  }
}

function slotEntity(slots: Float64Array, index: number, kind: ScalarKind): Entity {
  const run = () => slots[index] ?? 0
  return { type: 'value', term: { kind, at: NOWHERE, variables: [], effort: 0, run, dual: () => constantDual(run()) } }
}

function usesOf(tree: Resolved, names: readonly string[]): number[] {
  const found: number[] = []
  const visit = (node: Resolved) => {
    const index = node.type === 'name' ? names.indexOf(node.name) : -1
    if (index >= 0 && !found.includes(index)) found.push(index)
    childrenOf(node).forEach(visit)
  }
  visit(tree)
  return found
}
