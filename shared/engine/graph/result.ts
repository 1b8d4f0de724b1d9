/** The public data of a value: shown, bounded, ready for a worker, a socket and a database. */
import type { Term, Value } from '../check/term'
import { asComplex, asNumber, isList } from '../check/term'
import { fault } from '../fault'
import { TWO_PI } from '../numeric/math'
import { FREQUENCY, sameDimension } from '../quantity/dimension'
import type { NumberKind, ScalarKind } from '../quantity/kind'
import { number } from '../quantity/kind'
import { showComplex, showLevel, showNumber } from '../quantity/show'
import { worstCase } from '../tolerance/bounds'
import type { Bounds, ResultValue, Shown } from '../types'
import type { Evaluation } from './evaluation'
import { scaled, showScalar, storable } from './showing'

/** Items of a list that get bounds of their own; beyond, a list is too long to be read as a table. */
const BOUNDED_ITEMS = 32

export interface ResultRequest { term: Term, evaluation: Evaluation, digits: number }

export function resultOf({ term, evaluation, digits }: ResultRequest): ResultValue {
  evaluation.spend(term.effort)
  const value = term.run()
  const { kind } = term
  switch (kind.type) {
    case 'number': case 'level': return scalarResult(value, kind, digits, boundsOf(term, kind, evaluation))
    case 'list': return listResult(term, kind.of, value, { term, evaluation, digits })
    case 'text': return { type: 'text', text: String(value) }
    default: throw fault('no-value', 'This has no value of its own.', 'It stands as an argument only.', term.at)
  }
}

type WorstCase = ReturnType<typeof worstCase>

function boundsOf(term: Term, kind: ScalarKind, evaluation: Evaluation): WorstCase | undefined {
  if (term.variables.length === 0 || (kind.type === 'number' && kind.complex)) return undefined
  return worstCase(term, evaluation)
}

/** A single value with its limits, if any. */
export function scalarResult(value: Value, kind: ScalarKind, digits: number, bounds: WorstCase | undefined): ResultValue {
  if (kind.type === 'number' && kind.complex) {
    const { re, im } = asComplex(value)
    return { type: 'complex', re, im, dimension: kind.dimension, shown: showComplex(re, im, kind, digits), ...(kind.mark && { mark: kind.mark }) }
  }
  const x = asNumber(value)
  const showing = scaled(kind, x, digits)
  const shown = showScalar(x, showing, digits)
  if (!Number.isFinite(x)) return { type: 'unbounded', shown }
  const limits = bounds && { bounds: shownBounds(bounds, low => showScalar(low, showing, digits)) }
  if (kind.type === 'level') return { type: 'level', db: x, shown, ...(kind.reference && { reference: kind.reference }), ...limits }
  const also = alsoIn(x, kind, digits)
  return { type: 'number', si: x, dimension: kind.dimension, shown, ...(also && { also }), ...(kind.mark && { mark: kind.mark }), ...limits }
}

function shownBounds({ low, high, method }: WorstCase, show: (x: number) => Shown): Bounds {
  return { low: storable(low), high: storable(high), shownLow: show(low), shownHigh: show(high), method }
}

/** An angular frequency is shown in hertz beside. */
function alsoIn(x: number, kind: NumberKind, digits: number): Shown | undefined {
  if (kind.mark !== 'rad/s' || !sameDimension(kind.dimension, FREQUENCY)) return undefined
  return showNumber(x / TWO_PI, number(FREQUENCY, { mark: 'Hz' }), digits)
}

function listResult(term: Term, kind: ScalarKind, value: Value, request: ResultRequest): ResultValue {
  const items = isList(value) ? value : [value]
  const bounded = items.length <= BOUNDED_ITEMS && term.variables.length > 0
  return {
    type: 'list',
    items: items.map((item, i) => {
      const bounds = bounded ? boundsOf(itemTerm(term, kind, i), kind, request.evaluation) : undefined
      return scalarResult(item, kind, request.digits, bounds)
    }),
  }
}

function itemTerm(term: Term, kind: ScalarKind, index: number): Term {
  const { run, variables, effort, at } = term
  return {
    kind, variables, effort, at,
    run: () => {
      const value = run()
      const item = isList(value) ? value[index] : value
      if (item === undefined) throw fault('list-length', 'The list has fewer items at another point of the tolerances.', 'Take its figures one by one.', at)
      return item
    },
  }
}

/** The result as LaTeX. */
export function resultLatex(value: ResultValue): string | undefined {
  switch (value.type) {
    case 'number': case 'complex': case 'level': case 'unbounded': return value.shown.latex
    case 'text': return `\\text{${value.text}}`
    case 'list': return `\\left[${value.items.map(resultLatex).join(',\\ ')}\\right]`
    default: return undefined
  }
}

/** A value as it stands in a formula with numbers, without trailing zeros. */
export function valueInFormula(term: Term, digits: number): { latex: string, grouped: boolean } | undefined {
  const { kind } = term
  if (kind.type === 'level') return { latex: showLevel(asNumber(term.run()), kind, digits, true).latex, grouped: true }
  if (kind.type !== 'number') return undefined
  const value = term.run()
  const shown = kind.complex ? showComplex(asComplex(value).re, asComplex(value).im, kind, digits, true) : showNumber(asNumber(value), kind, digits, true)
  if (kind.complex && shown.unit === '') return { latex: `\\left(${shown.latex}\\right)`, grouped: false }
  return { latex: shown.latex, grouped: shown.unit !== '' || shown.latex.includes('times') }
}
