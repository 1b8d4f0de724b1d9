/** A checked part of a line: what kind of value it has, and closures that compute it. */
import type { Evaluation, Variable } from '../graph/evaluation'
import type { Complex } from '../numeric/complex'
import type { Kind } from '../quantity/kind'
import type { Dual } from '../tolerance/dual'
import type { Rational, Reference } from '../transfer'
import type { SourceRange } from '../types'

/** A range of frequency, rad/s. */
export interface Band { low: number, high: number }

/** What a closure gives; the term's kind says which. Levels are in dB, all else in SI units. */
export type Value = number | Complex | string | Band | readonly Value[]

export interface Term<K extends Kind = Kind> {
  kind: K
  at: SourceRange
  /** The values with tolerance that it depends on, in order of definition. */
  variables: readonly Variable[]
  /** Absent in kinds that have no single value. */
  run: () => Value
  /** Interval with interval derivatives; absent where only numbers can be computed. */
  dual?: () => Dual
  /** Functions of `s`: as a rational function, and at a point of the s-plane. */
  rational?: () => Rational
  atS?: (s: Complex) => Complex
  /** Of a value over a band: the frequency of its worst point, rad/s. */
  worstAt?: () => number
  /** Of an attenuation: what it is counted from. */
  reference?: () => Reference
  /** Of a figure at a frequency or over a band: where it is taken. */
  frequencies?: () => Band
  /** What one evaluation costs, in steps. */
  effort: number
}

export interface CheckContext {
  evaluation: Evaluation
  /** Called for every node that is compiled; a line that compiles to too many is refused. */
  countNode: () => void
  warn: (code: string, message: string, hint: string | undefined, at: SourceRange) => void
}

const NO_VARIABLES: readonly Variable[] = []

/** Union in order of first appearance. */
export function mergedVariables(terms: readonly Term[]): readonly Variable[] {
  const [first, ...rest] = terms
  let merged = first?.variables ?? NO_VARIABLES
  for (const term of rest) {
    if (term.variables.length === 0 || term.variables === merged) continue
    const fresh = term.variables.filter(variable => !merged.includes(variable))
    if (fresh.length > 0) merged = [...merged, ...fresh]
  }
  return merged
}

export function summedEffort(terms: readonly Term[]): number {
  let sum = 1
  for (const term of terms) sum += term.effort
  return sum
}

export function isComplexValue(value: Value): value is Complex {
  return typeof value === 'object' && 're' in value
}

export function isList(value: Value): value is readonly Value[] {
  return Array.isArray(value)
}

export function asComplex(value: Value): Complex {
  if (typeof value === 'number') return { re: value, im: 0 }
  if (isComplexValue(value)) return value
  throw new Error('a number was expected here')
}

export function asNumber(value: Value): number {
  if (typeof value === 'number') return value
  throw new Error('a real number was expected here')
}
