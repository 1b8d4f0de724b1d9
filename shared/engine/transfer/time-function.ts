/** A response in time and what a search through it needs. */
import { powerOfTwo, log2 } from '../numeric/math'
import type { Complex } from '../numeric/complex'
import { modulus } from '../numeric/complex'

/** Value and first derivative. */
export interface Sample { readonly value: number, readonly slope: number }

/** A place on the time axis that can be looked ahead from. */
export interface Place {
  /** s */
  readonly time: number
  readonly here: Sample
  /** Sample at `time + ahead`, ahead ≥ 0. */
  look(ahead: number): Sample
  /** The place further on. */
  next(by: number): Place
}

export interface TimeFunction {
  at(time: number): Sample
  /** The place at t = 0, just after the step. */
  start(): Place
  /** A step, s, that resolves whatever has not yet died away at this time: a power of two, so that few differ. */
  stepAt(time: number): number
  /** Bound on the distance from the final value from this time on, if one is known cheaply. */
  envelope?(time: number): number
  /** The same of the second derivative. */
  curvatureEnvelope?(time: number): number
}

/** Radians of the fastest living mode per step. */
const RADIANS = 0.35

/** Largest power of two not above RADIANS/rate. */
export function stepFor(rate: number): number {
  return powerOfTwo(Math.floor(log2(RADIANS / rate)))
}

/** Rate of the fastest mode that `lives`; of the slowest of all where none does. */
export function fastestRate(poles: readonly Complex[], lives: (index: number) => boolean): number {
  let rate = 0
  let slowest = Infinity
  poles.forEach((p, k) => {
    const size = modulus(p)
    if (size === 0) return
    slowest = Math.min(slowest, size)
    if (lives(k)) rate = Math.max(rate, size)
  })
  if (rate > 0) return rate
  return slowest < Infinity ? slowest : 1
}
