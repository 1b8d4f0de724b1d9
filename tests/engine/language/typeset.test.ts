/** Lines as mathematics, and numbers as they are shown. */
import katex from 'katex'
import { describe, expect, it } from 'vitest'
import { createSheetEngine } from '../../../shared/engine'
import { last, sheet } from './support'

const shown = (...lines: string[]) => {
  const { value } = last(...lines)
  if (!value || !('shown' in value)) throw new Error('nothing shown')
  return `${value.shown.text} ${value.shown.unit}`.trim()
}

describe('formulas', () => {
  it('stand with names, with numbers and with their result', () => {
    expect(last('L_1 = 4.7 uH ± 20%', 'C_1 = 10 uF', 'f_0 = 1/(2*pi*sqrt(L_1*C_1)) to kHz').typeset).toEqual({
      formula: 'f_0 = \\frac{1}{2\\pi \\sqrt{L_1 C_1}}',
      substituted: '\\frac{1}{2\\pi \\sqrt{4.7\\,\\mu\\mathrm{H} \\cdot 10\\,\\mu\\mathrm{F}}}',
      result: '23.22\\,\\mathrm{kHz}',
    })
  })

  it('leave out numbers that say nothing new', () => {
    expect(last('L_1 = 4.7 uH ± 20 %').typeset).toEqual({ formula: 'L_1 = 4.7\\,\\mu\\mathrm{H} \\pm 20\\,\\%', result: '4.700\\,\\mu\\mathrm{H}' })
  })

  it('keep brackets where they are needed and drop them where the layout groups', () => {
    expect(last('a = 2', 'b = 3', '(a + b)*(a - b)/(a*b)').typeset.formula).toBe('\\frac{\\left(a + b\\right)\\,\\left(a - b\\right)}{a b}')
    expect(last('a = 2', 'b = 3', 'a - (b - a)').typeset.formula).toBe('a - \\left(b - a\\right)')
    expect(last('V = 24 V', 'R = 2 ohm', 'V^2/R').typeset.substituted).toBe('\\frac{\\left(24\\,\\mathrm{V}\\right)^{2}}{2\\,\\mathrm{\\Omega}}')
    expect(last('x = -2', 'x^2').typeset.substituted).toBe('\\left(-2\\right)^{2}')
    expect(last('x = -2', '3 - x').typeset.substituted).toBe('3 - \\left(-2\\right)')
  })

  it.each([
    'H(s) = 1/(1 + s*(1 ms) + (s*(1 ms))^2)', 'x = [1 V, 2 V]', 'z = (3 + 4i)*(2 ohm)', 'y = 2 > 1 ? 3 : 4', 'abs(-3) + floor(2.5) + cbrt(8)', 'ω_load = 3', 'Delta_T = 5 K',
    'attenuation(G, band(1 kHz, 1 MHz)) >= 30 dB', 'p = poles(G)', 'R_12 = parallel(1 kohm, 2 kohm)', 'T = 25 degC ± 5 K', 'phi = 30 deg', 'k = 5 % + 20 ppm', '1.5e-3*(1e6)', 'f(x, y) = x*y', 'n = 12 nV/Hz^(1/2)',
    'preferred(3.3 kohm, E24)', 'a_b_c = 2', 'Vin = 3 V', 'v = 10 dBuV', 'log(8, 2)', 'q = 10^(-3)',
  ])('%s is understood by KaTeX', (line) => {
    const result = last('G(s) = 1/(1 + s*(1 ms))', line)
    expect(result.status).not.toBe('error')
    const { formula, substituted, result: value } = result.typeset
    for (const latex of [formula, substituted, value]) {
      if (latex !== undefined) expect(() => katex.renderToString(latex, { throwOnError: true, strict: 'error' }), latex).not.toThrow()
    }
    if (result.value?.type === 'transfer') expect(() => katex.renderToString(result.value?.type === 'transfer' ? result.value.standardForm ?? '' : '', { throwOnError: true, strict: 'error' })).not.toThrow()
  })

  it('of prose are typeset without being computed', () => {
    const engine = createSheetEngine({ significantDigits: 4 })
    expect(engine.typesetExpression('Z_0 = sqrt(L/C)')).toEqual({ latex: 'Z_0 = \\sqrt{\\frac{\\mathrm{L}}{\\mathrm{C}}}'.replace('\\mathrm{L}', 'L') })
    expect(engine.typesetExpression('1/2 pi')).toMatchObject({ code: 'product-after-quotient' })
  })
})

describe('numbers', () => {
  it.each([
    ['4700 ohm', '4.700 kΩ'], ['0.0000047 H', '4.700 µH'], ['999.96 V', '1.000 kV'], ['0 V', '0 V'], ['-0.012 A', '−12.00 mA'],
    ['5 V/(1 A)', '5.000 Ω'], ['20 mA/(1 V)', '20.00 mS'], ['24 V*(2 A)', '48.00 W'], ['1/(3 s)', '0.3333 1/s'], ['5000/(3 s)', '1.667 × 10³ 1/s'], ['2 V/(4 s)', '500.0 mV/s'],
    ['33931.9 Hz', '33.93 kHz'], ['33931.9 Hz to Hz', '33.93 kHz'], ['33931.9 Hz to MHz', '0.03393 MHz'], ['0.6856 ohm to ohm', '685.6 mΩ'],
    ['1234567', '1.235 × 10⁶'], ['12345', '12350'], ['0.00001234', '12.34 × 10⁻⁶'], ['0.5', '0.5000'], ['35 %', '35.00 %'], ['45 deg', '45.00 °'], ['25 degC', '25.00 °C'],
    ['3.0103 dB', '3.01 dB'], ['-0.00091838 dB', '−0.00092 dB'], ['213200 rad/s', '213.2 krad/s'], ['2 kg', '2.000 kg'], ['3 m^2', '3.000 m²'], ['15 K/W', '15.00 K/W'],
  ])('%s is shown as %s', (line, text) => {
    expect(shown(line)).toBe(text)
  })

  it('share the unit with their bounds', () => {
    expect(last('R = 980 ohm ± 5 %').value).toMatchObject({ shown: { text: '980.0', unit: 'Ω' }, bounds: { shownLow: { text: '931.0', unit: 'Ω' }, shownHigh: { text: '1029', unit: 'Ω' } } })
  })

  it('of an angular frequency stand beside hertz', () => {
    expect(last('w = 1000 rad/s').value).toMatchObject({ also: { text: '159.2', unit: 'Hz' } })
  })

  it('follow the digits of the sheet', () => {
    const engine = createSheetEngine({ significantDigits: 4 })
    expect(engine.evaluate({ lines: [{ id: 'a', source: '1/3' }], settings: { significantDigits: 7 } }).lines[0]?.value).toMatchObject({ shown: { text: '0.3333333' } })
    expect(engine.evaluate({ lines: [{ id: 'a', source: '1/3' }], settings: { significantDigits: 2 } }).lines[0]?.value).toMatchObject({ shown: { text: '0.33' } })
  })

  it('of a transfer function say its damping and corner', () => {
    expect(sheet('H(s) = 1/(1 + s*(1 ms))').lines[0]?.value).toMatchObject({ summary: ['corner 159.2 Hz'] })
  })
})
