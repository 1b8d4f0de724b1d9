/** Units in which the values of a circuit are near one another. */
import { TWO_PI, exp, ln, powerOfTwo, log2 } from '../numeric/math'
import type { Circuit } from './types'

export interface Units { /** rad/s */ readonly rate: number, /** Ω */ readonly impedance: number }

/** Geometric mean; NaN of nothing. */
function mean(values: readonly number[]): number {
  let sum = 0
  for (const x of values) sum += ln(Math.abs(x))
  return exp(sum / values.length)
}

const nearestPower = (x: number) => powerOfTwo(Math.round(log2(x)))

/** Powers of two, so that no value is rounded. */
export function unitsOf(circuit: Circuit): Units {
  const of = (kind: 'R' | 'L' | 'C') => mean(circuit.elements.flatMap(e => e.kind === kind && e.value !== 0 ? [e.value] : []))
  const [r, l, c] = [of('R'), of('L'), of('C')]
  const rate = l > 0 && c > 0 ? 1 / Math.sqrt(l * c) : c > 0 ? 1 / ((r > 0 ? r : 1e3) * c) : l > 0 ? (r > 0 ? r : 1e3) / l : bandwidth(circuit)
  const impedance = r > 0 ? r : l > 0 && c > 0 ? Math.sqrt(l / c) : 1
  return { rate: nearestPower(rate), impedance: nearestPower(impedance) }
}

function bandwidth(circuit: Circuit): number {
  const rate = mean(circuit.elements.flatMap(e => e.kind === 'opamp' && e.bandwidth !== undefined ? [TWO_PI * e.bandwidth] : []))
  return rate > 0 ? rate : 1
}
