/** What every figure checks first. */
import { LN10 } from '../numeric/math'
import type { Analysis } from './analysis'
import { analyse } from './analysis'
import type { Outcome, Refusal } from './outcome'
import { found, refuse } from './outcome'
import type { Rational } from './rational'

/** Decibels of one neper. */
export const DB_PER_NEPER = 20 / LN10

/** Works a figure out from poles and zeros, unless the function was refused or is zero; hands on its warnings. */
export function figureOf<T>(r: Rational, figure: (a: Analysis) => Outcome<T>): Outcome<T> {
  if (r.refused) return r.refused
  if (r.gain === 0) return refuse('zero-function', 'The transfer function is zero.')
  const a = analyse(r)
  if (!hasFiniteRoots(a)) {
    return refuse('roots-range', 'The poles and zeros of this function leave the range of floating-point numbers.',
      'Keep it as a product of sections of low order instead of multiplying it out.')
  }
  const result = figure(a)
  return result.ok ? found(result.value, [...(result.warnings ?? []), ...a.warnings]) : result
}

function hasFiniteRoots(a: Analysis): boolean {
  return [...a.poles, ...a.zeros].every(z => Number.isFinite(z.re) && Number.isFinite(z.im))
}

export function refuseFrequency(omega: number): Refusal | undefined {
  if (omega >= 0 && omega < Infinity) return undefined
  return refuse('frequency-range', 'A frequency must be finite and not negative.')
}

export function refuseBand(from: number, to: number): Refusal | undefined {
  if (from >= 0 && to < Infinity && from <= to) return undefined
  return refuse('band-range', 'A band must run from a lower to a higher frequency.')
}

export const POLE_HERE = refuse('pole-at-frequency', 'The magnitude is unbounded here: a pole lies on the axis at this frequency.')
