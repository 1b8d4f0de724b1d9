/** Each rule of the line language, L1 to L14; L6 and L13 have `tolerance.test.ts`, L14 `preferred.test.ts`. */
import { describe, expect, it } from 'vitest'
import { expression, last, refusal, valueIn, warningsOf } from './support'

describe('L1 reading', () => {
  it.each([
    ['2·3 − 1', 5],
    ['2×3', 6],
    ['3² + 2³', 17],
    ['6/2 # halves', 3],
    ['50 %', 0.5],
    ['1\u202F+\u00A02', 3],
    ['(2 > 1 ? 4 : 5) + 0', 4],
    ['.5 + 2.', 2.5],
    ['1.5e3', 1500],
  ])('%s', (source, is) => {
    expect(valueIn('', source)).toBeCloseTo(is, 12)
  })

  it('reads the signs of units', () => {
    expect(valueIn('ohm', '1 kΩ')).toBe(1000)
    expect(valueIn('ohm', '1 k\u2126')).toBe(1000)
    expect(valueIn('uF', '10 µF')).toBeCloseTo(10, 12)
    expect(valueIn('uF', '10 μF')).toBeCloseTo(10, 12)
    expect(valueIn('K', '20 °C to K')).toBeCloseTo(293.15, 12)
    expect(valueIn('deg', '90°')).toBeCloseTo(90, 12)
    expect(last('μ_r = 2', 'x = µ_r*2').status).toBe('ok')
  })

  it('takes ≤ and ≥ as comparisons', () => {
    expect(last('1 V ≤ 2 V').requirement?.verdict).toBe('met')
  })

  it.each([
    ['2 mod 3', 'forbidden-word'], ['5 in 3', 'forbidden-word'], ['1 and 2', 'forbidden-word'], ['not 1', 'forbidden-word'],
    ['3!', 'unknown-character'], ['x\'', 'unknown-character'], ['"text"', 'unknown-character'], ['{a: 1}', 'unknown-character'], ['a; b', 'unknown-character'],
    ['a.b', 'member-access'], ['x[1]', 'index'], ['1:3', 'range'], ['[[1, 2], [3, 4]]', 'matrix'],
    ['0x1F', 'number-base'], ['0b11', 'number-base'], ['1,5', 'decimal-comma'], ['1e400', 'not-finite'], ['10 000', 'two-numbers'],
    ['4k7', 'component-code'], ['2u2', 'component-code'], ['(1 + 2', 'bracket'], ['1 + 2)', 'bracket'], ['1 +', 'syntax'], ['* 2', 'syntax'],
    ['+5', 'unary-plus'], ['a = b = 2', 'second-equals'], ['2 = x', 'definition-form'], ['Infinity', 'forbidden-word'], ['a & b', 'unknown-character'],
  ])('%s is an error with a hint', (line, code) => {
    const { code: found, hint } = refusal(line)
    expect(found).toBe(code)
    expect(hint).not.toBe('')
  })

  it('places an error in the text as it was typed', () => {
    expect(refusal('x = 3·2² + foo').at).toBe('foo')
    expect(refusal('R = 1 kΩ + 2 µF # note').at).toBe('1 kΩ + 2 µF')
    expect(refusal('y = 2 ± 1 − foo').at).toBe('foo')
  })
})

