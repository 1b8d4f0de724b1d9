import type { LineResult, ResultValue, SheetResult } from '../engine/types'
import { hashOf } from './canonical'
import { tickableRows, type TickableRow } from './lines'
import type { SheetDocument } from './types'

/**
 * The hash that a tick belongs to. For a line: what is typed, its kind, its direct inputs, its own value and verdict;
 * for other blocks the canonical block and the inputs it rests on. Values are rounded to 12 significant digits.
 */

export interface RowHash { lineId: string, kind: 'line' | 'block', order: number, hash: string }

/** Twelve significant digits: what a checker could see change, without the last bits of float64. */
const rounded = (value: number): number | string => (Number.isFinite(value) ? Number(value.toPrecision(12)) : String(value))

function valueIngredients(value: ResultValue): unknown {
  switch (value.type) {
    case 'number': return { si: rounded(value.si), dimension: value.dimension, ...(value.bounds ? { low: rounded(value.bounds.low), high: rounded(value.bounds.high) } : {}) }
    case 'complex': return { re: rounded(value.re), im: rounded(value.im), dimension: value.dimension }
    case 'list': return value.items.map(valueIngredients)
    case 'text': return value.text
    case 'level': return { db: rounded(value.db), ...(value.bounds ? { low: rounded(value.bounds.low), high: rounded(value.bounds.high) } : {}) }
    case 'unbounded': return 'unbounded'
    case 'transfer': return { dimension: value.dimension, order: value.order ?? null }
    case 'function': return { parameters: value.parameters }
  }
}

/** A name stands for its value; a function or a transfer function has none, so its whole line does, and through it what that rests on. */
function inputIngredients(name: string, defined: ReadonlyMap<string, DefinedLine>): unknown {
  const line = defined.get(name)
  if (!line) return null
  const { result } = line
  if (result.status === 'error' || !result.value) return { error: true }
  return result.value.type === 'transfer' || result.value.type === 'function' ? { line: line.hash } : valueIngredients(result.value)
}

interface DefinedLine { result: LineResult, hash: string }

function lineHash(row: Extract<TickableRow, { kind: 'line' }>, result: LineResult | undefined, defined: ReadonlyMap<string, DefinedLine>): string {
  const { source, reference, status } = row.line
  const uses = result?.uses ?? []
  return hashOf({
    source, reference, status,
    kind: result?.kind ?? 'empty',
    inputs: Object.fromEntries(uses.map(name => [name, inputIngredients(name, defined)])),
    value: result?.value ? valueIngredients(result.value) : null,
    verdict: result?.requirement ? { verdict: result.requirement.verdict, margin: rounded(result.requirement.marginSi) } : null,
    failed: result?.status === 'error',
  })
}

const NAME = /[\p{L}_][\p{L}\p{N}_]*/gu

function blockHash(row: Extract<TickableRow, { kind: 'block' }>, defined: ReadonlyMap<string, DefinedLine>): string {
  const { block } = row
  const typed = block.type === 'response' ? [block.attrs.transfer, block.attrs.from, block.attrs.to, block.attrs.duration, block.attrs.supply, block.attrs.rating] : []
  const names = [...new Set(typed.flatMap(text => text.match(NAME) ?? []))].filter(name => defined.has(name)).sort()
  return hashOf({ block, inputs: Object.fromEntries(names.map(name => [name, inputIngredients(name, defined)])) })
}

/** Hashes of all that is to be ticked, in reading order. */
export function rowHashes(document: SheetDocument, results: SheetResult): RowHash[] {
  const byId = new Map(results.lines.map(line => [line.id, line]))
  const defined = new Map<string, DefinedLine>()
  return tickableRows(document).map((row, order): RowHash => {
    if (row.kind === 'block') return { lineId: row.id, kind: 'block', order, hash: blockHash(row, defined) }
    const result = byId.get(row.id)
    const hash = lineHash(row, result, defined)
    if (result?.defines) defined.set(result.defines, { result, hash })
    return { lineId: row.id, kind: 'line', order, hash }
  })
}
