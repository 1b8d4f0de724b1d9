/** Holds the engine's response and poles against the figures of a case. */
import { frequencyResponse, polesOf } from '../../shared/engine/circuit'
import { elementOf } from './case'
import type { CircuitCase } from './case'

export interface Worst { relative: number, decibels: number, degrees: number, poles: number | undefined }
export interface Outcome { failures: string[], worst: Worst | undefined }

/** Points whose magnitude is below this part of the largest are not compared. */
const FLOOR = 1e-12

function compareResponse(test: CircuitCase, failures: string[], worst: Worst): void {
  const ours = frequencyResponse({ elements: test.elements.map(elementOf) }, test.input, test.output, test.freqs_Hz)
  const sizes = test.freqs_Hz.map((_, k) => Math.hypot(test.H_re[k]!, test.H_im[k]!))
  const floor = FLOOR * Math.max(...sizes)
  let bad = 0
  for (const [k, f] of test.freqs_Hz.entries()) {
    if (!(sizes[k]! > floor)) continue
    const [re, im] = [test.H_re[k]!, test.H_im[k]!]
    const got = ours[k]!
    const error = Math.hypot(got.re - re, got.im - im) / sizes[k]!
    const level = Math.abs(20 * Math.log10(Math.hypot(got.re, got.im) / sizes[k]!))
    const angle = Math.abs(Math.atan2(got.im * re - got.re * im, got.re * re + got.im * im)) * 180 / Math.PI
    worst.relative = larger(worst.relative, error)
    worst.decibels = larger(worst.decibels, level)
    worst.degrees = larger(worst.degrees, angle)
    if (error <= test.tolerance.H) continue
    if (bad++ === 0) failures.push(`at ${f} Hz the response is ${got.re} + ${got.im}i instead of ${re} + ${im}i: ${error.toExponential(1)} of its magnitude, allowed ${test.tolerance.H}`)
  }
  if (bad > 1) failures.push(`${bad} of ${sizes.length} frequencies are out of tolerance`)
}

/** NaN wins. */
const larger = (a: number, b: number) => b > a || Number.isNaN(b) ? b : a

type Pole = readonly [number, number]

/** The nearest pairs first; a pole at zero is measured by the smallest modulus that is not. */
function comparePoles(expected: readonly Pole[], ours: readonly Pole[], allowed: number, failures: string[]): number {
  if (ours.length !== expected.length) {
    failures.push(`the circuit has ${ours.length} finite poles, the case ${expected.length}`)
    return NaN
  }
  const moduli = expected.map(p => Math.hypot(...p))
  const smallest = Math.min(...moduli.filter(m => m > 0), Infinity)
  const unit = (k: number) => moduli[k]! > 0 ? moduli[k]! : smallest < Infinity ? smallest : 1
  const pairs = expected.flatMap((p, k) => ours.map((q, n) => ({ k, n, error: Math.hypot(q[0] - p[0], q[1] - p[1]) / unit(k) })))
  pairs.sort((a, b) => a.error - b.error)
  const [seen, taken] = [new Set<number>(), new Set<number>()]
  let worst = 0
  for (const { k, n, error } of pairs) {
    if (seen.has(k) || taken.has(n)) continue
    seen.add(k)
    taken.add(n)
    worst = larger(worst, error)
    if (!(error <= allowed)) failures.push(`pole ${ours[n]!.join(' + ')}i instead of ${expected[k]!.join(' + ')}i rad/s: ${error.toExponential(1)} of its modulus, allowed ${allowed}`)
  }
  if (seen.size < expected.length) {
    failures.push('a pole is not a number')
    return NaN
  }
  return worst
}

export function runCase(test: CircuitCase): Outcome {
  const failures: string[] = []
  const worst: Worst = { relative: 0, decibels: 0, degrees: 0, poles: undefined }
  compareResponse(test, failures, worst)
  if (test.poles_rad_s) {
    const ours = polesOf({ elements: test.elements.map(elementOf) }).map(p => [p.re, p.im] as const)
    worst.poles = comparePoles(test.poles_rad_s, ours, test.tolerance.poles, failures)
  }
  return { failures, worst }
}
