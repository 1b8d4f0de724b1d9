import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { Polynomial } from '../../../shared/engine/numeric/polynomial'
import { addPolynomials, evaluatePolynomial, multiplyPolynomials, sumOfTerms } from '../../../shared/engine/numeric/polynomial'
import { rootsOf } from '../../../shared/engine/numeric/roots'
import { reciprocal } from '../../../shared/engine/numeric/complex'
import { EPSILON, hypot } from '../../../shared/engine/numeric/math'

function expanded(roots: readonly { re: number, im: number }[], lead = 1): Polynomial {
  let p: Polynomial = [lead]
  for (const z of roots) {
    if (z.im > 0) p = multiplyPolynomials(p, [z.re * z.re + z.im * z.im, -2 * z.re, 1])
    else if (z.im === 0) p = multiplyPolynomials(p, [-z.re, 1])
  }
  return p
}

function expectRoots(found: readonly { re: number, im: number }[], expected: readonly [number, number][], relative: number): void {
  expect(found).toHaveLength(expected.length)
  const left = [...found]
  for (const [re, im] of expected) {
    const distances = left.map(z => hypot(z.re - re, z.im - im))
    const best = distances.indexOf(Math.min(...distances))
    expect(distances[best]).toBeLessThanOrEqual(relative * hypot(re, im))
    left.splice(best, 1)
  }
}

