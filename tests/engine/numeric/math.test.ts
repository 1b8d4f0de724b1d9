import { describe, expect, it } from 'vitest'
import * as m from '../../../shared/engine/numeric/math'

// computed with mpmath 1.3.0 (30 digits), rounded to doubles
const VALUES: [string, number, number][] = [
  ['sin(1e22)', m.sin(1e22), -0.8522008497671888],
  ['cos(0.1)', m.cos(0.1), 0.9950041652780258],
  ['tan(1.5)', m.tan(1.5), 14.101419947171719],
  ['asin(0.3)', m.asin(0.3), 0.3046926540153975],
  ['acos(-0.3)', m.acos(-0.3), 1.8754889808102941],
  ['atan(3)', m.atan(3), 1.2490457723982544],
  ['atan2(-1, -2)', m.atan2(-1, -2), -2.677945044588987],
  ['exp(-30.5)', m.exp(-30.5), 5.675685232632723e-14],
  ['expm1(1e-10)', m.expm1(1e-10), 1.00000000005e-10],
  ['ln(10)', m.ln(10), 2.302585092994046],
  ['log1p(1e-12)', m.log1p(1e-12), 9.999999999995e-13],
  ['log10(2)', m.log10(2), 0.3010299956639812],
  ['log2(10)', m.log2(10), 3.321928094887362],
  ['pow(1.7, 2.3)', m.pow(1.7, 2.3), 3.388695291147646],
  ['sinh(2)', m.sinh(2), 3.6268604078470186],
  ['cosh(2)', m.cosh(2), 3.7621956910836314],
  ['tanh(0.7)', m.tanh(0.7), 0.6043677771171636],
  ['cbrt(-27)', m.cbrt(-27), -3],
  ['hypot(3e200, 4e200)', m.hypot(3e200, 4e200), 5e200],
]

describe('elementary functions', () => {
  it.each(VALUES)('%s is right to the last digits', (_, value, expected) => {
    expect(Math.abs(value - expected)).toBeLessThanOrEqual(4 * m.EPSILON * Math.abs(expected))
  })

  it('gives powers of two exactly, down to the smallest', () => {
    expect(m.powerOfTwo(10)).toBe(1024)
    expect(m.powerOfTwo(-1074)).toBe(5e-324)
    expect(m.powerOfTwo(1023)).toBe(8.98846567431158e307)
    expect(m.powerOfTwo(1024)).toBe(Infinity)
  })

  it('raises to integer powers exactly where that is possible', () => {
    expect(m.integerPower(-3, 5)).toBe(-243)
    expect(m.integerPower(2, -3)).toBe(0.125)
    expect(m.integerPower(7, 0)).toBe(1)
  })

  it('rounds to decades from either side', () => {
    expect(m.floorDecade(1000)).toBe(1000)
    expect(m.floorDecade(999.9)).toBe(100)
    expect(m.ceilDecade(1000)).toBe(1000)
    expect(m.ceilDecade(1000.1)).toBe(10000)
    expect(m.floorDecade(0.002)).toBe(0.001)
    expect(m.ceilDecade(0.002)).toBe(0.01)
  })
})
