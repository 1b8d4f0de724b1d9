/**
 * Response in time by partial fractions: a constant and a sum of exponentials. Exact and quick where
 * the poles are apart; where they crowd, the residues cancel and `cascade.ts` takes over.
 */
import type { Complex } from '../numeric/complex'
import { modulus, scale, subtract } from '../numeric/complex'
import { EPSILON, cos, exp, sin } from '../numeric/math'
import { ratioOfProducts } from './evaluate'
import type { Place, Sample, TimeFunction } from './time-function'
import { fastestRate, stepFor } from './time-function'

/** constant + Re Σ residue·e^(pole·t); a pair of poles is held once, with its residue doubled. */
interface Modes { readonly constant: number, readonly poles: readonly Complex[], readonly residues: readonly Complex[] }

/** How far the residues may exceed the response: four of sixteen digits are given up at most. */
const CROWDED = 1e3
/** A mode below this part of the whole has died away. */
const DEAD = 1e-9

/**
 * Step response (H/s) or impulse response (H) of K·∏(s − zeros)/∏(s − poles).
 * @param lead K as mantissa and power of two
 * @returns undefined where poles coincide or crowd
 */
export function partialFractions(
  lead: { mantissa: number, exponent: number }, zeros: readonly Complex[], poles: readonly Complex[], constant: number, step: boolean,
): TimeFunction | undefined {
  const held: Complex[] = []
  const residues: Complex[] = []
  for (let k = 0; k < poles.length; k++) {
    const p = poles[k]!
    if (p.im < 0) continue
    const others = poles.filter((_, j) => j !== k).map(q => subtract(p, q))
    if (others.some(d => d.re === 0 && d.im === 0) || (step && modulus(p) === 0)) return undefined
    const residue = ratioOfProducts(lead, zeros.map(z => subtract(p, z)), step ? [p, ...others] : others)
    held.push(p)
    residues.push(p.im > 0 ? scale(residue, 2) : residue)
  }
  const modes: Modes = { constant, poles: held, residues }
  return isCrowded(modes) ? undefined : timeFunction(modes)
}

/** Whether the residues are so much larger than the response that their sum loses its digits. */
function isCrowded(m: Modes): boolean {
  let sum = Math.abs(m.constant)
  for (const r of m.residues) sum += modulus(r)
  if (!(sum < Infinity)) return true
  let largest = Math.abs(m.constant)
  for (const p of m.poles) {
    if (modulus(p) === 0) continue
    for (const times of [0.3, 1, 3]) largest = Math.max(largest, Math.abs(sampleOf(m, times / modulus(p)).value))
  }
  return sum > CROWDED * largest
}

/** Written out in numbers: this is where a search through the step response spends its time. */
function sampleOf(m: Modes, time: number): Sample {
  let value = m.constant
  let slope = 0
  for (let k = 0; k < m.poles.length; k++) {
    const pole = m.poles[k]!
    const residue = m.residues[k]!
    const size = exp(pole.re * time)
    if (size === 0) continue
    const turned = pole.im !== 0
    const c = turned ? size * cos(pole.im * time) : size
    const s = turned ? size * sin(pole.im * time) : 0
    const re = residue.re * c - residue.im * s
    const im = residue.re * s + residue.im * c
    value += re
    slope += pole.re * re - pole.im * im
  }
  return { value, slope }
}

function timeFunction(m: Modes): TimeFunction {
  const sizes = m.residues.map(modulus)
  const rates = m.poles.map(modulus)
  const total = sizes.reduce((a, b) => a + b, 0)
  const sizeAt = (k: number, time: number) => sizes[k]! * exp(m.poles[k]!.re * time)
  const bound = (weights: readonly number[], time: number) =>
    m.poles.reduce((sum, p, k) => sum + weights[k]! * exp(p.re * time), 0)
  const curvatures = sizes.map((size, k) => size * rates[k]! * rates[k]!)
  return {
    at: time => sampleOf(m, time),
    start: () => placeAt(m, 0),
    stepAt: time => stepFor(fastestRate(m.poles, k => sizeAt(k, time) > DEAD * total)),
    envelope: time => bound(sizes, time) * (1 + 8 * EPSILON),
    curvatureEnvelope: time => bound(curvatures, time) * (1 + 8 * EPSILON),
  }
}

function placeAt(m: Modes, time: number): Place {
  return {
    time,
    here: sampleOf(m, time),
    look: ahead => sampleOf(m, time + ahead),
    next: by => placeAt(m, time + by),
  }
}
