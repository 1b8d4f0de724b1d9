/** Numbers with units: literals, bare units, and units behind an expression. */
import { fault } from '../fault'
import { isNone } from '../quantity/dimension'
import type { Display, NumberKind } from '../quantity/kind'
import { PLAIN, isPlainNumber, number } from '../quantity/kind'
import { naturalUnit } from '../quantity/naturalUnit'
import { CELSIUS_ZERO } from '../quantity/show'
import { isPeculiar } from '../quantity/unitProduct'
import type { UnitProduct } from '../quantity/unitProduct'
import { constantDual, multiplyDual } from '../tolerance/dual'
import type { SourceRange } from '../types'
import { describe } from './describe'
import type { Term } from './term'
import { asNumber } from './term'

/** The value of a number in a unit. */
export function withUnit(term: Term, unit: UnitProduct, at: SourceRange): Term {
  const { kind, run, variables, effort, dual } = term
  if (!isPlainNumber(kind) || kind.complex) throw fault('unit-of-value', `A unit stands behind a plain number, not behind ${describe(kind)}.`, 'Write a product with `*`.', at)
  const base = { at, variables, effort }
  if (unit.point) return { ...base, kind: number(unit.dimension, { point: true }), run: () => asNumber(run()) + CELSIUS_ZERO }
  if (unit.level || unit.reference) return { ...base, ...levelOf(unit, run, dual) }
  const factor = unit.up / unit.down
  return {
    ...base,
    kind: quantityKind(kind, unit),
    run: () => asNumber(run()) * unit.up / unit.down,
    ...(dual ? { dual: () => multiplyDual(dual(), constantDual(factor)) } : {}),
  }
}

function levelOf(unit: UnitProduct, run: Term['run'], dual: Term['dual']): Pick<Term, 'kind' | 'run' | 'dual'> {
  const display = unit.factors.length > 1 || isPeculiar(unit) ? { display: { unit, fixed: true } } : {}
  return {
    kind: { type: 'level', ...(unit.reference ? { reference: unit.reference } : display) },
    run: () => asNumber(run()) * unit.up / unit.down,
    ...(dual ? { dual: () => multiplyDual(dual(), constantDual(unit.up / unit.down)) } : {}),
  }
}

function quantityKind(kind: NumberKind, unit: UnitProduct): NumberKind {
  const display = displayOfLiteral(unit)
  const constant = isNone(unit.dimension) && kind.constant !== undefined ? kind.constant * unit.up / unit.down : undefined
  const peculiar = unit.factors.some(factor => factor.unit.peculiar)
  return number(unit.dimension, {
    trace: { ...PLAIN, pi: kind.trace.pi, literal: kind.trace.literal && isNone(unit.dimension) && !unit.angle && !peculiar },
    ...(unit.mark && { mark: unit.mark }), ...(unit.angle && { angle: unit.angle }),
    ...(display && { display }), ...(constant === undefined ? {} : { constant }),
  })
}

/** Typed units are kept for show where the dimension would not lead back to them. */
function displayOfLiteral(unit: UnitProduct): Display | undefined {
  if (isPeculiar(unit)) return { unit, fixed: false }
  if (unit.factors.length < 2 || unit.mark) return undefined
  return naturalUnit(unit.dimension).factors.length > 1 ? { unit, fixed: true } : undefined
}