describe('L2 names', () => {
  it.each(['pi = 3', 'e = 2', 's = 1', 'i = 2', 'gain = 3', 'sqrt(x) = x', 'between = 1'])('%s is refused', (line) => {
    expect(refusal(line).code).toBe('reserved-name')
  })

  it.each(['tau', 'phi', 'E', 'zeta', 'gamma', 'speedOfLight', 'isPrime', 'LN2'])('%s is a free name, undefined', (word) => {
    expect(refusal(word).code).toBe('unknown-name')
    expect(last(`${word} = 2`, `${word}*2`).status).toBe('ok')
  })

  it('takes Greek names', () => {
    expect(valueIn('', 'ω_0*2', 'ω_0 = 3')).toBe(6)
  })

  it('hints at i for j', () => {
    expect(refusal('2 + 3*j').hint).toContain('`i`')
    expect(last('j = 3', 'j*2').status).toBe('ok')
  })

  it('refuses a value called like a function', () => {
    expect(refusal('R = 1 ohm', 'x = 1', 'R (1 + x)')).toMatchObject({ code: 'not-a-function', hint: expect.stringContaining('R*(1 + x)') })
    expect(refusal('R (1 + 2)').code).toBe('unknown-name')
  })

  it('calls ordinary functions of any kinds, not recursively', () => {
    expect(valueIn('V', 'half(3 V)', 'half(x) = x/2')).toBe(1.5)
    expect(valueIn('A', 'half(3 A)', 'half(x) = x/2')).toBe(1.5)
    expect(valueIn('ohm', 'p(1 kohm, 1 kohm)', 'p(a, b) = a*b/(a + b)')).toBeCloseTo(500, 9)
    expect(refusal('f(x) = x < 2 ? f(x) : 1').code).toBe('self-reference')
    expect(refusal('f(x) = x + y').code).toBe('unknown-name')
    expect(refusal('f(x) = x + 1 V', 'f(2 A)')).toMatchObject({ code: 'dimension-mismatch', message: expect.stringContaining('In `f(2 A)`') })
    expect(refusal('f(x) = x', 'f(1, 2)').code).toBe('argument-count')
    expect(refusal('f(x) = x', 'f + 1').code).toBe('bare-function')
  })
})

describe('L3 and L4 units, names and implicit products', () => {
  it('reads the unit after a number, also when its name is defined', () => {
    expect(valueIn('V', '5 V', 'V = 24 V')).toBe(5)
    expect(valueIn('m^2', '3 m^2', 'm = 2')).toBe(3)
    expect(valueIn('V', '-5 V', 'V = 24 V')).toBe(-5)
    expect(valueIn('V', '10^3 V', 'V = 24 V')).toBe(1000)
  })

  it('goes on with a unit product', () => {
    expect(valueIn('N*m', '3 kg m^2/s^2')).toBe(3)
    expect(valueIn('mS', '20 mA/V')).toBeCloseTo(20, 12)
    expect(valueIn('W', '12 V*A')).toBe(12)
    expect(valueIn('nV/Hz^(1/2)', '4 nV/sqrt(Hz)')).toBeCloseTo(4, 12)
  })

  it('lets a defined name win elsewhere', () => {
    expect(valueIn('', 'V/(1 V)', 'V = 24 V')).toBe(24)
    expect(valueIn('V', '2*V')).toBe(2)
    expect(valueIn('', 'A', 'A = 7')).toBe(7)
  })

  it.each([
    ['V/2 R', 'product-under-slash'],
    ['1/2 pi', 'product-after-quotient'],
    ['-1/2 pi', 'product-after-quotient'],
    ['1/2/3 pi', 'product-after-quotient'],
    ['1 kohm/20 mA/s', 'unit-product'],
    ['R 5', 'number-after'],
    ['5 V sin(2)', 'name-after-unit'],
    ['5 ohm x', 'name-after-unit'],
    ['x to foo', 'unknown-unit'],
    ['(3 V to mV)*2', 'conversion-place'],
    ['3 V to mV to V', 'conversion-twice'],
    ['5 dB*V', 'level-unit'],
    ['1 ppm/degC', 'temperature-point'],
    ['m(2)', 'unit-called'],
  ])('%s is refused', (line, code) => {
    const { code: found, hint } = refusal('R = 4 ohm', 'x = 3', line)
    expect(found).toBe(code)
    expect(hint).toContain('`')
  })

  it('inside H(s) refuses what could be the variable or the second', () => {
    expect(refusal('H(s) = 1/(1 + 2 s)').code).toBe('variable-or-second')
    expect(refusal('H(s) = 1/(1 + 10 us*s)')).toMatchObject({ code: 'unit-or-name', hint: expect.stringContaining('(10 us)*s') })
    expect(last('H(s) = 1/(1 + (10 us)*s)').status).toBe('ok')
    expect(last('H(s) = s/(10 rad/s)').status).toBe('ok')
  })

  it('leaves plain implicit products standing', () => {
    expect(valueIn('', '2 pi')).toBeCloseTo(6.283185307179586, 15)
    expect(valueIn('', '2 (3 + 1)')).toBe(8)
    expect(valueIn('', '2 a b', 'a = 3', 'b = 5')).toBe(30)
    expect(valueIn('V', '5 V (1 + x)'.replace('V (', 'V*('), 'x = 1')).toBe(10)
  })
})

