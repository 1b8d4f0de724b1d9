/** The part of a result that is recorded: SI values, bounds, verdicts, status; no display digits. */
import type { Bounds, LineResult, RequirementResult, ResultValue, SheetResult } from '../types'

export type Json = null | boolean | number | string | Json[] | { [key: string]: Json }

/** Plain data in a fixed order, to be canonicalised and hashed. */
export function recordedResults(result: SheetResult): Json {
  return { lines: result.lines.map(recordedLine) }
}

function recordedLine(line: LineResult): Json {
  return {
    id: line.id,
    status: line.status,
    kind: line.kind,
    problems: line.problems.map(problem => problem.code),
    ...(line.defines === undefined ? {} : { defines: line.defines }),
    uses: [...line.uses],
    ...(line.value ? { value: recordedValue(line.value) } : {}),
    ...(line.requirement ? { requirement: recordedRequirement(line.requirement) } : {}),
  }
}

function recordedValue(value: ResultValue): Json {
  switch (value.type) {
    case 'number': return { type: 'number', si: value.si, dimension: [...value.dimension], ...markOf(value.mark), ...boundsOf(value.bounds) }
    case 'complex': return { type: 'complex', re: value.re, im: value.im, dimension: [...value.dimension], ...markOf(value.mark) }
    case 'level': return { type: 'level', db: value.db, ...(value.reference ? { reference: value.reference } : {}), ...boundsOf(value.bounds) }
    case 'list': return { type: 'list', items: value.items.map(recordedValue) }
    case 'text': return { type: 'text', text: value.text }
    case 'unbounded': return { type: 'unbounded' }
    case 'transfer': return { type: 'transfer', rational: value.rational, dimension: [...value.dimension], ...(value.order === undefined ? {} : { order: value.order }) }
    case 'function': return { type: 'function', parameters: [...value.parameters] }
  }
}

function markOf(mark: string | undefined): { mark?: string } {
  return mark === undefined ? {} : { mark }
}

function boundsOf(bounds: Bounds | undefined): { bounds?: Json } {
  return bounds ? { bounds: { low: limit(bounds.low), high: limit(bounds.high), method: bounds.method } } : {}
}

function recordedRequirement(requirement: RequirementResult): Json {
  return {
    verdict: requirement.verdict,
    margin: limit(requirement.marginSi),
    nominalMargin: limit(requirement.nominalMarginSi),
    untoleranced: [...requirement.untoleranced],
  }
}

/** An unbounded margin is stored as text (L12). */
function limit(value: number): Json {
  return Math.abs(value) === Number.MAX_VALUE ? 'unbounded' : value
}
