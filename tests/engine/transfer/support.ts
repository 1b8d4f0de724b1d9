/** What the tests of transfer functions share. */
import { readFileSync } from 'node:fs'
import { expect } from 'vitest'
import type { Outcome, Rational } from '../../../shared/engine/transfer'
import { constant, divide, fromCoefficients, multiply, power, variable } from '../../../shared/engine/transfer'

export function readData(name: string): unknown {
  return JSON.parse(readFileSync(new URL(`../data/${name}`, import.meta.url), 'utf8'))
}

/** The value of a figure that must exist. */
export function valueOf<T>(outcome: Outcome<T>): T {
  if (!outcome.ok) throw new Error(`refused: ${outcome.code}: ${outcome.message}`)
  return outcome.value
}

/** The code of a figure that must not exist. */
export function codeOf(outcome: Outcome<unknown>): string {
  return outcome.ok ? `a value: ${JSON.stringify(outcome.value)}` : outcome.code
}

export function expectRelative(actual: number, expected: number, relative: number, what = ''): void {
  const error = Math.abs(actual - expected) / Math.abs(expected)
  expect(error, `${what} ${actual} for ${expected}`).toBeLessThanOrEqual(relative)
}

export function expectAbsolute(actual: number, expected: number, absolute: number, what = ''): void {
  expect(Math.abs(actual - expected), `${what} ${actual} for ${expected}`).toBeLessThanOrEqual(absolute)
}

export const s = variable()
export const k = constant

/** ∏ 1/(1 + s/ω): real poles at the given frequencies, rad/s. */
export function lags(...omegas: number[]): Rational {
  return omegas.reduce<Rational>((r, w) => divide(r, fromCoefficients([1, 1 / w])), k(1))
}

/** 1/(1 + 2ζs/ω + s²/ω²) */
export function resonator(omega: number, zeta: number): Rational {
  return divide(k(1), fromCoefficients([1, 2 * zeta / omega, 1 / (omega * omega)]))
}

/** s^n/∏ … */
export function times(...factors: Rational[]): Rational {
  return factors.reduce(multiply)
}

export function sPower(n: number): Rational {
  return power(s, n)
}