describe('L5 percent', () => {
  it('is a hundredth always', () => {
    expect(valueIn('', '1 + 8 %')).toBeCloseTo(1.08, 15)
    expect(valueIn('%', '20 % + 5 %')).toBeCloseTo(25, 12)
    expect(valueIn('V', '230 V*(1 + 5 %)')).toBeCloseTo(241.5, 12)
    expect(refusal('230 V + 5 %')).toMatchObject({ code: 'percent-sum', hint: expect.stringContaining('230 V*(1 + 5 %)') })
    expect(refusal('230 V - 5 ppm').code).toBe('percent-sum')
  })
})

describe('L7 numbers', () => {
  it.each(['sqrt(-1)', 'log(-2)', 'log(0)', 'log10(0)', 'asin(2)', 'acos(-3)', '(-8)^(1/3)', 'level(0)', 'level(-1)', 'preferred(-1, E24)'])('%s is an error', (source) => {
    expect(refusal(source).code).toBe('real-domain')
  })

  it.each(['1/0', '0^(-1)', '1 V/(0 ohm)'])('%s divides by zero', (source) => {
    expect(refusal(source).code).toBe('divide-by-zero')
  })

  it('is complex where a part is', () => {
    expect(expression('sqrt(-1 + 0i)').value).toMatchObject({ type: 'complex', re: 0, im: 1 })
    expect(expression('(1 + 2i)*(3 - i)').value).toMatchObject({ re: 5, im: 5 })
    expect(valueIn('', 'abs(3 + 4i)')).toBe(5)
    expect(valueIn('', 're(3 + 4i)')).toBe(3)
    expect(valueIn('deg', 'arg(1 + i)')).toBeCloseTo(45, 12)
  })

  it('takes plain exponents, and constants on a quantity', () => {
    expect(valueIn('V^2', '(3 V)^2')).toBe(9)
    expect(valueIn('V', '(9 V^2)^(1/2)')).toBe(3)
    expect(refusal('2^(3 V)').code).toBe('exponent-dimension')
    expect(refusal('n = 2 ± 1', '(3 V)^n').code).toBe('exponent-constant')
    expect(refusal('(3 V)^0.123').code).toBe('exponent-rational')
    expect(valueIn('V^2', '(3 V)^n', 'n = 2')).toBe(9)
  })

  it('lets a literal 0 agree with any dimension but levels and temperatures', () => {
    expect(valueIn('V', '3 V + 0')).toBe(3)
    expect(last('3 V > 0').requirement?.verdict).toBe('met')
    expect(refusal('3 dB + 0').code).toBe('level-mismatch')
    expect(refusal('20 degC + 0').code).toBe('temperature-point')
    expect(refusal('3 V + 0 A').code).toBe('dimension-mismatch')
    expect(refusal('x = 0', '3 V + x + 1').code).toBe('dimension-mismatch')
  })

  it('takes lists item by item', () => {
    expect(valueIn('V', 'sum([1 V, 2 V])')).toBe(3)
    expect(valueIn('', 'max([1, 5, 2])')).toBe(5)
    expect(expression('[1, 2, 3]*2').value).toMatchObject({ items: [{ si: 2 }, { si: 4 }, { si: 6 }] })
    expect(expression('sqrt([4, 9])').value).toMatchObject({ items: [{ si: 2 }, { si: 3 }] })
    expect(expression('[1, 2] .* [3, 4]').value).toMatchObject({ items: [{ si: 3 }, { si: 8 }] })
    for (const source of ['[1, 2]*[3, 4]', '[1, 2]/[3, 4]', '[1, 2]^[3, 4]']) expect(refusal(source).code).toBe('list-product')
    expect(refusal('[1, 2] + [1, 2, 3]').code).toBe('list-length')
    expect(refusal('[1 V, 2 A]').code).toBe('dimension-mismatch')
  })

  it('adds only quantities of one kind', () => {
    expect(refusal('1 V + 1 A').message).toMatch(/V and A cannot be added/)
    expect(refusal('1 ohm*1 A - 1 A').code).toBe('dimension-mismatch')
    expect(valueIn('V', '2 ohm*(3 A) + 1 V')).toBe(7)
  })
})

