/** L6: a value with tolerance becomes one variable. */
import { fault } from '../fault'
import type { Variable } from '../graph/evaluation'
import { TEMPERATURE, isNone, sameDimension } from '../quantity/dimension'
import type { NumberKind, ScalarKind } from '../quantity/kind'
import { general } from '../quantity/kind'
import { exactly } from '../tolerance/dual'
import type { SourceRange } from '../types'
import { describe } from './describe'
import { isScalar } from './operands'
import { agree, levelMismatch, temperatureMisuse } from './sums'
import type { Term } from './term'
import { asNumber } from './term'

interface Limits { nominal: number, low: number, high: number }

/** `name = nominal ± t`. */
export function withTolerance(name: string, nominal: Term, tolerance: Term, at: SourceRange): Term {
  const kind = fixedKind(nominal, 'The nominal value')
  const extent = fixedKind(tolerance, 'The tolerance')
  const value = asNumber(nominal.run())
  const amount = extentOf(kind, extent, value, asNumber(tolerance.run()), tolerance.at)
  if (amount < 0) throw fault('tolerance-negative', 'A tolerance is not negative.', 'Write `± 5 %`; unequal limits are `between(nominal, low, high)`.', tolerance.at)
  return variableTerm(name, kind, { nominal: value, low: value - amount, high: value + amount }, at)
}

/** `name = between(nominal, low, high)`. */
export function betweenLimits(name: string, parts: readonly [Term, Term, Term], at: SourceRange): Term {
  const [kind, low, high] = [fixedKind(parts[0], 'The nominal value'), fixedKind(parts[1], 'A limit'), fixedKind(parts[2], 'A limit')]
  for (const limit of [low, high]) {
    if (kind.type === 'level' || limit.type === 'level') {
      if (kind.type !== limit.type || (kind.type === 'level' && limit.type === 'level' && kind.reference !== limit.reference)) throw levelMismatch(kind, limit, 'put together', at)
      continue
    }
    if (Boolean(kind.point) !== Boolean(limit.point)) throw temperatureMisuse(at)
    agree(kind, limit, 'put together', at)
  }
  const [a, b, c] = [asNumber(parts[0].run()), asNumber(parts[1].run()), asNumber(parts[2].run())]
  if (!(b <= a && a <= c)) throw fault('tolerance-order', 'The nominal value lies between its limits.', 'Write `between(nominal, low, high)`, with low ≤ nominal ≤ high.', at)
  return variableTerm(name, kind, { nominal: a, low: b, high: c }, at)
}

/** Nominal and tolerance are real constants without a tolerance of their own. */
function fixedKind(term: Term, what: string): ScalarKind {
  const { kind } = term
  if (!isScalar(kind)) throw fault('tolerance-kind', `${what} is a single value, not ${describe(kind)}.`, 'Give each value a line of its own.', term.at)
  if (kind.type === 'number' && kind.complex) throw fault('tolerance-complex', `${what} is real.`, 'Give real and imaginary part lines of their own.', term.at)
  if (term.variables.length > 0) {
    const names = term.variables.map(variable => `\`${variable.name}\``).join(', ')
    throw fault('tolerance-of-tolerance', `${what} depends on ${names}, which has a tolerance already.`, 'Bounds follow by themselves: leave ± out here, or take `nominal(x)`.', term.at)
  }
  return kind
}

function extentOf(kind: ScalarKind, extent: ScalarKind, nominal: number, amount: number, at: SourceRange): number {
  if (kind.type === 'level' || extent.type === 'level') {
    if (kind.type === 'level' && extent.type === 'level' && !extent.reference) return amount
    throw levelMismatch(kind, extent, 'put together', at)
  }
  if (isRelative(extent)) {
    if (kind.point) throw fault('tolerance-of-temperature', 'A part of a temperature in °C can be read in two ways: of the degrees, or of the kelvins.', 'Write the tolerance in kelvin: `± 5 K`.', at)
    return Math.abs(nominal) * amount
  }
  if (extent.point) throw fault('temperature-point', 'A tolerance of a temperature is an interval.', 'Write it in kelvin: `± 5 K`.', at)
  if (kind.point) {
    if (!sameDimension(extent.dimension, TEMPERATURE)) throw temperatureMisuse(at)
    return amount
  }
  if (isNone(extent.dimension) && !isNone(kind.dimension) && !extent.zero) throw fault('tolerance-unit', 'The tolerance lacks its unit.', `Write \`± ${amount} %\`, or give it the unit of the value.`, at)
  agree(kind, extent, 'put together', at)
  return amount
}

/** Percent and ppm are of the nominal value. */
function isRelative(extent: NumberKind): boolean {
  return isNone(extent.dimension) && extent.display !== undefined
    && extent.display.unit.factors.some(factor => factor.unit.symbol === 'percent' || factor.unit.symbol === 'ppm')
}

function variableTerm(name: string, kind: ScalarKind, limits: Limits, at: SourceRange): Term {
  const variable: Variable = { name, ...limits, now: limits.nominal, index: -1 }
  const unit = exactly(1)
  return {
    kind: kind.type === 'number' ? general(kind) : kind,
    at,
    variables: [variable],
    effort: 1,
    run: () => variable.now,
    dual: () => {
      const slopes = Array.from({ length: variable.index + 1 }, () => undefined as typeof unit | undefined)
      slopes[variable.index] = unit
      return { value: { low: variable.low, high: variable.high }, slopes }
    },
  }
}
