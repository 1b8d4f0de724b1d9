import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { Rational } from '../../../shared/engine/transfer'
import {
  add, compose, constant, divide, evaluateRational, feedback, fromCoefficients, gain, multiply, negate, orderOf, parallel,
  phase, poles, power, reciprocal, series, subtract, toCoefficients, variable, zeros,
} from '../../../shared/engine/transfer'
import type { Complex } from '../../../shared/engine/numeric/complex'
import * as complex from '../../../shared/engine/numeric/complex'
import { codeOf, k, lags, resonator, s, valueOf } from './support'

const coefficient = fc.double({ min: 0.05, max: 20, noNaN: true })
const polynomial = fc.array(coefficient, { minLength: 1, maxLength: 3 })
const section = fc.tuple(polynomial, polynomial, fc.integer({ min: -1, max: 1 }))
  .map(([n, d, origin]) => multiply(fromCoefficients(n, d), power(variable(), origin)))
const function2 = fc.tuple(section, section).map(([a, b]) => multiply(a, b))
const point = fc.record({ re: fc.double({ min: -0.9, max: 3, noNaN: true }), im: fc.double({ min: 0.2, max: 5, noNaN: true }) })

/** Error of a sum relative to its terms: what cancels between them is no fault of the sum. */
function near(a: Complex, b: Complex, size: number): boolean {
  return complex.modulus(complex.subtract(a, b)) <= 1e-10 * size
}

function agree(r: Rational, z: Complex, expected: Complex, ...terms: Complex[]): boolean {
  const size = Math.max(complex.modulus(expected), ...terms.map(complex.modulus))
  // Close to a pole a rounding of s itself moves the value.
  return size > 1e8 || near(evaluateRational(r, z.re, z.im), expected, size)
}

const at = (r: Rational, z: Complex) => evaluateRational(r, z.re, z.im)

describe('laws of transfer functions', () => {
  it('evaluates a sum as the sum of the values', () => {
    fc.assert(fc.property(function2, function2, point, (a, b, z) =>
      agree(add(a, b), z, complex.add(at(a, z), at(b, z)), at(a, z), at(b, z))))
  })

  it('evaluates a difference, product and quotient likewise', () => {
    fc.assert(fc.property(function2, function2, point, (a, b, z) =>
      agree(subtract(a, b), z, complex.subtract(at(a, z), at(b, z)), at(a, z), at(b, z))
      && agree(multiply(a, b), z, complex.multiply(at(a, z), at(b, z)))
      && agree(divide(a, b), z, complex.divide(at(a, z), at(b, z)))))
  })

  it('evaluates a composition as the value at the value', () => {
    fc.assert(fc.property(section, section, point, (outer, inner, z) => {
      const w = at(inner, z)
      return agree(compose(outer, inner), z, evaluateRational(outer, w.re, w.im))
    }))
  })

  it('evaluates a power as the power of the value', () => {
    fc.assert(fc.property(section, fc.integer({ min: -4, max: 4 }), point, (a, n, z) =>
      agree(power(a, n), z, complex.integerPower(at(a, z), n))))
  })

  it('closes the loop and puts impedances in parallel', () => {
    fc.assert(fc.property(section, section, point, (a, b, z) => {
      const loop = complex.add(complex.ONE, complex.multiply(at(a, z), at(b, z)))
      const sum = complex.add(at(a, z), at(b, z))
      return agree(feedback(a, b), z, complex.divide(at(a, z), loop), complex.divide(at(a, z), loop))
        && agree(parallel(a, b), z, complex.divide(complex.multiply(at(a, z), at(b, z)), sum))
        && agree(series(a, b), z, complex.multiply(at(a, z), at(b, z)))
    }))
  })

  it('cancels a function against itself', () => {
    fc.assert(fc.property(function2, (a) => {
      const one = divide(a, a)
      return one.numerator.length === 0 && one.denominator.length === 0 && one.origin === 0 && Math.abs(one.gain - 1) < 1e-12
        && subtract(a, a).gain === 0
    }))
  })

  it('has the values of its coefficients multiplied out', () => {
    fc.assert(fc.property(function2, point, (a, z) => {
      const { numerator, denominator } = toCoefficients(a)
      return agree(fromCoefficients(numerator, denominator), z, at(a, z))
    }))
  })
})

