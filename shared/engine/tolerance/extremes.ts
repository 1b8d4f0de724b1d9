/** Worst case over tolerances, temperature, ageing and batches together. */
import { asNumber } from '../check/term'
import { Fault, fault } from '../fault'
import type { Variable } from '../graph/evaluation'
import { worstCase } from './bounds'
import type { WorstCase } from './bounds'
import { limitsAt } from './parts'
import type { Model } from './parts'
import { searchExtremes } from './search'
import type { Subject } from './subject'

/**
 * One coordinate a batch, from all parts at their lower limits to all at their upper ones, and one
 * for the temperature; within a part its tolerance, coefficient and ageing are at their worst together.
 */
export function extremesOf(subject: Subject, model: Model): WorstCase {
  const { term, evaluation } = subject
  evaluation.startLine()
  if (model.plain) {
    const found = worstCase(term, evaluation)
    if (found.method === 'proved') return found
    return widest(found, searched(subject, model))
  }
  return searched(subject, model)
}

function widest(a: WorstCase, b: WorstCase): WorstCase {
  return { low: Math.min(a.low, b.low), high: Math.max(a.high, b.high), method: 'searched' }
}

function searched(subject: Subject, model: Model): WorstCase {
  const { term, evaluation } = subject
  const count = model.batches + (model.warm ? 1 : 0)
  const centre = Array.from({ length: count }, () => 0.5)
  const evaluate = (position: readonly number[]) => {
    evaluation.spend(term.effort)
    return evaluation.atPoint(model.variables, valuesAt(model, position), () => definedValue(subject))
  }
  const found = searchExtremes({ variables: centre.map((_, i) => coordinate(i)), open: centre.map((_, i) => i), lowBase: centre, highBase: centre, evaluate, effort: term.effort, thorough: term.effort * count < COSTLY })
  const nominal = asNumber(term.run())
  return { low: Math.min(found.low, nominal), high: Math.max(found.high, nominal), method: 'searched' }
}

/** Steps of one evaluation, times the coordinates, from which a thorough search would meet the bound on steps. */
const COSTLY = 5000

function coordinate(index: number): Variable {
  return { name: `position ${index}`, nominal: 0.5, low: 0, high: 1, now: 0.5, index: -1 }
}

function valuesAt(model: Model, position: readonly number[]): number[] {
  const warmth = model.warm ? position[model.batches] ?? 0 : 0
  const rise = model.rise.low + (model.rise.high - model.rise.low) * warmth
  return model.parts.map((part) => {
    const { low, high } = limitsAt(part, rise)
    const t = position[part.batch] ?? 0.5
    return t === 0 ? low : t === 1 ? high : low + (high - low) * t
  })
}

function definedValue({ term }: Subject): number {
  try {
    return asNumber(term.run())
  }
  catch (error) {
    if (!(error instanceof Fault)) throw error
    throw fault('undefined-within-tolerance', `Within the limits this has no value everywhere: ${error.problem.message}`, error.problem.hint ?? 'Narrow the tolerances, or take it at the nominal values with `nominal(x)`.', error.problem.at)
  }
}
