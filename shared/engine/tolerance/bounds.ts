/** L6: worst-case bounds of a value over the box of all that it depends on. */
import type { Term } from '../check/term'
import { asNumber } from '../check/term'
import { Fault, fault } from '../fault'
import type { Evaluation, Variable } from '../graph/evaluation'
import type { Interval } from './dual'
import { searchExtremes } from './search'

export interface WorstCase {
  low: number
  high: number
  method: 'proved' | 'searched'
}

/** Slope over the box: rising, falling, without influence, or not of one sign. */
type Trend = 'rising' | 'falling' | 'none' | 'unknown'

/**
 * Extremes of a real term. Where interval derivatives show that it is monotone in every variable
 * the extremes are at two corners; else the variables of unknown trend are searched.
 */
export function worstCase(term: Term, evaluation: Evaluation): WorstCase {
  const { variables } = term
  if (variables.length === 0) {
    const value = asNumber(term.run())
    return { low: value, high: value, method: 'proved' }
  }
  const trends = trendsOf(term, evaluation)
  const lowCorner = variables.map((variable, i) => trends[i] === 'falling' ? variable.high : trends[i] === 'rising' ? variable.low : variable.nominal)
  const highCorner = variables.map((variable, i) => trends[i] === 'falling' ? variable.low : trends[i] === 'rising' ? variable.high : variable.nominal)
  const open = variables.flatMap((_, i) => trends[i] === 'unknown' ? [i] : [])
  const at = (values: readonly number[]) => valueAt(term, evaluation, values)
  if (open.length === 0) return { low: at(lowCorner), high: at(highCorner), method: 'proved' }
  const found = searchExtremes({ variables, open, lowBase: lowCorner, highBase: highCorner, evaluate: at, effort: term.effort })
  return { ...found, method: 'searched' }
}

function valueAt(term: Term, evaluation: Evaluation, values: readonly number[]): number {
  evaluation.spend(term.effort)
  try {
    return evaluation.atPoint(term.variables, values, () => asNumber(term.run()))
  }
  catch (error) {
    throw error instanceof Fault && error.problem.code !== 'too-much-work' ? undefinedWithin(error, term.variables, values) : error
  }
}

function undefinedWithin(error: Fault, variables: readonly Variable[], values: readonly number[]): Fault {
  const where = variables.map((variable, i) => `${variable.name} ${direction(variable, values[i] ?? variable.nominal)}`).slice(0, 4).join(', ')
  return fault('undefined-within-tolerance', `Within the tolerances this has no value everywhere (with ${where}): ${error.problem.message}`, error.problem.hint ?? 'Take it at the nominal values with `nominal(x)`, or narrow the tolerances.', error.problem.at)
}

function direction(variable: Variable, value: number): string {
  if (value === variable.high && value !== variable.low) return 'at its upper limit'
  if (value === variable.low && value !== variable.high) return 'at its lower limit'
  return 'within its limits'
}

function trendsOf(term: Term, evaluation: Evaluation): Trend[] {
  const { dual, variables } = term
  if (!dual) return variables.map(() => 'unknown')
  const { slopes } = evaluation.overBox(variables, dual)
  return variables.map((variable, i) => variable.low === variable.high ? 'none' : trendOf(slopes[i]))
}

function trendOf(slope: Interval | undefined): Trend {
  if (!slope || (slope.low === 0 && slope.high === 0)) return 'none'
  if (slope.low >= 0) return 'rising'
  return slope.high <= 0 ? 'falling' : 'unknown'
}
