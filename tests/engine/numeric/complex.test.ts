import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import * as c from '../../../shared/engine/numeric/complex'
import type { Complex } from '../../../shared/engine/numeric/complex'

const part = fc.double({ min: -1e6, max: 1e6, noNaN: true })
const anyComplex = fc.record({ re: part, im: part })
const nonZero = anyComplex.filter(z => c.modulus(z) > 1e-6)

function near(a: Complex, b: Complex, relative = 1e-12): boolean {
  return c.modulus(c.subtract(a, b)) <= relative * Math.max(c.modulus(a), c.modulus(b), 1e-300)
}

describe('complex arithmetic', () => {
  it('divides what it multiplied', () => {
    fc.assert(fc.property(nonZero, nonZero, (a, b) => near(c.divide(c.multiply(a, b), b), a)))
  })

  it('squares its square roots, with the root in the right half-plane', () => {
    fc.assert(fc.property(nonZero, (z) => {
      const root = c.squareRoot(z)
      return root.re >= 0 && near(c.multiply(root, root), z)
    }))
  })

  it('undoes the logarithm by the exponential', () => {
    fc.assert(fc.property(nonZero, z => near(c.exponential(c.logarithm(z)), z, 1e-11)))
  })

  it('agrees between integer powers and repeated products', () => {
    fc.assert(fc.property(nonZero, z => near(c.power(z, c.complex(3)), c.multiply(z, c.multiply(z, z)))))
  })

  it('keeps sin² + cos² = 1', () => {
    const small = fc.record({ re: fc.double({ min: -3, max: 3, noNaN: true }), im: fc.double({ min: -3, max: 3, noNaN: true }) })
    fc.assert(fc.property(small, (z) => {
      const s = c.sine(z)
      const k = c.cosine(z)
      return c.modulus(c.subtract(c.add(c.multiply(s, s), c.multiply(k, k)), c.ONE)) < 1e-11
    }))
  })

  // M. Baudin and R. L. Smith, arXiv:1210.4539, table of difficult divisions; the exact quotients.
  it.each([
    [{ re: 1, im: 1 }, { re: 1, im: 1e307 }, { re: 1e-307, im: -1e-307 }],
    [{ re: 1e307, im: 1e-307 }, { re: 1e204, im: 1e-204 }, { re: 1e103, im: -1e-305 }],
    [{ re: 8.98846567431158e307, im: 8.98846567431158e307 }, { re: 8.98846567431158e307, im: 8.98846567431158e307 }, { re: 1, im: 0 }],
    [{ re: 1e-300, im: 1e-300 }, { re: 2e-300, im: 0 }, { re: 0.5, im: 0.5 }],
  ])('divides without leaving the range: %o / %o', (a, b, expected) => {
    const quotient = c.divide(a, b)
    expect(near(quotient, expected)).toBe(true)
  })

  it('has the principal power of zero where there is one', () => {
    expect(c.power(c.ZERO, c.complex(0.5))).toEqual(c.ZERO)
    expect(c.isFiniteComplex(c.power(c.ZERO, c.complex(-0.5)))).toBe(false)
  })

  it('takes a long lossy line to ±1', () => {
    expect(c.hyperbolicTangent(c.complex(800, 1))).toEqual({ re: 1, im: 0 })
    expect(near(c.hyperbolicTangent(c.complex(-800, 3)), c.complex(-1))).toBe(true)
    expect(near(c.hyperbolicTangent(c.complex(0.3, 0.4)), c.divide(c.hyperbolicSine(c.complex(0.3, 0.4)), c.hyperbolicCosine(c.complex(0.3, 0.4))))).toBe(true)
  })
})