describe('factors', () => {
  it('stay as written', () => {
    const h = multiply(lags(1, 2), resonator(5, 0.1))
    expect(h.denominator.map(f => f.coefficients.length - 1)).toEqual([1, 1, 2])
  })

  it('cancel where their coefficients are equal, in the right half-plane too', () => {
    const common = fromCoefficients([-3, 1])
    const h = divide(common, multiply(common, fromCoefficients([1, 1])))
    expect(orderOf(h)).toBe(1)
  })

  it('are found again in a divider of two impedances', () => {
    const z1 = multiply(k(4.7e-6), s)
    const z2 = reciprocal(add(multiply(k(1e-5), s), reciprocal(add(k(0.68), reciprocal(multiply(k(4.7e-5), s))))))
    const h = divide(z2, add(z1, z2))
    expect(orderOf(h)).toBe(3)
    // computed with SciPy 1.10.1, NumPy 1.24.2 and mpmath 1.2.1 from the closed forms
    expect(valueOf(gain(h, 2 * Math.PI * 15e3))).toBeCloseTo(3.057430236508739, 10)
    expect(valueOf(phase(h, 2 * Math.PI * 150e3))).toBeCloseTo(-170.97423940784876, 9)
    expect(valueOf(zeros(h))[0]!.re).toBeCloseTo(-31289.111389236547, 6)
  })

  it('turn a low-pass into a high-pass and scale it', () => {
    const butterworth = resonator(1, Math.SQRT1_2)
    const high = compose(butterworth, divide(k(1e4), s))
    expect(high.origin).toBe(2)
    expect(valueOf(gain(high, 1e4))).toBeCloseTo(-3.010299956639812, 12)
    const scaled = compose(butterworth, divide(s, k(1e4)))
    expect(valueOf(gain(scaled, 1e4))).toBeCloseTo(-3.010299956639812, 12)
  })
})

describe('what cannot be formed', () => {
  it('is refused by value, and handed on', () => {
    const nothing = divide(k(1), constant(0))
    expect(nothing.refused?.code).toBe('divide-by-zero')
    expect(add(k(1), multiply(s, nothing)).refused?.code).toBe('divide-by-zero')
    expect(codeOf(poles(compose(nothing, s)))).toBe('divide-by-zero')
    expect(fromCoefficients([1], [0, 0]).refused?.code).toBe('divide-by-zero')
    expect(evaluateRational(nothing, 0, 1).re).toBeNaN()
  })

  it('is refused where the order runs away', () => {
    const h = lags(1, 2, 3)
    expect(power(h, 1000).refused?.code).toBe('order-too-high')
    expect(compose(power(h, 10), power(h, 10)).refused?.code).toBe('order-too-high')
    let sum = h
    for (let n = 0; n < 40 && !sum.refused; n++) sum = add(sum, compose(h, multiply(k(1 + n / 7), s)))
    expect(sum.refused?.code).toBe('order-too-high')
  })

  it('is refused where coefficients leave the range of doubles', () => {
    const tiny = fromCoefficients([1, 1e-12])
    const product = power(add(power(tiny, 30), k(1)), 1)
    expect(product.refused?.code).toBe('coefficient-range')
    expect(power(tiny, 30).refused).toBeUndefined()
  })

  it('is refused for a power that is no integer', () => {
    expect(power(s, 0.5).refused?.code).toBe('fractional-power')
  })

  it('is zero where it is zero', () => {
    const nothing = multiply(k(0), lags(1))
    expect(evaluateRational(nothing, 0, 1)).toEqual({ re: 0, im: 0 })
    expect(codeOf(poles(nothing))).toBe('zero-function')
    expect(negate(nothing).gain).toBe(0)
    expect(parallel(nothing, lags(1)).gain).toBe(0)
  })
})

describe('values far out', () => {
  it('do not overflow on the way', () => {
    const h = power(lags(1), 40)
    expect(valueOf(gain(h, 1e9))).toBeCloseTo(-7200, 9)
    expect(valueOf(gain(reciprocal(h), 1e9))).toBeCloseTo(7200, 9)
  })

  it('keep their digits in a deep null', () => {
    // (1 − x)(1 + x) with x = 1 + 2^-40, exact in doubles
    const x = 1 + 2 ** -40
    const null1 = fromCoefficients([1, 0, 1])
    expect(evaluateRational(null1, 0, x).re).toBe(-(2 ** -39) - 2 ** -80)
  })
})
