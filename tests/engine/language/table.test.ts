/** The table of lines and their meaning at the end of the language's definition. */
import { describe, expect, it } from 'vitest'
import { expression, last, refusal, valueIn, warningsOf } from './support'

const ABOVE = [
  'V = 24 V', 'L = 10 uH', 'C = 2.2 uF', 'A = 3 A', 'R = 4.7 kohm', 'W = 2 W', 'K = 5', 'f = 2 kHz', 'f_0 = 1 kHz',
  'w_c = 1000 rad/s', 'w_0 = 1/sqrt(L*C)', 'Z = 10 ohm', 'H(s) = 1/(1 + s*R*C)', 'B(p) = 1/(1 + p)',
]

const refused = (line: string) => refusal(...ABOVE, line)
const value = (unit: string, source: string) => valueIn(unit, source, ...ABOVE)

describe('units and names', () => {
  it.each([
    ['5 V', 'V', 5],
    ['(20 mA)/V', 'mS', 20 / 24],
    ['20 mA/(1 V)', 'mS', 20],
    ['5 V/R', 'mA', 5 / 4.7],
    ['2 R C', 'ms', 20.68],
    ['2 pi f', '1/s', 12566.370614359172],
    ['10 kohm/2 kohm', '', 5],
    ['1/2*C*V^2', 'uJ', 633.6],
    ['1/(2 pi f C)', 'ohm', 36.171577975452],
  ])('%s in %s is %d', (source, unit, is) => {
    expect(value(unit, source)).toBeCloseTo(is, 10)
  })

  it.each([
    ['(2 - 5i) V', 'unit-or-name', ['(2 - 5 i)*(1 V)', '(2 - 5 i)*V']],
    ['20 mA/V', 'unit-or-name', ['20 mA/(1 V)', '(20 mA)/V']],
    ['12 V*A', 'unit-or-name', ['12 V*(1 A)', '(12 V)*A']],
    ['2 C R', 'name-after-unit', ['(2 C)*R', '2*C*R']],
    ['1/2 pi', 'product-after-quotient', ['(1/2)*pi', '1/(2 pi)']],
    ['1/10 kHz', 'product-after-quotient', ['(1/10)*kHz', '1/(10 kHz)']],
  ])('%s is refused with both ways written out', (line, code, ways) => {
    const { code: found, hint } = refused(line)
    expect(found).toBe(code)
    for (const way of ways) expect(hint).toContain(`\`${way}\``)
  })

  it('both ways that a hint writes out can be computed', () => {
    for (const source of ['20 mA/(1 V)', '(20 mA)/V', '12 V*(1 A)', '(12 V)*A', '(2 C)*R', '2*C*R', '(1/2)*pi', '1/(2 pi)', '1/(10 kHz)']) {
      expect(expression(source, ...ABOVE).status, source).toBe('ok')
    }
  })
})

describe('transfer functions', () => {
  it('refuses a number directly before s', () => {
    expect(refused('G(s) = K/(2 s)')).toMatchObject({ code: 'variable-or-second', hint: expect.stringMatching(/2\*s.*2 second/) })
  })

  it('reads `s*10 us` as the variable times ten microseconds', () => {
    expect(valueIn('Hz', 'cornerFrequency(G)', 'G(s) = 1/(1 + s*10 us)')).toBeCloseTo(15915.49430918953, 6)
  })

  it('reads `rad/s` after a number as the unit', () => {
    expect(valueIn('Hz', 'cornerFrequency(G)', 'G(s) = 1 + s/(1000 rad/s)')).toBeCloseTo(159.15494309189535, 9)
  })

  it('composes', () => {
    expect(valueIn('Hz', 'cornerFrequency(G)', ...ABOVE, 'G(s) = B(s/w_c)')).toBeCloseTo(159.15494309189535, 9)
  })

  it('warns of s over a value in Hz', () => {
    expect(warningsOf('G(s) = 1 + s/(10 kHz)')).toEqual(['laplace-hertz'])
  })

  it('takes frequencies with a mark only', () => {
    expect(expression('gain(H, 2*f_0)', ...ABOVE).status).toBe('ok')
    expect(refused('gain(H, w_0)')).toMatchObject({ code: 'frequency-unmarked', hint: expect.stringContaining('to rad/s'), at: 'w_0' })
    expect(expression('gain(H, w_0 to rad/s)', ...ABOVE).status).toBe('ok')
    expect(expression('H(2*pi*i*f)', ...ABOVE).value).toMatchObject({ type: 'complex' })
  })
})

describe('frequencies', () => {
  it.each([
    ['2*pi*f to Hz', 'angular-as-hertz'],
    ['R/L to Hz', 'angular-as-hertz'],
  ])('%s warns', (line, code) => {
    expect(warningsOf(...ABOVE, line)).toEqual([code])
  })

  it.each(['1/(2*pi*sqrt(L*C)) to kHz', '1/(8 us) to kHz'])('%s does not', (line) => {
    expect(last(...ABOVE, line).status).toBe('ok')
  })

  it('1/(8 us) to kHz is 125', () => {
    expect(value('kHz', '1/(8 us) to kHz')).toBeCloseTo(125, 10)
  })
})

describe('levels, percent, temperatures, requirements', () => {
  it('compares a slope with dB/decade', () => {
    expect(last(...ABOVE, 'highSlope(H) <= -20 dB/decade').requirement?.verdict).toBe('met')
  })

  it('reads +- as a tolerance', () => {
    expect(last('R_1 = 4.7 kohm +-5 %').value).toMatchObject({ bounds: { method: 'proved' } })
    expect(last('4.7 kohm +-5 %').status).toBe('ok')
  })

  it('refuses a level against a plain number', () => {
    expect(refused('gain(H, f) < 0')).toMatchObject({ code: 'level-mismatch', hint: expect.stringContaining('0 dB') })
    expect(last(...ABOVE, 'gain(H, f) < 0 dB').requirement?.verdict).toBe('met')
    expect(refused('3 dB + 2').code).toBe('level-mismatch')
    expect(refused('10^(-3 dB/20)').hint).toContain('ratio')
  })

  it.each([
    ['2*(3 dB)', 'dB', 6],
    ['20*log10(2) dB', 'dB', 6.020599913279624],
    ['5 %*230 V', 'V', 11.5],
    ['40 degC + 35 K/(1 W)*2 W', 'degC', 110],
  ])('%s in %s is %d', (source, unit, is) => {
    expect(value(unit, source)).toBeCloseTo(is, 9)
  })

  it.each(['5 % of 230 V', '3 V to mV + 2 mV', '300 K - 20 degC'])('%s is refused', (line) => {
    expect(refused(line).hint).not.toBe('')
  })

  it('takes a conversion on a side of a requirement, and two limits in a chain', () => {
    expect(last(...ABOVE, 'V*A to W >= 3 W').requirement).toMatchObject({ verdict: 'met', marginSi: 69 })
    expect(last(...ABOVE, '1 V <= V <= 2 V').requirement).toMatchObject({ verdict: 'not met', marginSi: -22, at: 'V <= 2 V' })
  })

  it('states an overshoot in percent', () => {
    expect(last(...ABOVE, 'overshoot(H) to %').value).toMatchObject({ shown: { unit: '%' } })
  })
})
