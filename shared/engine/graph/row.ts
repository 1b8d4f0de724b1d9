/** One line of the sheet between two evaluations: what was computed, from what, and the result as it is handed out. */
import { resolve } from '../check/resolve'
import type { Entity, Scope } from '../check/scope'
import { Fault } from '../fault'
import type { ScalarKind } from '../quantity/kind'
import { parseLine } from '../syntax/parse'
import { constantDual } from '../tolerance/dual'
import type { LineResult, ResultValue } from '../types'
import { typesetOf } from './finish'
import { resultLatex, scalarResult } from './result'
import type { Shape } from './shape'

export interface Row {
  readonly id: string
  source: string
  /** What the line would define, also where it cannot be read. */
  readonly name: string | undefined
  /** Its place, from 1. */
  line: number
  /** A higher number whenever the value may have changed. */
  version: number
  readonly digits: number
  /** Made when it is asked for; the same object while nothing changes. */
  result: LineResult | undefined
  entity: Entity | undefined
  /** Kind and value (SI; levels in dB), if that is a single real one without a tolerance. */
  readonly kind: ScalarKind | undefined
  value: number
  /** Of a line compiled by itself: what each of its words meant, and whether its own name was free. */
  readonly context: string
  /** Of a line that shares its shape with others. */
  shape: Shape | undefined
  /** Whose values go into the shape's slots, and by which names. */
  readonly suppliers: readonly Row[]
  names: readonly string[]
  /** The SI value of a number with its unit. */
  literal: number | undefined
}

/** A row that shares its shape. */
export type QuickRow = Row & { shape: Shape }

export function isQuick(row: Row): row is QuickRow {
  return row.shape !== undefined
}

const NOWHERE = { from: 0, to: 0 }

/** Fills the slots and runs; false where there is no value, and the line has to say why in full. */
export function ran(row: QuickRow): boolean {
  if (row.literal !== undefined) {
    row.value = row.literal
    return true
  }
  const { suppliers, shape: { slots, run } } = row
  for (let i = 0; i < suppliers.length; i += 1) slots[i] = suppliers[i]?.value ?? 0
  try {
    row.value = run()
    return true
  }
  catch (error) {
    if (error instanceof Fault) return false
    throw error
  }
}

/** What the name of the row's line means to lines that are compiled by themselves; made when one asks. */
export function entityOf(row: Row | undefined): Entity | undefined {
  if (row && !row.entity && isQuick(row)) row.entity = quickEntity(row)
  return row?.entity
}

function quickEntity(row: QuickRow): Entity {
  const { kind, effort } = row.shape
  return { type: 'value', term: { kind, at: NOWHERE, variables: [], effort: effort + row.suppliers.length, run: () => row.value, dual: () => constantDual(row.value) } }
}

/**
 * A result whose figures are written and typeset when somebody looks at them. What goes into it is read
 * then: a result is to be looked at before the next edit, or not at all.
 */
export function quickResult(row: QuickRow): LineResult {
  const { digits, shape, names, value: si } = row
  let value: ResultValue | undefined
  let typeset: LineResult['typeset'] | undefined
  return {
    id: row.id, status: 'ok', kind: 'value', problems: [],
    uses: shape.uses.map(slot => names[slot] ?? ''),
    defines: row.name,
    get value() { return value ??= scalarResult(si, shape.kind, digits, undefined) },
    get typeset() { return typeset ??= typesetQuick(row, this.value) },
  }
}

function scopeOf({ names, suppliers }: QuickRow): Scope {
  return {
    lookup: (name) => {
      const supplier = suppliers[names.indexOf(name)]
      return supplier?.kind && { type: 'value', term: { kind: supplier.kind, at: NOWHERE, variables: [], effort: 1, run: () => supplier.value } }
    },
    definedBelow: () => undefined,
  }
}

function typesetQuick(row: QuickRow, value: ResultValue | undefined): LineResult['typeset'] {
  const parsed = parseLine(row.source)
  if (!parsed.body) return {}
  const scope = scopeOf(row)
  const tree = resolve(parsed.body, { isName: word => scope.lookup(word) !== undefined, laplace: false })
  return typesetOf({ scope, digits: row.digits }, parsed, tree, value && resultLatex(value))
}
