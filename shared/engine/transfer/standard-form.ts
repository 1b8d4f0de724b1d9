/** A transfer function as the trade writes it down: data for typesetting. */
import type { Analysis, Point } from './analysis'
import { secondOrder, toPoint } from './analysis'
import { figureOf } from './figure'
import type { Outcome } from './outcome'
import { found } from './outcome'
import { powerOfTwo } from '../numeric/math'
import { rootsOf } from '../numeric/roots'
import type { Factor, Rational } from './rational'

/** 1 + s/ω (`sign` 1) or 1 − s/ω (`sign` −1), to a power. ω in rad/s, positive. */
export interface FirstOrderFactor { readonly kind: 'first', readonly omega: number, readonly sign: 1 | -1, readonly power: number }

/** 1 + 2ζ·s/ω + (s/ω)², to a power. */
export interface SecondOrderFactor { readonly kind: 'second', readonly omega: number, readonly zeta: number, readonly power: number }

export type StandardFactor = FirstOrderFactor | SecondOrderFactor

/** gain · s^origin · ∏ numerator / ∏ denominator, every factor 1 at s = 0. */
export interface StandardForm {
  /** Coefficient of the low-frequency asymptote, SI units. */
  readonly gain: number
  /** Zeros at s = 0; negative for integrators. */
  readonly origin: number
  readonly numerator: readonly StandardFactor[]
  readonly denominator: readonly StandardFactor[]
}

/** gain · ∏(s − zero) / ∏(s − pole). */
export interface FactoredForm {
  /** Coefficient of the high-frequency asymptote, SI units. */
  readonly gain: number
  readonly zeros: readonly RootFactor[]
  readonly poles: readonly RootFactor[]
}

/** A root with im > 0 stands for its pair. rad/s */
export interface RootFactor { readonly re: number, readonly im: number, readonly power: number }

/** Standard form; a second-order factor stays one whether its roots are complex or real. */
export function standardForm(r: Rational): Outcome<StandardForm> {
  return figureOf(r, a => found({
    gain: valueOf(a.low.coefficient),
    origin: r.origin,
    numerator: standardFactors(r.numerator, a.zeros, a),
    denominator: standardFactors(r.denominator, a.poles, a),
  }))
}

/** Factored form, in the roots. */
export function factoredForm(r: Rational): Outcome<FactoredForm> {
  return figureOf(r, a => found({ gain: valueOf(a.high.coefficient), zeros: rootFactors(a.zeros), poles: rootFactors(a.poles) }))
}

function valueOf(level: { mantissa: number, exponent: number }): number {
  const half = Math.trunc(level.exponent / 2)
  return level.mantissa * powerOfTwo(half) * powerOfTwo(level.exponent - half)
}

/** From the factors as written where nothing was cancelled from within them, else from the roots. */
function standardFactors(factors: readonly Factor[], points: readonly Point[], a: Analysis): StandardFactor[] {
  if (a.warnings.length > 0) return merged(points.filter(p => p.omega > 0 && p.im >= 0).map(fromRoot))
  const result: StandardFactor[] = []
  for (const f of factors) {
    for (const part of ofFactor(f)) result.push({ ...part, power: part.power * f.power })
  }
  return merged(result)
}

function ofFactor(f: Factor): StandardFactor[] {
  const [a0, a1, a2] = f.coefficients as readonly [number, number, number?]
  if (a2 === undefined) return [{ kind: 'first', omega: Math.abs(a0 / a1), sign: a0 / a1 > 0 ? 1 : -1, power: 1 }]
  if (f.coefficients.length === 3 && a0 / a2 > 0) return [{ kind: 'second', ...secondOrder(a0, a1, a2), power: 1 }]
  return rootsOf(f.coefficients).filter(z => z.im >= 0).map(z => fromRoot(toPoint(z, f.coefficients)))
}

function fromRoot(p: Point): StandardFactor {
  if (p.im !== 0) return { kind: 'second', omega: p.omega, zeta: p.zeta, power: 1 }
  return { kind: 'first', omega: p.omega, sign: p.re < 0 ? 1 : -1, power: 1 }
}

function merged(factors: readonly StandardFactor[]): StandardFactor[] {
  const result: StandardFactor[] = []
  for (const f of factors) {
    const index = result.findIndex(g => equal(f, g))
    if (index < 0) result.push(f)
    else result[index] = { ...result[index]!, power: result[index]!.power + f.power }
  }
  return result.sort((a, b) => a.omega - b.omega)
}

function equal(a: StandardFactor, b: StandardFactor): boolean {
  if (a.omega !== b.omega) return false
  if (a.kind === 'first') return b.kind === 'first' && a.sign === b.sign
  return b.kind === 'second' && a.zeta === b.zeta
}

function rootFactors(points: readonly Point[]): RootFactor[] {
  const result: RootFactor[] = []
  for (const p of points) {
    if (p.im < 0) continue
    const index = result.findIndex(q => q.re === p.re && q.im === p.im)
    if (index < 0) result.push({ re: p.re, im: p.im, power: 1 })
    else result[index] = { ...result[index]!, power: result[index]!.power + 1 }
  }
  return result
}
