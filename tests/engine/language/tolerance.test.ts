/** L6 and L13 against worst cases computed with SciPy (data/tolerance.json) and closed forms. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import data from '../data/tolerance.json'
import { boundsIn, expression, last, refusal, valueIn } from './support'

function reference(start: string): unknown {
  const record = data.records.find(found => found.quantity.startsWith(start))
  if (!record) throw new Error(`no record ${start}`)
  return record.value
}

const close = (found: number, expected: number, relative: number) => expect(Math.abs(found / expected - 1)).toBeLessThanOrEqual(relative)

describe('bounds proved by interval derivatives', () => {
  it('of a natural frequency', () => {
    const [low, high] = reference('TOL-A worst case f0 (corners)') as [number, number]
    const bounds = boundsIn('Hz', 'f', 'L = 10 mH ± 5 %', 'C = 100 nF ± 10 %', 'f = 1/(2*pi*sqrt(L*C)) to Hz')
    close(bounds.low, low, 1e-12)
    close(bounds.high, high, 1e-12)
    expect(bounds.method).toBe('proved')
  })

  it('of a quality factor with shared inputs', () => {
    const [low, high] = reference('TOL-B worst case Q') as [number, number]
    const bounds = boundsIn('', 'Q', 'R = 50 ohm ± 1 %', 'L = 10 mH ± 5 %', 'C = 100 nF ± 10 %', 'Q = sqrt(L/C)/R')
    close(bounds.low, low, 1e-12)
    close(bounds.high, high, 1e-12)
    expect(bounds.method).toBe('proved')
  })

  it('of a divider, where a resistor stands above and below', () => {
    const [low, high] = reference('TOL-D divider 10k/10k') as [number, number]
    const bounds = boundsIn('V', 'V_o', 'R_1 = 10 kohm ± 5 %', 'R_2 = 10 kohm ± 5 %', 'V_o = (10 V)*R_2/(R_1 + R_2)')
    close(bounds.low, low, 1e-12)
    close(bounds.high, high, 1e-12)
    expect(bounds.method).toBe('proved')
  })

  it('with unequal limits', () => {
    const [low, high] = reference('TOL-E f0 limits') as [number, number]
    const bounds = boundsIn('Hz', 'f', 'L = 10 mH', 'C = between(100 nF, 80 nF, 180 nF)', 'f = 1/(2*pi*sqrt(L*C)) to Hz')
    close(bounds.low, low, 1e-12)
    close(bounds.high, high, 1e-12)
  })
})

describe('bounds by search', () => {
  const parts = ['R = 5 ohm ± 1 %', 'L = 10 mH ± 5 %', 'C = 100 nF ± 10 %', 'f_0 = 5032.921210448703 Hz', 'H(s) = 1/(L*C*s^2 + R*C*s + 1)']

  it('find the extreme inside the box, where the corners mislead', () => {
    const bounds = boundsIn('', 'magnitude(H, f_0)', ...parts)
    close(bounds.high, reference('TOL-C trap: true maximum') as number, 1e-8)
    close(bounds.low, reference('TOL-C smallest') as number, 1e-9)
    expect(bounds.method).toBe('searched')
    expect(bounds.high).toBeGreaterThan(3 * (reference('TOL-C trap: largest |H| over the 8 corners') as number))
  })

  it('find a maximum between two limits', () => {
    const bounds = boundsIn('', 'x*(1 - x)', 'x = 0.45 ± 0.2')
    close(bounds.high, 0.25, 1e-12)
    close(bounds.low, 0.25 * 0.75, 1e-12)
    expect(bounds.method).toBe('searched')
  })

  it('enclose every value inside the box', () => {
    fc.assert(fc.property(fc.double({ min: -1, max: 1, noNaN: true }), fc.double({ min: -1, max: 1, noNaN: true }), (a, b) => {
      const lines = ['x = 2 ± 0.5', 'y = 3 ± 20 %', 'z = (x - y)^2 + x*y']
      const bounds = boundsIn('', 'z', ...lines)
      const [x, y] = [2 + 0.5 * a, 3 + 0.6 * b]
      const z = (x - y) * (x - y) + x * y
      expect(z).toBeGreaterThanOrEqual(bounds.low - 1e-9)
      expect(z).toBeLessThanOrEqual(bounds.high + 1e-9)
    }), { numRuns: 25, seed: 7 })
  })

  it('say where a value does not exist within its tolerances', () => {
    const result = expression('sqrt(x)', 'x = 1 ± 2')
    expect(result.problems[0]).toMatchObject({ code: 'undefined-within-tolerance', message: expect.stringContaining('x at its lower limit') })
  })
})

describe('a value with tolerance', () => {
  it('is one variable wherever its name appears', () => {
    const bounds = boundsIn('', 'R/R_a', 'R = 10 ohm ± 10 %', 'R_a = R')
    close(bounds.low, 1, 1e-12)
    close(bounds.high, 1, 1e-12)
  })

  it('can be written with ±, +- and +/-, in percent, ppm or its own unit', () => {
    for (const line of ['R = 4.7 kohm ± 5%', 'R = 4.7 kohm +- 5 %', 'R = 4.7 kohm +/- 235 ohm', 'R = 4.7 kohm±50000 ppm', 'R = 4.7 kohm ± 5 % to ohm']) {
      expect(valueIn('kohm', 'low(R)', line), line).toBeCloseTo(4.465, 12)
      expect(valueIn('kohm', 'high(R)', line), line).toBeCloseTo(4.935, 12)
      expect(valueIn('kohm', 'nominal(R)', line), line).toBeCloseTo(4.7, 12)
    }
  })

  it('takes percent of the modulus of the nominal', () => {
    expect(boundsIn('V', 'V_n', 'V_n = -10 V ± 10 %')).toMatchObject({ low: -11, high: -9 })
  })

  it('of a temperature is an interval', () => {
    expect(boundsIn('degC', 'T', 'T = 25 degC ± 60 K').high).toBeCloseTo(85, 9)
    expect(refusal('T = 25 degC ± 5 %').code).toBe('tolerance-of-temperature')
  })

  it.each([
    ['x = 2*(3 ± 1)', 'tolerance-place'],
    ['x = 3 ± 1 ± 2', 'tolerance-twice'],
    ['x = 3 ± -1', 'tolerance-negative'],
    ['x = 3 V ± 1', 'tolerance-unit'],
    ['x = 3 V ± 1 A', 'dimension-mismatch'],
    ['x = i ± 1', 'tolerance-complex'],
    ['H(s) = s ± 1', 'tolerance-place'],
    ['x = between(1, 2, 3)', 'tolerance-order'],
    ['x = 2*between(2, 1, 3)', 'between-place'],
    ['x = 3 V to mV ± 1 V', 'tolerance-place'],
  ])('%s is refused', (line, code) => {
    expect(refusal(line).code).toBe(code)
  })

  it('has none yet', () => {
    expect(refusal('a = 3 ± 1', 'b = a ± 1')).toMatchObject({ code: 'tolerance-of-tolerance', message: expect.stringContaining('`a`') })
  })

  it('bounds what a transfer function gives', () => {
    const bounds = boundsIn('Hz', 'cornerFrequency(H)', 'R = 4.7 kohm ± 5%', 'C = 100 nF ± 10%', 'H(s) = 1/(1 + s*R*C)')
    close(bounds.low, 293.18401601159684, 1e-9)
    close(bounds.high, 396.0556005770694, 1e-9)
  })
})

describe('requirements', () => {
  const parts = ['R = 4.7 kohm ± 5%', 'C = 100 nF ± 10%', 'f_c = 1/(2*pi*R*C) to Hz']
  const verdict = (line: string) => last(...parts, line).requirement

  it('are met, not met at worst case, or not met', () => {
    expect(verdict('f_c <= 400 Hz')?.verdict).toBe('met')
    expect(verdict('f_c <= 390 Hz')?.verdict).toBe('not met at worst case')
    expect(verdict('f_c <= 330 Hz')?.verdict).toBe('not met')
  })

  it('state the worst-case margin and the nominal one', () => {
    const found = verdict('f_c >= 300 Hz')
    expect(found?.marginSi).toBeCloseTo(293.18401601159684 - 300, 9)
    expect(found?.nominalMarginSi).toBeCloseTo(338.62753849339435 - 300, 9)
    expect(found?.untoleranced).toEqual([])
  })

  it('take the difference as one expression, so that shared tolerances cancel', () => {
    expect(last('a = 5 V ± 10 %', 'b = a - 1 V', 'a - b >= 0.9 V').requirement).toMatchObject({ verdict: 'met' })
    expect(last('a = 5 V ± 10 %', 'b = a - 1 V', 'a >= b').requirement?.marginSi).toBeCloseTo(1, 12)
  })

  it('count a margin within 1e-12 of the larger side as met, unless strict', () => {
    expect(last('0.1 V + 0.2 V <= 0.3 V').requirement?.verdict).toBe('met')
    expect(last('0.3 V < 0.3 V').requirement?.verdict).toBe('not met')
    expect(last('0.3 V < 0.31 V').requirement?.verdict).toBe('met')
  })

  it('hold for the worst item of a list and the worst part of a chain', () => {
    expect(last('[1 V, 2 V, 3 V] <= 2.5 V').requirement).toMatchObject({ verdict: 'not met', marginSi: -0.5, at: 'item 3' })
    expect(last('x = 2 V', '1 V <= x <= 2.25 V').requirement).toMatchObject({ verdict: 'met', marginSi: 0.25, at: 'x <= 2.25 V' })
  })

  it('over a band name the worst frequency and can be drawn', () => {
    const found = last('H(s) = 1/(1 + s*(1 ms))', 'attenuation(H, band(10 kHz, 1 MHz)) >= 30 dB # stop band').requirement
    expect(found).toMatchObject({ verdict: 'met', subject: 'stop band', at: '10.00 kHz', barrier: { transfer: 'H', quantity: 'attenuation', sense: 'at least', limit: 30 } })
    expect(found?.barrier?.from).toBeCloseTo(10_000, 6)
    expect(found?.barrier?.to).toBeCloseTo(1e6, 6)
    expect(last('H(s) = 1/(1 + s*(1 ms))', 'gain(H, band(1 Hz, 10 kHz)) <= 1 dB').requirement?.verdict).toBe('met')
    expect(last('H(s) = 1/(1 + s*(1 ms))', 'gain(H, band(1 Hz, 10 kHz)) >= -3 dB').requirement?.verdict).toBe('not met')
  })

  it('name the parts without a tolerance that they rest on', () => {
    expect(last('R = 1 kohm', 'C = 100 nF ± 10 %', 'tau = R*C', 'tau <= 1 ms').requirement?.untoleranced).toEqual(['R'])
  })

  it('are refused where two sides cannot be ordered', () => {
    expect(refusal('1 V <= 2 V >= 1 V').code).toBe('chain-direction')
    expect(refusal('2 + i >= 1').code).toBe('complex-order')
    expect(refusal('x = 1 > 2').code).toBe('comparison-place')
    expect(refusal('1 V == 1 V').code).toBe('equality')
    expect(refusal('1 V != 1 V').code).toBe('equality')
    expect(refusal('1 V >= 1 A').message).toContain('compared')
  })

  it('an unbounded margin is greater than any limit', () => {
    expect(last('L_g(s) = 1/(1 + s*(1 ms))', 'gainMargin(L_g) >= 60 dB').requirement).toMatchObject({ verdict: 'met', margin: { text: 'unbounded' } })
    expect(last('L_g(s) = 1/(1 + s*(1 ms))', 'gainMargin(L_g)').value).toMatchObject({ type: 'unbounded' })
  })
})