describe('roots of polynomials', () => {
  it('solves degree one and two in closed form without cancellation', () => {
    expect(rootsOf([3, 6]).map(z => z.re)).toEqual([-0.5])
    expectRoots(rootsOf([1, 1e9, 1]), [[-1e-9, 0], [-1e9, 0]], 1e-15)
    expectRoots(rootsOf([1, -1e200, 1e-3]), [[1e-200, 0], [1e203, 0]], 1e-15)
    expectRoots(rootsOf([25, -6, 1]), [[3, 4], [3, -4]], 1e-15)
  })

  it('keeps the two roots of a nearly critical section apart', () => {
    const zeta = 1 + 1e-12
    const split = Math.sqrt((zeta - 1) * (zeta + 1))
    expectRoots(rootsOf([1, 2 * zeta, 1]), [[-zeta + split, 0], [-zeta - split, 0]], 1e-12)
  })

  it('makes one double root of two that only rounding separates', () => {
    const roots = rootsOf([1, Math.sqrt(2) * Math.sqrt(2), 1])
    expect(roots.map(z => z.im)).toEqual([0, 0])
    expect(roots[0]!.re).toBe(roots[1]!.re)
  })

  it('puts zeros at the origin apart', () => {
    expect(rootsOf([0, 0, 2, 1]).map(z => z.re)).toEqual([0, 0, -2])
    expect(rootsOf([0])).toEqual([])
    expect(rootsOf([])).toEqual([])
    expect(rootsOf([5])).toEqual([])
  })

  it('finds roots thirty decades apart', () => {
    const at = [-1e-15, -1, -1e4, -1e15]
    expectRoots(rootsOf(expanded(at.map(re => ({ re, im: 0 })))), at.map(re => [re, 0]), 1e-14)
  })

  it('takes coefficients over sixty decades', () => {
    const p = [1e-30, 3e-20, 1, 2e15, 1e30]
    for (const z of rootsOf(p)) {
      expect(hypot(...parts(evaluatePolynomial(p, z.re, z.im)))).toBeLessThanOrEqual(1e-14 * sumOfTerms(p, hypot(z.re, z.im)))
    }
  })

  it('finds multiple roots as multiple', () => {
    expectRoots(rootsOf([1, 3, 3, 1]), [[-1, 0], [-1, 0], [-1, 0]], 1e-15)
    const quadruple = rootsOf(expanded([{ re: -2, im: 5 }, { re: -2, im: 5 }]))
    expectRoots(quadruple, [[-2, 5], [-2, 5], [-2, -5], [-2, -5]], 1e-9)
  })

  it('puts the roots of even polynomials on the axis', () => {
    for (const z of rootsOf([1, 0, 3, 0, 1])) expect(z.re).toBe(0)
    const mixed = rootsOf([1, 1, 1, 1])
    expect(mixed.filter(z => z.im !== 0).map(z => z.re)).toEqual([0, 0])
  })

  // Wilkinson's polynomial: the roots are known, their conditioning notorious (The Perfidious Polynomial, 1984).
  it('finds 1 … 15 as far as the coefficients tell', () => {
    const roots = rootsOf(expanded(Array.from({ length: 15 }, (_, k) => ({ re: k + 1, im: 0 }))))
    roots.forEach((z, k) => expect(Math.abs(z.re - k - 1)).toBeLessThanOrEqual(Math.max(4 * z.error, 1e-14)))
  })

  it('solves order forty', () => {
    // 1 + s + … + s^40: the roots are the 41st roots of one but for 1 itself.
    const roots = rootsOf(new Array<number>(41).fill(1))
    const expected = Array.from({ length: 40 }, (_, k): [number, number] => {
      const angle = 2 * Math.PI * (k + 1) / 41
      return [Math.cos(angle), Math.sin(angle)]
    })
    expectRoots(roots, expected, 1e-14)
  })

  it('comes in exact conjugate pairs', () => {
    fc.assert(fc.property(fc.array(fc.oneof(fc.constant(0), fc.double({ min: 1e-6, max: 10, noNaN: true }), fc.double({ min: -10, max: -1e-6, noNaN: true })), { minLength: 4, maxLength: 12 }), (p) => {
      const roots = rootsOf(p)
      return roots.every(z => z.im === 0 || roots.some(w => w.re === z.re && w.im === -z.im))
    }), { numRuns: 200 })
  })

  it('gives the polynomial back when multiplied out', () => {
    const real = fc.double({ min: -100, max: -0.01, noNaN: true }).map(re => ({ re, im: 0 }))
    const pair = fc.tuple(fc.double({ min: -50, max: 50, noNaN: true }), fc.double({ min: 0.1, max: 50, noNaN: true })).map(([re, im]) => ({ re, im }))
    fc.assert(fc.property(fc.array(fc.oneof(real, pair), { minLength: 2, maxLength: 8 }), (roots) => {
      const p = expanded(roots, 3)
      const back = expanded(rootsOf(p).map(z => ({ re: z.re, im: z.im })), 3)
      const size = sumOfTerms(p, 1)
      return back.length === p.length && back.every((c, k) => Math.abs(c - p[k]!) <= 1e-10 * Math.abs(p[k]!) + 1e-12 * size)
    }), { numRuns: 200 })
  })

  it('leaves residues no larger than the rounding of the coefficients', () => {
    const coefficient = fc.double({ min: -1, max: 1, noNaN: true }).filter(x => Math.abs(x) > 1e-3)
    const exponent = fc.integer({ min: -20, max: 20 })
    fc.assert(fc.property(fc.array(fc.tuple(coefficient, exponent), { minLength: 4, maxLength: 20 }), (parts10) => {
      const p = parts10.map(([x, e]) => x * 10 ** e)
      return rootsOf(p).every((z) => {
        const size = hypot(z.re, z.im)
        const [q, w] = size > 1 ? [[...p].reverse(), reciprocal(z)] : [p, z]
        const slack = 8 * p.length * EPSILON * sumOfTerms(q, hypot(w.re, w.im))
        return z.error < 1e6 * size && hypot(...parts(evaluatePolynomial(q, w.re, w.im))) <= slack
      })
    }), { numRuns: 200 })
  })
})

describe('sums of polynomials', () => {
  it('drops a leading coefficient that is mere rounding', () => {
    expect(addPolynomials([1, 0.1 + 0.2], [1, -0.3])).toEqual([2])
    expect(addPolynomials([1, 0.3], [0, -0.2999999])).toHaveLength(2)
  })
})

function parts(z: { re: number, im: number }): [number, number] {
  return [z.re, z.im]
}
