/**
 * Response in time of a chain of first-order sections, one a pole, by the matrix exponential. It
 * makes no difference here whether poles are apart, close or equal.
 */
import type { Complex } from '../numeric/complex'
import { ZERO, complex, modulus, scale, subtract } from '../numeric/complex'
import type { Triangular } from '../numeric/triangular'
import { exponentialOf, triangular } from '../numeric/triangular'
import { ratioOfProducts } from './evaluate'
import type { Place, Sample, TimeFunction } from './time-function'
import { fastestRate, stepFor } from './time-function'

/** x′ = A·x, y = c·x, x(0) = start. */
interface Chain {
  readonly matrix: Triangular
  readonly output: readonly Complex[]
  readonly outputSlope: readonly Complex[]
  readonly start: readonly Complex[]
  readonly poles: readonly Complex[]
}

/** e^−30 is below any band or level that is asked for. */
const LIFETIMES = 30

/**
 * Step response (or impulse response without its impulse at t = 0) of K·∏(s − zeros)/∏(s − poles),
 * no more zeros than poles. Sections are normalised so that no state outgrows the response.
 */
export function cascade(
  lead: { mantissa: number, exponent: number }, zeros: readonly Complex[], poles: readonly Complex[], step: boolean,
): TimeFunction {
  const chain = build(lead, zeros, poles, step)
  const { length } = poles
  return {
    at: time => sampleOf(chain, transported(exponentialOf(chain.matrix, time), chain.start)),
    start: () => placeAt(chain, new Map(), 0, chain.start),
    // A mode met n times over grows as t^(n−1) before it dies.
    stepAt: time => stepFor(fastestRate(poles, k => -poles[k]!.re * time < LIFETIMES + 3 * length)),
  }
}

/** One pole, with the zero nearest to it in size if any is left. */
interface Section { pole: Complex, rate: number, zero?: Complex, size: number }

function sections(zeros: readonly Complex[], poles: readonly Complex[]): Section[] {
  const slowest = poles.find(p => modulus(p) > 0)
  const unit = slowest ? modulus(slowest) : 1
  const result: Section[] = poles.map(pole => ({ pole, rate: modulus(pole) || unit, size: modulus(pole) || unit }))
  for (const zero of zeros) {
    const free = result.filter(s => !s.zero)
    const best = free.reduce((a, b) => distance(b, zero) < distance(a, zero) ? b : a)
    best.zero = zero
    best.size = Math.max(1, modulus(zero) / best.rate)
  }
  return result
}

function distance(s: Section, zero: Complex): number {
  return modulus(subtract(s.pole, zero)) / s.rate
}

function build(lead: { mantissa: number, exponent: number }, zeros: readonly Complex[], poles: readonly Complex[], step: boolean): Chain {
  const chain = sections(zeros, poles)
  const size = chain.length + 1
  const matrix = triangular(size)
  const start = new Array<Complex>(size).fill(ZERO)
  // What enters a section, in terms of the states before it; state 0 is the unit input.
  let input: Complex[] = [complex(1)]
  chain.forEach((s, k) => {
    const row = k + 1
    input.forEach((c, j) => put(matrix, row, j, scale(c, s.rate)))
    put(matrix, row, row, s.pole)
    start[row] = step ? ZERO : scale(input[0]!, s.rate)
    const through = s.zero ? 1 / s.size : 0
    // A section is (s − zero)/(s − pole)/size with a zero and size/(s − pole) without, its state scaled by its rate.
    const own = s.zero ? scale(subtract(s.pole, s.zero), 1 / (s.size * s.rate)) : complex(s.size / s.rate)
    input = [...input.map(c => scale(c, through)), own]
  })
  if (step) start[0] = complex(1)
  else for (let row = 1; row < size; row++) put(matrix, row, 0, ZERO)
  const gain = ratioOfProducts(lead, chain.filter(s => s.zero).map(s => complex(s.size)), chain.filter(s => !s.zero).map(s => complex(s.size)))
  const output = input.map(c => scale(c, gain.re))
  return { matrix, output, outputSlope: transposed(matrix, output), start, poles }
}

function put(m: Triangular, row: number, column: number, z: Complex): void {
  m.re[row * m.size + column] = z.re
  m.im[row * m.size + column] = z.im
}

/** Row vector times matrix. */
function transposed(m: Triangular, row: readonly Complex[]): Complex[] {
  return row.map((_, j) => {
    let re = 0
    let im = 0
    for (let i = j; i < m.size; i++) {
      const at = i * m.size + j
      re += row[i]!.re * m.re[at]! - row[i]!.im * m.im[at]!
      im += row[i]!.re * m.im[at]! + row[i]!.im * m.re[at]!
    }
    return { re, im }
  })
}

/** Matrix times column vector. */
function transported(m: Triangular, x: readonly Complex[]): Complex[] {
  return x.map((_, i) => {
    let re = 0
    let im = 0
    for (let j = 0; j <= i; j++) {
      const at = i * m.size + j
      re += m.re[at]! * x[j]!.re - m.im[at]! * x[j]!.im
      im += m.re[at]! * x[j]!.im + m.im[at]! * x[j]!.re
    }
    return { re, im }
  })
}

function sampleOf(chain: Chain, x: readonly Complex[]): Sample {
  return { value: realProduct(chain.output, x), slope: realProduct(chain.outputSlope, x) }
}

function realProduct(a: readonly Complex[], b: readonly Complex[]): number {
  let sum = 0
  for (let k = 0; k < a.length; k++) sum += a[k]!.re * b[k]!.re - a[k]!.im * b[k]!.im
  return sum
}

/** Steps of equal length share one matrix exponential. */
function placeAt(chain: Chain, kept: Map<number, Triangular>, time: number, state: readonly Complex[]): Place {
  return {
    time,
    here: sampleOf(chain, state),
    look: ahead => sampleOf(chain, transported(kept.get(ahead) ?? exponentialOf(chain.matrix, ahead), state)),
    next(by) {
      const over = kept.get(by) ?? exponentialOf(chain.matrix, by)
      kept.set(by, over)
      return placeAt(chain, kept, time + by, transported(over, state))
    },
  }
}

/** How long until every mode has died away, s; Infinity where one does not. */
export function lifetime(poles: readonly Complex[]): number {
  let slowest = Infinity
  for (const p of poles) slowest = Math.min(slowest, -p.re)
  return slowest > 0 ? (LIFETIMES + 3 * poles.length) / slowest : Infinity
}