describe('L8 levels', () => {
  it.each([
    ['3 dB + 6 dB', 'dB', 9], ['2*(3 dB)', 'dB', 6], ['-40 dB/decade', 'dB', -40], ['1 Np', 'dB', 8.685889638065037],
    ['10 dBm - 4 dBm', 'dB', 6], ['10 dBm + 3 dB', 'dBm', 13], ['0 dBV to dBuV', 'dBuV', 120], ['1 mV to dBuV', 'dBuV', 60], ['20 dBm to mW', 'mW', 100],
    ['-40 dB/decade to dB/octave', 'dB/octave', -12.041199826559248],
  ])('%s', (source, unit, is) => {
    expect(valueIn(unit, source)).toBeCloseTo(is, 10)
  })

  it('divides level by level to a number', () => {
    expect(valueIn('', '6 dB/(2 dB)')).toBe(3)
    expect(valueIn('', '(-40 dB)/(20 dB)')).toBe(-2)
  })

  it.each(['3 dB + 2', '3 dB*(2 dB)', '3 dB*(2 V)', '2/(3 dB)', '(3 dB)^2', '3 dB to V', '2 to dB', 'ratio(2)', 'level(3 dB)', '3 dBm + 3 dBm', '3 dBm + 3 dBV', '2*(3 dBm)', 'sum([1 dB, 2 dB])', '0 dBm to V', 'sqrt(3 dB)'])('%s is refused with a hint', (source) => {
    expect(refusal(source).hint).not.toBe('')
  })

  it('refuses the gain of a function with a dimension', () => {
    expect(refusal('Z(s) = 1 ohm + s*(1 mH)', 'gain(Z, 1 kHz)').code).toBe('level-of-quantity')
    expect(valueIn('ohm', 'magnitude(Z, 0 Hz)', 'Z(s) = 1 ohm + s*(1 mH)')).toBe(1)
  })
})

