import { describe, expect, it } from 'vitest'
import type { Rational } from '../../../shared/engine/transfer'
import {
  automaticDuration, automaticRange, compose, curveMarks, divide, factoredForm, frequencyCurve, fromCoefficients, gain, multiply, phase,
  power, sampleResponse, settlingTime, standardForm, stepCurve, stepResponse,
} from '../../../shared/engine/transfer'
import { codeOf, expectAbsolute, expectRelative, k, lags, resonator, s, sPower, valueOf } from './support'

const functions: [string, Rational][] = [
  ['first order', lags(1e3)],
  ['a high Q', resonator(1e6, 1e-4)],
  ['a null', divide(fromCoefficients([1, 0, 1e-8]), fromCoefficients([1, 1e-4, 1e-8]))],
  ['two integrators', multiply(k(-3), sPower(-2))],
  ['order forty', power(lags(1e4), 40)],
  ['a right half-plane zero and a third-order polynomial', fromCoefficients([-1, 2], [1, 3, 0.5, 4])],
]

describe('frequency curves', () => {
  it.each(functions)('give the figures point by point: %s', (_, h) => {
    const range = valueOf(automaticRange(h))
    const curve = valueOf(frequencyCurve(h, range.from, range.to, 200))
    expect(curve.frequency.length).toBeGreaterThanOrEqual(200)
    curve.frequency.forEach((f, i) => {
      if (i > 0) expect(f).toBeGreaterThan(curve.frequency[i - 1]!)
      const omega = f * 2 * Math.PI
      const level = gain(h, omega)
      // In a null the two ways round differently, hundreds of decibels down.
      if (level.ok && level.value > -300) expectAbsolute(curve.gain[i]!, level.value, 1e-8)
      expectAbsolute(curve.phase[i]!, valueOf(phase(h, omega)), 1e-6)
    })
  })

  it('resolve a resonance between the points of the even spacing', () => {
    const h = resonator(2 * Math.PI * 1234.5, 1e-5)
    const curve = valueOf(frequencyCurve(h, 10, 1e5, 50))
    expectAbsolute(Math.max(...curve.gain), 20 * Math.log10(1 / 2e-5), 1e-6)
  })

  it('cut nulls and poles on the axis so that they can be drawn', () => {
    const curve = valueOf(frequencyCurve(divide(fromCoefficients([1, 0, 1]), fromCoefficients([4, 0, 1])), 0.01, 10, 100))
    expect([...curve.gain].every(Number.isFinite)).toBe(true)
    const samples = new Float64Array(1)
    sampleResponse(fromCoefficients([1, 0, 1]), Float64Array.of(1), samples)
    expect(samples[0]).toBe(-Infinity)
  })

  it('refuse ranges that run backwards', () => {
    expect(codeOf(frequencyCurve(lags(1), 10, 1, 100))).toBe('band-range')
    expect(codeOf(frequencyCurve(lags(1), 0, 1, 100))).toBe('band-range')
    expect(codeOf(frequencyCurve(lags(1), 1, NaN, 100))).toBe('band-range')
  })

  it('choose whole decades about the poles and zeros', () => {
    const hertz = 2 * Math.PI
    expect(valueOf(automaticRange(lags(33e3 * hertz)))).toEqual({ from: 1e3, to: 1e6 })
    expect(valueOf(automaticRange(lags(1e3 * hertz, 1e5 * hertz)))).toEqual({ from: 100, to: 1e6 })
    expect(valueOf(automaticRange(k(2)))).toEqual({ from: 1, to: 1e6 })
    const unity = valueOf(automaticRange(multiply(k(2e3 * Math.PI), sPower(-1))))
    expect(unity.from).toBeLessThan(1e3)
    expect(unity.to).toBeGreaterThan(1e3)
  })

  it('mark corner, peak and half power', () => {
    const marks = curveMarks(resonator(2 * Math.PI * 1e3, 0.1))
    expect(marks.map(m => m.kind)).toEqual(['peak', 'corner', 'cut-off'])
    expectRelative(marks[1]!.frequency, 1e3, 1e-14)
    expectAbsolute(marks[2]!.gain, -3.010299956639812, 1e-11)
    expect(curveMarks(divide(s, fromCoefficients([1, 0.1, 1]))).map(m => m.kind)).toEqual(['cut-off', 'corner', 'peak', 'cut-off'].sort(() => 0))
    expect(curveMarks(k(3))).toEqual([])
  })
})

