/** Dimensions as vectors of exponents of the SI base quantities (BIPM SI Brochure, 9th edition, 2.3.3). */
import type { DimensionVector } from '../types'

export const NONE: DimensionVector = [0, 0, 0, 0, 0, 0, 0]
export const LENGTH: DimensionVector = [1, 0, 0, 0, 0, 0, 0]
export const MASS: DimensionVector = [0, 1, 0, 0, 0, 0, 0]
export const TIME: DimensionVector = [0, 0, 1, 0, 0, 0, 0]
export const CURRENT: DimensionVector = [0, 0, 0, 1, 0, 0, 0]
export const TEMPERATURE: DimensionVector = [0, 0, 0, 0, 1, 0, 0]
export const AMOUNT: DimensionVector = [0, 0, 0, 0, 0, 1, 0]
export const LIGHT: DimensionVector = [0, 0, 0, 0, 0, 0, 1]
export const FREQUENCY: DimensionVector = [0, 0, -1, 0, 0, 0, 0]
export const VOLTAGE: DimensionVector = [2, 1, -3, -1, 0, 0, 0]
export const RESISTANCE: DimensionVector = [2, 1, -3, -2, 0, 0, 0]
export const CONDUCTANCE: DimensionVector = [-2, -1, 3, 2, 0, 0, 0]
export const INDUCTANCE: DimensionVector = [2, 1, -2, -2, 0, 0, 0]
export const CAPACITANCE: DimensionVector = [-2, -1, 4, 2, 0, 0, 0]
export const CHARGE: DimensionVector = [0, 0, 1, 1, 0, 0, 0]
export const ENERGY: DimensionVector = [2, 1, -2, 0, 0, 0, 0]
export const POWER: DimensionVector = [2, 1, -3, 0, 0, 0, 0]
export const FORCE: DimensionVector = [1, 1, -2, 0, 0, 0, 0]
export const PRESSURE: DimensionVector = [-1, 1, -2, 0, 0, 0, 0]
export const FLUX: DimensionVector = [2, 1, -2, -1, 0, 0, 0]
export const FLUX_DENSITY: DimensionVector = [0, 1, -2, -1, 0, 0, 0]

/** Exponents closer than this are equal: they come from small fractions. */
const EXPONENT_TOLERANCE = 1e-9

function build(make: (index: number) => number): DimensionVector {
  return [make(0), make(1), make(2), make(3), make(4), make(5), make(6)]
}

/** Takes off the rounding of sums of fractions such as 1/3 + 2/3, and −0. */
function tidy(exponent: number): number {
  const whole = Math.round(exponent)
  return Math.abs(exponent - whole) < EXPONENT_TOLERANCE ? whole + 0 : exponent
}

const at = (d: DimensionVector, index: number): number => d[index] ?? 0

export function times(a: DimensionVector, b: DimensionVector): DimensionVector {
  return build(i => tidy(at(a, i) + at(b, i)))
}

export function over(a: DimensionVector, b: DimensionVector): DimensionVector {
  return build(i => tidy(at(a, i) - at(b, i)))
}

export function raised(d: DimensionVector, exponent: number): DimensionVector {
  return build(i => tidy(at(d, i) * exponent))
}

export function sameDimension(a: DimensionVector, b: DimensionVector): boolean {
  return a.every((exponent, i) => Math.abs(exponent - at(b, i)) < EXPONENT_TOLERANCE)
}

export function isNone(d: DimensionVector): boolean {
  return sameDimension(d, NONE)
}

/** A pure power of time other than none: values that can carry a frequency mark. */
export function isTimeLike(d: DimensionVector): boolean {
  return d[2] !== 0 && d.every((exponent, i) => i === 2 || exponent === 0)
}

/** Resistance, conductance, inductance or capacitance: what a formula in R, L and C is made of. */
export function isCircuitValue(d: DimensionVector): boolean {
  return [RESISTANCE, CONDUCTANCE, INDUCTANCE, CAPACITANCE].some(known => sameDimension(known, d))
}

/** The fraction p/q with q ≤ 12 that an exponent stands for, or undefined. */
export function asFraction(exponent: number): { p: number, q: number } | undefined {
  for (let q = 1; q <= 12; q += 1) {
    const p = Math.round(exponent * q)
    if (Math.abs(exponent * q - p) < EXPONENT_TOLERANCE) return { p, q }
  }
  return undefined
}
