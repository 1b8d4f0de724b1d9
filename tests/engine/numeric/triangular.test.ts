import { describe, expect, it } from 'vitest'
import { exponentialOf, triangular } from '../../../shared/engine/numeric/triangular'

function real(rows: readonly (readonly number[])[]) {
  const m = triangular(rows.length)
  rows.forEach((row, i) => row.forEach((x, j) => m.re[i * rows.length + j] = x))
  return m
}

describe('exponential of a triangular matrix', () => {
  it('has the divided differences of the exponential below the diagonal', () => {
    const e = exponentialOf(real([[-1, 0], [1, -3]]), 0.8)
    expect(e.re[0]).toBeCloseTo(Math.exp(-0.8), 15)
    expect(e.re[2]).toBeCloseTo((Math.exp(-0.8) - Math.exp(-2.4)) / 2, 15)
    expect(e.re[1]).toBe(0)
  })

  it('is t·e^(−t) for a double pole', () => {
    const e = exponentialOf(real([[-1, 0], [1, -1]]), 20)
    expect(Math.abs(e.re[2]! / (20 * Math.exp(-20)) - 1)).toBeLessThan(1e-14)
  })

  it('keeps a slow mode beside one a billion times faster', () => {
    const e = exponentialOf(real([[-1, 0], [1e9, -1e9]]), 1)
    const expected = 1e9 * Math.exp(-1) / (1e9 - 1)
    expect(Math.abs(e.re[2]! / expected - 1)).toBeLessThan(1e-13)
    expect(e.re[0]).toBeCloseTo(Math.exp(-1), 15)
  })

  it('is the identity at t = 0', () => {
    expect([...exponentialOf(real([[-1, 0], [5, -2]]), 0).re]).toEqual([1, 0, 0, 1])
  })
})