describe('step curves', () => {
  it.each([
    ['apart', resonator(100, 0.2)], ['equal', power(lags(50), 3)], ['growing', fromCoefficients([1], [-1, 1])],
  ])('give the step response point by point, poles %s', (_, h) => {
    const duration = valueOf(automaticDuration(h))
    const curve = valueOf(stepCurve(h, duration, 101))
    expect(curve.time[100]).toBeCloseTo(duration, 12)
    curve.time.forEach((t, i) => expectAbsolute(curve.value[i]!, valueOf(stepResponse(h, t)), 1e-11 * Math.max(1, Math.abs(curve.value[i]!))))
  })

  it('last long enough to see it settle, and round', () => {
    for (const h of [lags(3), resonator(70, 0.3), multiply(lags(1), lags(1e6))]) {
      const duration = valueOf(automaticDuration(h))
      expect(duration).toBeGreaterThan(valueOf(settlingTime(h, 0.02)))
      expect([1, 2, 5]).toContain(Math.round(duration / 10 ** Math.floor(Math.log10(duration * 1.0001))))
    }
  })

  it('show the first cycles of a high Q', () => {
    expectAbsolute(valueOf(automaticDuration(resonator(2 * Math.PI, 1e-5))), 50, 1e-9)
    expect(valueOf(automaticDuration(resonator(2 * Math.PI, 0)))).toBe(10)
  })

  it('have a final value only where they settle', () => {
    expect(valueOf(stepCurve(lags(1), 5, 10)).finalValue).toBe(1)
    expect(valueOf(stepCurve(multiply(s, lags(1)), 5, 10)).finalValue).toBe(0)
    expect(valueOf(stepCurve(resonator(1, 0), 5, 10)).finalValue).toBeUndefined()
    expect(valueOf(stepCurve(sPower(-1), 5, 10)).finalValue).toBeUndefined()
    expect(codeOf(stepCurve(s, 5, 10))).toBe('improper')
    expect(codeOf(stepCurve(lags(1), 0, 10))).toBe('duration-range')
    expect(codeOf(stepCurve(fromCoefficients([1], [-1, 1]), 1e6, 10))).toBe('response-range')
  })
})

describe('standard form', () => {
  it('keeps second-order factors, complex or not, and merges equals', () => {
    const h = multiply(multiply(k(6), power(lags(10), 2)), multiply(fromCoefficients([1, -1 / 30]), multiply(sPower(-1), fromCoefficients([1], [400, 50, 1]))))
    expect(valueOf(standardForm(h))).toEqual({
      gain: 6 / 400,
      origin: -1,
      numerator: [{ kind: 'first', omega: 30, sign: -1, power: 1 }],
      denominator: [{ kind: 'first', omega: 10, sign: 1, power: 2 }, { kind: 'second', omega: 20, zeta: 1.25, power: 1 }],
    })
  })

  it('takes a polynomial of higher order apart', () => {
    const form = valueOf(standardForm(fromCoefficients([2], [6, 11, 6, 1])))
    expect(form.gain).toBeCloseTo(1 / 3, 15)
    expect(form.denominator.map(f => [f.kind, Math.round(f.omega * 1e9) / 1e9])).toEqual([['first', 1], ['first', 2], ['first', 3]])
  })

  it('leaves out pairs that were cancelled', () => {
    const h = fromCoefficients([1e3 * (1 + 1e-10), 1], [1e3, 1001, 1])
    expect(valueOf(standardForm(h)).numerator).toEqual([])
    expect(valueOf(standardForm(h)).denominator).toHaveLength(1)
  })

  it('has a factored form in the roots', () => {
    const h = compose(fromCoefficients([0, 3], [1, 0.2, 1]), divide(s, k(10)))
    const form = valueOf(factoredForm(h))
    expect(form.zeros).toEqual([{ re: 0, im: 0, power: 1 }])
    expect(form.poles).toHaveLength(1)
    expectRelative(form.poles[0]!.im, 10 * Math.sqrt(0.99), 1e-14)
    expectRelative(form.gain, 30, 1e-14)
  })
})
