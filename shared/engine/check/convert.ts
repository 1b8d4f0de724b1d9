/** `to`: the unit in which a value is shown, and the 2π between its marks (L8, L9, L11). */
import { fault } from '../fault'
import * as C from '../numeric/complex'
import { TWO_PI, log10, pow } from '../numeric/math'
import { isNone, sameDimension } from '../quantity/dimension'
import type { Display, LevelKind, ListKind, NumberKind, ScalarKind } from '../quantity/kind'
import { number } from '../quantity/kind'
import { isPeculiar, unitText } from '../quantity/unitProduct'
import type { UnitProduct } from '../quantity/unitProduct'
import { constantDual, multiplyDual } from '../tolerance/dual'
import type { SourceRange } from '../types'
import { describe } from './describe'
import { capital } from './operands'
import type { CheckContext, Term, Value } from './term'
import { asNumber, isComplexValue, isList } from './term'

export function converted(term: Term, unit: UnitProduct, unitAt: SourceRange, context: CheckContext): Term {
  const { kind } = term
  if (kind.type === 'list') return convertedList({ ...term, kind }, unit, unitAt, context)
  if (kind.type === 'number' || kind.type === 'level') return convertedScalar({ ...term, kind }, unit, unitAt, context)
  if (kind.type === 'laplace' && sameDimension(kind.dimension, unit.dimension) && !unit.point && !unit.reference && !unit.level) return term
  throw fault('conversion-kind', `${capital(describe(kind))} cannot be converted to ${unitText(unit)}.`, 'Leave the conversion out.', unitAt)
}

function convertedList(term: Term<ListKind>, unit: UnitProduct, unitAt: SourceRange, context: CheckContext): Term {
  const kind = scalarConversion(term.kind.of, unit, unitAt, term.at, context)
  const map = (value: Value): Value => isList(value) ? value.map(kind.map) : kind.map(value)
  const { run } = term
  return { kind: { type: 'list', of: kind.kind }, at: term.at, variables: term.variables, effort: term.effort, run: () => map(run()) }
}

function convertedScalar(term: Term<ScalarKind>, unit: UnitProduct, unitAt: SourceRange, context: CheckContext): Term {
  const { kind, map, factor } = scalarConversion(term.kind, unit, unitAt, term.at, context)
  const { run, dual } = term
  const scaled = dual && factor !== undefined ? (factor === 1 ? dual : () => multiplyDual(dual(), constantDual(factor))) : undefined
  return {
    kind, at: term.at, variables: term.variables, effort: term.effort,
    run: factor === 1 ? run : () => map(run()),
    ...(scaled ? { dual: scaled } : {}),
  }
}

interface Conversion { kind: ScalarKind, map: (x: Value) => Value, factor?: number }

const same: Pick<Conversion, 'map' | 'factor'> = { map: x => x, factor: 1 }

function scalarConversion(kind: ScalarKind, unit: UnitProduct, unitAt: SourceRange, at: SourceRange, context: CheckContext): Conversion {
  if (kind.type === 'level') return levelConversion(kind, unit, unitAt)
  if (unit.level) throw fault('level-mismatch', `${capital(describe(kind))} cannot be converted to ${unitText(unit)}.`, 'Write `level(x)` for a ratio of amplitudes, `powerLevel(x)` for a ratio of powers.', unitAt)
  if (!sameDimension(kind.dimension, unit.dimension)) throw mismatch(kind, unit, unitAt)
  if (unit.reference) return toReference(kind, unit.reference, unit, at)
  if (unit.point) {
    const { display: _display, ...rest } = kind
    return { kind: { ...rest, point: true }, ...same }
  }
  return numberConversion(kind, unit, unitAt, context)
}

function mismatch(kind: NumberKind, unit: UnitProduct, unitAt: SourceRange) {
  const what = isNone(unit.dimension) ? 'a plain number' : unitText(unit)
  return fault('conversion-dimension', `${capital(describe(kind))} cannot be stated in ${isNone(unit.dimension) ? unitText(unit) : what}: they are quantities of different kinds.`, 'Check the formula, or choose a unit of its own kind.', unitAt)
}

function displayIn(unit: UnitProduct): Display {
  const [head] = unit.factors
  const alone = unit.factors.length === 1 || unit.mark === 'rad/s'
  const free = alone && head?.power === 1 && head.unit.prefixable && !isPeculiar(unit)
  return { unit, fixed: !free }
}