describe('L9 frequency', () => {
  it('converts between the marks with 2π, and from none with factor 1', () => {
    expect(valueIn('rad/s', '1 kHz to rad/s')).toBeCloseTo(6283.185307179586, 9)
    expect(valueIn('Hz', '(1000 rad/s) to Hz')).toBeCloseTo(159.15494309189535, 10)
    expect(valueIn('rad/s', '5000/s to rad/s'.replace('5000/s', '5000/(1 s)'))).toBe(5000)
  })

  it('survives sums, plain factors, powers, roots and reciprocals', () => {
    const h = 'H(s) = 1/(1 + s*(1 ms))'
    for (const f of ['2*(1 kHz)', '1 kHz + 200 Hz', 'sqrt((1 kHz)*(4 kHz))', '1/(1/(1 kHz))', '1 kHz*(1 + 5 %)', '((1 kHz)^2)^(1/2)', 'max(1 kHz, 2 kHz)']) {
      expect(last(h, `gain(H, ${f})`).status, f).toBe('ok')
    }
    for (const f of ['2*pi*(1 kHz)', '1/(1 ms)', '1/(3 ms)*2', '(360 deg)*(1 kHz)']) expect(refusal(h, `gain(H, ${f})`).code, f).toBe('frequency-unmarked')
  })

  it('refuses two marks in a sum or comparison', () => {
    expect(refusal('1 kHz + 1000 rad/s').code).toBe('mark-mismatch')
    expect(refusal('1 kHz >= 1000 rad/s').code).toBe('mark-mismatch')
    expect(refusal('min(1 kHz, 1000 rad/s)').code).toBe('mark-mismatch')
  })

  it('is carried by the results of functions', () => {
    const h = 'H(s) = 1/(1 + s*(1 ms) + (s*(1 ms))^2)'
    expect(valueIn('Hz', 'naturalFrequency(H) to Hz', h)).toBeCloseTo(159.15494309189535, 9)
    expect(valueIn('rad/s', 'cornerFrequency(H) to rad/s', h)).toBeCloseTo(1000, 9)
    expect(last(h, 'gain(H, cornerFrequency(H))').status).toBe('ok')
  })

  it.each([
    [['w_0 = 1/sqrt(1 mH*1 uF)', 'w_0 to Hz'], ['angular-as-hertz']],
    [['w_0 = 1/sqrt(1 mH*1 uF)', 'x = w_0*2', 'x to kHz'], ['angular-as-hertz']],
    [['w_0 = 1/sqrt(1 mH*1 uF)', 'f_0 = w_0/(2*pi) to Hz'], []],
    [['w = 2*pi*(50 Hz)', 'w to Hz'], ['angular-as-hertz']],
    [['w = 2*pi*(50 Hz)', 'w to rad/s'], []],
    [['1/(2*pi*(1 ms)) to Hz'], []],
    [['1/(2*pi*(1 kohm)*(1 uF)) to rad/s'], ['hertz-as-angular']],
    [['1/((1 kohm)*(1 uF)) to rad/s'], []],
    [['T = 1/(1 kHz)', 'H(s) = exp(-s*T)'], ['laplace-hertz']],
    [['w_0 = 1/sqrt(1 mH*1 uF) to rad/s', 'w_0 to Hz'], []],
  ])('%j warns of %j', (lines, codes) => {
    expect(warningsOf(...lines)).toEqual(codes)
  })
})

describe('L10 angles', () => {
  it('are numbers in radians, shown in degrees where they are so marked', () => {
    expect(valueIn('', 'sin(30 deg)')).toBeCloseTo(0.5, 15)
    expect(valueIn('deg', 'asin(0.5) to deg')).toBeCloseTo(30, 12)
    expect(refusal('30 deg + 1').code).toBe('angle-mismatch')
    expect(refusal('30 deg >= 1').code).toBe('angle-mismatch')
    expect(valueIn('deg', '30 deg + 1 rad')).toBeCloseTo(87.29577951308232, 10)
    expect(last('30 deg > 0').requirement?.verdict).toBe('met')
  })

  it('warn of a plain number taken for degrees', () => {
    expect(warningsOf('sin(30)')).toEqual(['angle-in-radians'])
    expect(warningsOf('x = 30', 'cos(x)')).toEqual(['angle-in-radians'])
    for (const source of ['sin(30 deg)', 'sin(pi/6)', 'sin(0.5 rad)', 'sin(0)', 'sin((1 kHz)*(1 ms))']) expect(warningsOf(source), source).toEqual([])
  })
})

