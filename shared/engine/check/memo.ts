/** A term whose parts are computed once a point, however often they are used. */
import type { Evaluation } from '../graph/evaluation'
import type { Complex } from '../numeric/complex'
import type { Kind } from '../quantity/kind'
import type { Term } from './term'

/** Remembers the last result for a point, and the nominal one for good. */
function oncePerPoint<T>(evaluation: Evaluation, constant: boolean, compute: () => T): () => T {
  let nominal: { value: T } | undefined
  let last: { point: number, value: T } | undefined
  return () => {
    const point = constant ? 0 : evaluation.point
    if (point === 0) {
      nominal ??= { value: compute() }
      return nominal.value
    }
    if (last?.point !== point) last = { point, value: compute() }
    return last.value
  }
}

function oncePerBox<T>(evaluation: Evaluation, compute: () => T): () => T {
  let last: { box: number, value: T } | undefined
  return () => {
    if (last?.box !== evaluation.box) last = { box: evaluation.box, value: compute() }
    return last.value
  }
}

function oncePerArgument(evaluation: Evaluation, compute: (s: Complex) => Complex): (s: Complex) => Complex {
  let last: { point: number, s: Complex, value: Complex } | undefined
  return (s) => {
    if (last?.s !== s || last.point !== evaluation.point) last = { point: evaluation.point, s, value: compute(s) }
    return last.value
  }
}

export function memoised<K extends Kind>(term: Term<K>, evaluation: Evaluation): Term<K> {
  if (!evaluation.remembers) return term
  const constant = term.variables.length === 0
  const { dual, rational, atS } = term
  return {
    ...term,
    run: oncePerPoint(evaluation, constant, term.run),
    ...(dual ? { dual: oncePerBox(evaluation, dual) } : {}),
    ...(rational ? { rational: oncePerPoint(evaluation, constant, rational) } : {}),
    ...(atS ? { atS: oncePerArgument(evaluation, atS) } : {}),
  }
}
