/** Poles, zeros and asymptotes of a rational transfer function: what most figures start from. */
import type { Complex } from '../numeric/complex'
import { modulus } from '../numeric/complex'
import { LN2, integerPower, ln, log2, powerOfTwo } from '../numeric/math'
import { rootsOf } from '../numeric/roots'
import type { Notice } from './outcome'
import type { Factor, Rational } from './rational'

/** A pole or zero, rad/s. */
export interface Point extends Complex {
  /** Of a complex root: natural frequency in rad/s and damping ratio, from the coefficients where it is a second-order factor. */
  readonly omega: number
  readonly zeta: number
}

/** ±2^level·mantissa·ω^order: the modulus towards one end of the frequency axis. */
export interface Asymptotic {
  /** Slope is 20 dB per decade times this. */
  readonly order: number
  readonly negative: boolean
  /** ln of the coefficient's modulus. */
  readonly logSize: number
  /** The coefficient itself, mantissa·2^exponent. */
  readonly coefficient: Level
}

export interface Analysis {
  /** Each as often as its multiplicity, by rising modulus, those at s = 0 first. */
  readonly poles: readonly Point[]
  readonly zeros: readonly Point[]
  readonly low: Asymptotic
  readonly high: Asymptotic
  /** Where the asymptotes meet, rad/s; undefined where they are parallel. */
  readonly corner: number | undefined
  /** Of pairs cancelled because they nearly coincide. */
  readonly warnings: readonly Notice[]
}

/** Pole and zero closer than this part of their modulus cancel. */
const COINCIDENT = 1e-9

const known = new WeakMap<Rational, Analysis>()

/** Analysis of a function that was not refused; kept, since every figure asks for it. */
export function analyse(r: Rational): Analysis {
  const before = known.get(r)
  if (before) return before
  const result = analyseAfresh(r)
  known.set(r, result)
  return result
}

function analyseAfresh(r: Rational): Analysis {
  const zeros = pointsOf(r.numerator)
  const poles = pointsOf(r.denominator)
  const warnings = cancelCoincident(zeros, poles)
  const origin = new Array<Point>(Math.abs(r.origin)).fill({ re: 0, im: 0, omega: 0, zeta: NaN })
  const lowest = scaledGain(r, c => c[0]!)
  const highest = scaledGain(r, c => c[c.length - 1]!)
  const order = zeros.length - poles.length
  return {
    zeros: r.origin > 0 ? [...origin, ...zeros] : zeros,
    poles: r.origin < 0 ? [...origin, ...poles] : poles,
    low: { order: r.origin, negative: lowest.mantissa < 0, logSize: logSize(lowest), coefficient: lowest },
    high: { order: r.origin + order, negative: highest.mantissa < 0, logSize: logSize(highest), coefficient: highest },
    corner: order === 0 ? undefined : rootOfRatio(lowest, highest, order),
    warnings,
  }
}

export interface Level { readonly mantissa: number, readonly exponent: number }

/** gain·∏ of one end coefficient of each factor, its exponent apart. */
function scaledGain(r: Rational, end: (coefficients: readonly number[]) => number): Level {
  let result: Level = split(r.gain)
  for (const f of r.numerator) result = timesPower(result, end(f.coefficients), f.power)
  for (const f of r.denominator) result = timesPower(result, end(f.coefficients), -f.power)
  return result
}

function split(x: number): Level {
  const exponent = Math.round(log2(Math.abs(x)))
  const half = Math.trunc(-exponent / 2)
  return { mantissa: x * powerOfTwo(half) * powerOfTwo(-exponent - half), exponent }
}

function timesPower(a: Level, x: number, n: number): Level {
  const b = split(x)
  const product = split(a.mantissa * integerPower(b.mantissa, n))
  return { mantissa: product.mantissa, exponent: a.exponent + b.exponent * n + product.exponent }
}

function logSize(level: Level): number {
  return ln(Math.abs(level.mantissa)) + level.exponent * LN2
}