describe('L11 temperature', () => {
  it.each([['20 degC + 15 K', 'degC', 35], ['20 degC - 15 K', 'degC', 5], ['15 K + 20 degC', 'degC', 35], ['85 degC - 25 degC', 'K', 60], ['300 K to degC', 'degC', 26.85], ['25 degC to K', 'K', 298.15], ['-40 degC', 'degC', -40]])('%s', (source, unit, is) => {
    expect(valueIn(unit, source)).toBeCloseTo(is, 9)
  })

  it.each(['20 degC + 20 degC', '2*(20 degC)', '20 degC/(1 W)', '300 K - 20 degC', '-(20 degC)', 'sqrt(20 degC)', '20 degC > 300 K', 'mean([20 degC, 30 degC])'])('%s is refused', (source) => {
    expect(refusal(source).code).toBe('temperature-point')
  })

  it('compares points', () => {
    expect(last('20 degC <= 85 degC').requirement).toMatchObject({ verdict: 'met', marginSi: expect.closeTo(65, 9) })
  })
})

describe('L12 transfer functions', () => {
  it('check the dimension of every coefficient', () => {
    expect(refusal('H(s) = 1/(s^2 + 2*s + 1)')).toMatchObject({ code: 'dimension-mismatch', hint: expect.stringMatching(/s\/w_0.*B\(p\).*B\(s\/w_0\)/) })
    expect(refusal('R = 1 ohm', 'C_1 = 1 uF', 'H(s) = 1/(1 + s*R + s*C_1)').code).toBe('dimension-mismatch')
  })

  it('take s in 1/s, complex too, and no hertz', () => {
    const h = 'H(s) = 1/(1 + s*(1 ms))'
    expect(valueIn('', 'H(1000/(1 s))', h)).toBeCloseTo(0.5, 12)
    expect(valueIn('', 'H(0)', h)).toBe(1)
    expect(expression('H(i*(1000 rad/s))', h).value).toMatchObject({ type: 'complex', re: expect.closeTo(0.5, 12), im: expect.closeTo(-0.5, 12) })
    expect(refusal(h, 'H(1 kHz)').code).toBe('laplace-hertz')
    expect(refusal(h, 'H(2)').code).toBe('laplace-argument')
    expect(refusal(h, 'G(s) = H(s*(1 second))').hint).toContain('H(p)')
  })

  it('stand by their bare name as an argument only', () => {
    const h = 'H(s) = 1/(1 + s*(1 ms))'
    expect(refusal(h, 'H*2').code).toBe('bare-transfer')
    expect(refusal(h, 'G = H').code).toBe('bare-transfer')
    expect(last(h, 'G(s) = 2*H(s)').status).toBe('ok')
  })

  it('cancel equal factors, and close ones with a warning', () => {
    expect(last('H(s) = (1 + s*(1 ms))/((1 + s*(1 ms))*(1 + s*(2 ms)))').value).toMatchObject({ order: 1 })
    expect(warningsOf('H(s) = (1 + s*(1 ms))/((1 + s*(1.0000000001 ms))*(1 + s*(2 ms)))')).toHaveLength(1)
  })

  it('stay an expression where they are not rational', () => {
    const lines = ['T = 10 us', 'H(s) = exp(-s*T)/(1 + s*(1 ms))']
    expect(last(...lines).value).toMatchObject({ type: 'transfer', rational: false })
    expect(valueIn('deg', 'phase(H, 10 kHz)', ...lines)).toBeCloseTo(-36 - Math.atan(2 * Math.PI * 10) * 180 / Math.PI, 6)
    expect(valueIn('dB', 'gain(H, 10 kHz)', ...lines)).toBeCloseTo(-10 * Math.log10(1 + (2 * Math.PI * 10) * (2 * Math.PI * 10)), 9)
    expect(refusal(...lines, 'poles(H)').code).toBe('not-rational')
    expect(last('H(s) = sqrt(s*(1 second))').value).toMatchObject({ rational: false })
  })

  it('say what a figure lacks', () => {
    const h = 'H(s) = 1/(1 + s*(1 ms))'
    for (const figure of ['resonanceFrequency(H)', 'naturalFrequency(H)', 'dampingClass(H)']) expect(refusal(h, figure).message).not.toBe('')
    expect(refusal('H(s) = 1/(1 - s*(1 ms))', 'riseTime(H)').message).toMatch(/unstable|right/)
  })
})