function numberConversion(kind: NumberKind, unit: UnitProduct, unitAt: SourceRange, context: CheckContext): Conversion {
  const { point: _point, angle: _angle, display: _display, zero: _zero, ...rest } = kind
  const mark = unit.mark ?? kind.mark
  const trace = { ...kind.trace, lostHertz: false, overPi: false, literal: kind.trace.literal && unit.angle === undefined }
  const target = number(kind.dimension, { ...rest, trace, display: displayIn(unit), ...(mark && { mark }), ...(unit.angle && { angle: unit.angle }) })
  if (kind.mark && unit.mark && kind.mark !== unit.mark) {
    const power = kind.dimension[2]
    const factor = pow(TWO_PI, unit.mark === 'rad/s' ? -power : power)
    return { kind: target, factor, map: x => isComplexValue(x) ? C.scale(x, factor) : asNumber(x) * factor }
  }
  if (!kind.mark && unit.mark) inferMark(kind, unit, unitAt, context)
  return { kind: target, ...same }
}

/** L9: from a value without a mark only what its formula holds tells hertz from radians per second. */
function inferMark(kind: NumberKind, unit: UnitProduct, unitAt: SourceRange, context: CheckContext): void {
  const { parts, pi, overPi, lostHertz } = kind.trace
  if (unit.mark === 'Hz' && ((parts && !pi) || lostHertz)) {
    context.warn('angular-as-hertz', 'This formula gives an angular frequency, which is stated in Hz without its 2π.', lostHertz ? 'State it `to rad/s`, or leave the factor 2*pi out.' : 'State it `to rad/s`, or divide by `2*pi`.', unitAt)
  }
  if (unit.mark === 'rad/s' && parts && overPi) {
    context.warn('hertz-as-angular', 'This formula is divided by pi and gives a frequency in Hz, which is stated in rad/s.', 'State it `to Hz`, or leave the division by `2*pi` out.', unitAt)
  }
}

/** Size of the reference in SI units, and dB for a factor of ten. */
const REFERENCES = { dBm: { size: 1e-3, decade: 10 }, dBV: { size: 1, decade: 20 }, dBuV: { size: 1e-6, decade: 20 } } as const

function toReference(kind: NumberKind, reference: 'dBm' | 'dBV' | 'dBuV', unit: UnitProduct, at: SourceRange): Conversion {
  if (kind.complex) throw fault('level-complex', 'A complex value has no level.', 'Take its modulus with `abs(x)`.', at)
  const { size, decade } = REFERENCES[reference]
  return {
    kind: { type: 'level', reference, display: { unit, fixed: true } },
    map: (x) => {
      const value = asNumber(x)
      if (value <= 0) throw fault('real-domain', 'Only a value above zero has a level.', 'Take its modulus with `abs(x)`.', at)
      return decade * log10(value / size)
    },
  }
}

function levelConversion(kind: LevelKind, unit: UnitProduct, unitAt: SourceRange): Conversion {
  const { reference } = kind
  if (unit.level) {
    if (reference) throw fault('level-reference', `A level in ${reference} cannot be stated in ${unitText(unit)}.`, `Subtract its reference first: \`x - 0 ${reference}\`.`, unitAt)
    return { kind: { ...kind, display: { unit, fixed: true } }, ...same }
  }
  if (!reference) throw fault('level-mismatch', `A level in dB cannot be stated in ${unitText(unit)}.`, 'Turn it into a factor with `ratio(x)` or `powerRatio(x)`.', unitAt)
  return fromReference(reference, unit, unitAt)
}

function fromReference(reference: 'dBm' | 'dBV' | 'dBuV', unit: UnitProduct, unitAt: SourceRange): Conversion {
  const { size, decade } = REFERENCES[reference]
  if (unit.reference) {
    const target = REFERENCES[unit.reference]
    if (target.decade !== decade) throw fault('level-reference', `A level in ${reference} cannot be stated in ${unit.reference} without an impedance.`, 'Convert to W or V, and use `V^2/R` between them.', unitAt)
    const shift = decade * log10(size / target.size)
    return { kind: { type: 'level', reference: unit.reference, display: { unit, fixed: true } }, map: x => asNumber(x) + shift }
  }
  const dimension = reference === 'dBm' ? [2, 1, -3, 0, 0, 0, 0] as const : [2, 1, -3, -1, 0, 0, 0] as const
  if (!sameDimension(dimension, unit.dimension)) throw fault('conversion-dimension', `A level in ${reference} cannot be stated in ${unitText(unit)}.`, reference === 'dBm' ? 'It is a power: `to W` or `to mW`.' : 'It is a voltage: `to V` or `to mV`.', unitAt)
  return { kind: number(dimension, { display: displayIn(unit) }), map: x => size * pow(10, asNumber(x) / decade) }
}
