/** Unwrapped phase and group delay. */
import { PI, atan2, degrees } from '../numeric/math'
import type { Analysis, Point } from './analysis'
import { isOnAxis } from './analysis'
import { evaluateScaled } from './evaluate'
import { figureOf, refuseFrequency } from './figure'
import type { Outcome } from './outcome'
import { found, refuse } from './outcome'
import type { Rational } from './rational'
import { logarithmicSlope } from './response'

/**
 * Phase in degrees, continuous from its start at f → 0: 90° times the order of the zero at s = 0
 * (poles negative), less 180° where the lowest coefficients differ in sign. Roots on the axis count
 * as just left of it.
 * @param omega rad/s
 */
export function phase(r: Rational, omega: number): Outcome<number> {
  return refuseFrequency(omega) ?? figureOf(r, a => found(degrees(phaseAt(r, a, omega))))
}

/** In radians, for a function that was not refused and is not zero. */
export function phaseAt(r: Rational, a: Analysis, omega: number): number {
  const rough = phaseFromRoots(a, omega)
  const v = evaluateScaled(r, 0, omega)
  const usable = Number.isFinite(v.re) && Number.isFinite(v.im) && (v.re !== 0 || v.im !== 0) && omega > 0
  if (!usable) return rough
  const fine = atan2(v.im, v.re)
  const turned = fine + 2 * PI * Math.round((rough - fine) / (2 * PI))
  // Right at a root on the axis the value is mere rounding; the roots know better.
  return Math.abs(turned - rough) < 0.5 ? turned : rough
}

/** Sum of the angles of all roots, radians. */
export function phaseFromRoots(a: Analysis, omega: number): number {
  let sum = a.low.order * PI / 2 - (a.low.negative ? PI : 0)
  for (const z of a.zeros) sum += turn(z, omega)
  for (const p of a.poles) sum -= turn(p, omega)
  return sum
}

/** Angle through which iω − z has turned since ω = 0; a pair counts once for both. */
function turn(z: Point, omega: number): number {
  if (z.omega === 0 || z.im < 0) return 0
  if (z.im === 0) return z.re > 0 ? -atan2(omega, z.re) : atan2(omega, -z.re)
  const real = (z.omega - omega) * (z.omega + omega)
  if (isOnAxis(z)) return omega < z.im ? 0 : omega > z.im ? PI : PI / 2
  return atan2(-2 * z.re * omega, real)
}

/** −dφ/dω in seconds. @param omega rad/s */
export function groupDelay(r: Rational, omega: number): Outcome<number> {
  return refuseFrequency(omega) ?? figureOf(r, (a) => {
    const onAxis = [...a.poles, ...a.zeros].some(z => isOnAxis(z) && z.im === omega && z.omega > 0)
    if (onAxis) return refuse('root-at-frequency', 'The phase jumps at this frequency: a pole or zero lies on the axis.')
    return found(delayAt(r, omega))
  })
}

/** A root on the axis contributes nothing but its jump. */
export function delayAt(r: Rational, omega: number): number {
  if (omega > 0) return -logarithmicSlope(r, omega).im / omega + 0
  let sum = 0
  for (const f of r.numerator) sum -= f.power * f.coefficients[1]! / f.coefficients[0]!
  for (const f of r.denominator) sum += f.power * f.coefficients[1]! / f.coefficients[0]!
  return sum
}