/** |a/b|^(1/n): by square root where n is two, so that the corner of a section is exact. */
function rootOfRatio(a: Level, b: Level, n: number): number {
  if (n < 0) return rootOfRatio(b, a, -n)
  let mantissa = Math.abs(a.mantissa / b.mantissa)
  const whole = Math.floor((a.exponent - b.exponent) / n)
  mantissa *= powerOfTwo(a.exponent - b.exponent - whole * n)
  return nthRoot(mantissa, n) * powerOfTwo(whole)
}

function nthRoot(x: number, n: number): number {
  if (n === 1) return x
  if (n % 2 === 0) return nthRoot(Math.sqrt(x), n / 2)
  let y = powerOfTwo(Math.round(log2(x) / n))
  for (let count = 0; count < 12; count++) y += (x / integerPower(y, n - 1) - y) / n
  return y
}

function pointsOf(factors: readonly Factor[]): Point[] {
  const points: Point[] = []
  for (const f of factors) {
    const roots = rootsOf(f.coefficients).map(z => toPoint(z, f.coefficients))
    for (let k = 0; k < f.power; k++) points.push(...roots)
  }
  return points.sort((a, b) => modulus(a) - modulus(b) || a.re - b.re || b.im - a.im)
}

/** A root of a factor, with its natural frequency and damping ratio. */
export function toPoint(z: Complex, coefficients: readonly number[]): Point {
  if (coefficients.length === 3 && z.im !== 0) {
    const [a0, a1, a2] = coefficients as [number, number, number]
    return { re: z.re, im: z.im, ...secondOrder(a0, a1, a2) }
  }
  const omega = modulus(z)
  return { re: z.re, im: z.im, omega, zeta: -z.re / omega + 0 }
}

/** ω₀ = √(a0/a2) and ζ = a1/(2√(a0·a2)) of a0 + a1·s + a2·s² with a0·a2 > 0. */
export function secondOrder(a0: number, a1: number, a2: number): { omega: number, zeta: number } {
  const c = Math.abs(a0)
  const a = Math.abs(a2)
  const sign = a2 < 0 ? -1 : 1
  const product = c * a
  const mean = product > 1e-280 && product < 1e280 ? Math.sqrt(product) : Math.sqrt(c) * Math.sqrt(a)
  const quotient = c / a
  const omega = quotient > 1e-280 && quotient < 1e280 ? Math.sqrt(quotient) : Math.sqrt(c) / Math.sqrt(a)
  return { omega, zeta: sign * a1 / (2 * mean) + 0 }
}

/** Removes pairs that nearly coincide from both lists; never in the right half-plane, where that would hide instability. */
function cancelCoincident(zeros: Point[], poles: Point[]): Notice[] {
  const warnings: Notice[] = []
  for (let i = zeros.length - 1; i >= 0; i--) {
    const z = zeros[i]!
    if (z.re > 0 || z.im < 0) continue
    const j = poles.findIndex(p => p.re <= 0 && coincide(z, p))
    if (j < 0) continue
    const p = poles[j]!
    poles.splice(j, 1)
    zeros.splice(i, 1)
    if (z.im > 0) {
      removeConjugate(zeros, z)
      removeConjugate(poles, p)
      i = Math.min(i, zeros.length)
    }
    warnings.push(cancelled(z))
  }
  return warnings
}

function coincide(z: Complex, p: Complex): boolean {
  if ((z.im === 0) !== (p.im === 0)) return false
  return modulus({ re: z.re - p.re, im: z.im - p.im }) <= COINCIDENT * modulus(z)
}

function removeConjugate(points: Point[], of: Complex): void {
  const index = points.findIndex(p => p.re === of.re && p.im === -of.im)
  if (index >= 0) points.splice(index, 1)
}

function cancelled(z: Complex): Notice {
  const where = z.im === 0 ? shown(z.re) : `${shown(z.re)} ± ${shown(z.im)}i`
  return {
    code: 'cancelled-pair',
    message: `A pole and a zero at ${where} rad/s nearly coincide and were cancelled.`,
  }
}

function shown(x: number): string {
  return String(Number(x.toPrecision(4))).replace('-', '−')
}

/** Whether the real part is zero: such roots count as just left of the axis. */
export function isOnAxis(z: Complex): boolean {
  return z.re === 0
}

/** All poles strictly in the left half-plane. */
export function isStable(a: Analysis): boolean {
  return a.poles.every(p => p.re < 0)
}
