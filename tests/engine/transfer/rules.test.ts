/** The rules of the line language for transfer functions (L12), one by one. */
import { describe, expect, it } from 'vitest'
import type { Rational } from '../../../shared/engine/transfer'
import {
  add, asymptotes, attenuation, attenuationOverBand, bandwidth, compose, cornerFrequency, cutoffFrequency, dampingClass, dampingRatio, divide,
  evaluateRational, feedback, fromCoefficients, gain, gainMargin, gainOverBand, groupDelay, highSlope, impulseResponse, lowSlope, magnitude,
  multiply, naturalFrequency, overshoot, phase, phaseMargin, poles, power, qualityFactor, resonanceFrequency, resonancePeak,
  responseKind, riseTime, settlingTime, stepPeak, stepResponse, subtract, zeros,
} from '../../../shared/engine/transfer'
import { codeOf, expectAbsolute, expectRelative, k, lags, resonator, s, sPower, times, valueOf } from './support'

const TWO_PI = 2 * Math.PI
const codes = (warnings: { code: string }[] | undefined) => (warnings ?? []).map(w => w.code)
const warningsOf = (outcome: { ok: boolean, warnings?: { code: string }[] }) => codes(outcome.warnings)

describe('pairs of a pole and a zero', () => {
  const nearly = (at: number) => divide(add(s, k(at * (1 + 5e-10))), multiply(add(s, k(at)), fromCoefficients([1, 1])))

  it('cancel with a warning closer than 1e-9 of their modulus', () => {
    const found = poles(nearly(1e3))
    expect(valueOf(found).map(p => p.re)).toEqual([-1])
    expect(warningsOf(found)).toEqual(['cancelled-pair'])
    expect(valueOf(zeros(nearly(1e3)))).toEqual([])
  })

  it('stay farther apart', () => {
    const h = divide(add(s, k(1e3 * (1 + 2e-9))), multiply(add(s, k(1e3)), fromCoefficients([1, 1])))
    expect(valueOf(poles(h))).toHaveLength(2)
    expect(warningsOf(poles(h))).toEqual([])
  })

  it('never cancel in the right half-plane', () => {
    const h = nearly(-1e3)
    expect(valueOf(poles(h)).map(p => p.re)).toEqual([-1, 1e3])
    expect(warningsOf(poles(h))).toEqual([])
    expect(codeOf(settlingTime(h, 0.02))).toBe('unstable')
  })

  it('cancel as conjugate pairs, out of polynomials multiplied out', () => {
    const pair = fromCoefficients([1, 0.2, 1])
    const above = multiply(pair, fromCoefficients([1, 3]))
    const below = add(multiply(pair, fromCoefficients([1, 5])), k(0))
    const expanded = fromCoefficients([1, 3.2, 1.6, 3], [1, 5.2, 2, 5])
    expect(valueOf(poles(expanded))).toHaveLength(1)
    expect(warningsOf(poles(expanded))).toEqual(['cancelled-pair'])
    expect(valueOf(dampingOrCode(expanded))).toBe('first-order')
    expectRelative(evaluateRational(expanded, 0, 2).im, evaluateRational(divide(above, below), 0, 2).im, 1e-12)
  })

  it('leave the final value of the step exactly as it is', () => {
    expectRelative(valueOf(stepResponse(nearly(1e3), 60)), valueOf(magnitude(nearly(1e3), 0)), 1e-15)
  })

  it('say nothing where coefficients are equal', () => {
    expect(warningsOf(poles(divide(lags(5, 7), lags(7))))).toEqual([])
  })
})

function dampingOrCode(h: Rational) {
  return { ok: true as const, value: codeOf(dampingRatio(h)) }
}

describe('phase', () => {
  it('starts at 90° times the order of the zero at s = 0', () => {
    expectAbsolute(valueOf(phase(multiply(sPower(2), lags(1)), 1e-9)), 180, 1e-6)
    expectAbsolute(valueOf(phase(multiply(sPower(-3), lags(1)), 1e-9)), -270, 1e-6)
    expect(valueOf(phase(sPower(-4), 5))).toBe(-360)
  })

  it('is less by 180° where the lowest coefficients differ in sign', () => {
    expect(valueOf(phase(k(-2), 1))).toBe(-180)
    expectAbsolute(valueOf(phase(multiply(k(-1), lags(1)), 1)), -225, 1e-12)
    expectAbsolute(valueOf(phase(multiply(k(-3), s), 1)), -90, 1e-12)
  })

  it('is continuous over many turns', () => {
    expectAbsolute(valueOf(phase(power(lags(1), 30), 1e9)), -2700, 1e-5)
    expectAbsolute(valueOf(phase(power(fromCoefficients([1, 1]), 7), 1)), 315, 1e-12)
  })

  it('falls through zeros in the right half-plane', () => {
    const allPass = divide(fromCoefficients([1, -1]), fromCoefficients([1, 1]))
    expectAbsolute(valueOf(phase(allPass, 1)), -90, 1e-12)
    expectAbsolute(valueOf(phase(allPass, 1e9)), -180, 1e-6)
  })

  it('counts roots on the axis as just left of it', () => {
    const notch = divide(fromCoefficients([1, 0, 1]), power(fromCoefficients([1, 1]), 2))
    const before = valueOf(phase(notch, 1 - 1e-9))
    const after = valueOf(phase(notch, 1 + 1e-9))
    expectAbsolute(after - before, 180, 1e-6)
    const tank = resonator(1, 0)
    expect(valueOf(phase(tank, 0.5))).toBe(0)
    expect(valueOf(phase(tank, 2))).toBe(-180)
    const hidden = fromCoefficients([1], [1, 1, 1, 1])
    expectAbsolute(valueOf(phase(hidden, 1e6)), -270, 1e-4)
  })
})

describe('passband and attenuation', () => {
  const low = multiply(k(4), lags(1e3))
  const high = times(k(5e-3), s, lags(1e3))
  const band = divide(s, fromCoefficients([1, 0.02, 1]))

  it('refers to the limit, the other limit or the peak', () => {
    const at = (h: Rational, omega: number) => valueOf(attenuation(h, omega))
    expect(at(low, 1e3).reference).toMatchObject({ at: 'low', omega: 0 })
    expectAbsolute(at(low, 1e3).attenuation, 3.010299956639812, 1e-12)
    expect(at(times(k(5e-3), s, lags(1e3)), 1e3).reference).toMatchObject({ at: 'high', omega: Infinity })
    expectAbsolute(at(high, 1e3).attenuation, 3.010299956639812, 1e-12)
    expect(at(band, 3).reference.at).toBe('peak')
    expectRelative(at(band, 3).reference.omega, 1, 1e-9)
    expectAbsolute(at(band, 1).attenuation, 0, 1e-12)
  })

  it('refers to low frequency for all other kinds, if there is a gain there', () => {
    const notch = divide(fromCoefficients([1, 0, 1]), fromCoefficients([1, 1, 1]))
    expect(valueOf(responseKind(notch))).toBe('other')
    expect(valueOf(attenuation(notch, 0.5)).reference.at).toBe('low')
    expect(valueOf(attenuation(notch, 1)).attenuation).toBeGreaterThan(300)
    expect(codeOf(attenuation(multiply(sPower(-1), lags(1)), 1))).toBe('no-passband')
    expectAbsolute(valueOf(attenuation(sPower(-1), 10, 1)).attenuation, 20, 1e-12)
  })

  it('counts from a stated frequency', () => {
    const a = valueOf(attenuation(low, 1e5, 1e4))
    expect(a.reference).toMatchObject({ at: 'given', omega: 1e4 })
    expectAbsolute(a.attenuation, valueOf(gain(low, 1e4)) - valueOf(gain(low, 1e5)), 1e-12)
  })

  it('takes the worst point of a band, inside it if that is where it lies', () => {
    const h = multiply(resonator(100, 0.01), lags(1))
    const worst = valueOf(attenuationOverBand(h, 20, 1e4))
    expectRelative(worst.omega, 99.98, 1e-3)
    expectAbsolute(worst.attenuation, -valueOf(gain(h, worst.omega)), 1e-11)
    const edge = valueOf(attenuationOverBand(h, 200, 1e4))
    expect(edge.omega).toBe(200)
    expect(codeOf(attenuationOverBand(h, 200, 100))).toBe('band-range')
    expect(codeOf(gainOverBand(resonator(100, 0), 50, 200))).toBe('pole-in-band')
    expect(valueOf(gainOverBand(fromCoefficients([1, 0, 1]), 0.5, 2)).least.omega).toBe(1)
  })

  it('has half-power widths of low-pass and band-pass only', () => {
    expectRelative(valueOf(bandwidth(low)), 1e3 / TWO_PI, 1e-14)
    expectRelative(valueOf(bandwidth(band)), 0.02 / TWO_PI, 1e-12)
    expect(codeOf(bandwidth(high))).toBe('no-bandwidth')
    expect(codeOf(bandwidth(k(3)))).toBe('no-bandwidth')
    expect(codeOf(cutoffFrequency(band))).toBe('no-cutoff')
    expectRelative(valueOf(cutoffFrequency(high)), 1e3 / TWO_PI, 1e-14)
    expect(codeOf(bandwidth(divide(s, fromCoefficients([1, 0, 1]))))).toBe('unbounded-peak')
  })

  it('takes the lowest crossing of a low-pass and the highest of a high-pass', () => {
    // Falls to half power, rises over it again at the resonance, falls for good.
    const h = multiply(lags(1), resonator(10, 0.02))
    expectRelative(valueOf(cutoffFrequency(h)) * TWO_PI, 1.02, 0.01)
    const mirrored = compose(h, divide(k(1), s))
    expectRelative(valueOf(cutoffFrequency(mirrored)) * TWO_PI, 1 / (valueOf(cutoffFrequency(h)) * TWO_PI), 1e-12)
  })
})

describe('resonance', () => {
  it('must exceed both ends', () => {
    expect(codeOf(resonanceFrequency(resonator(1, 0.8)))).toBe('no-resonance')
    expect(codeOf(resonanceFrequency(resonator(1, Math.SQRT1_2)))).toBe('no-resonance')
    expect(codeOf(resonanceFrequency(resonator(1, Math.SQRT1_2 - 1e-6)))).toBe('no-resonance')
    expectRelative(valueOf(resonanceFrequency(resonator(1, 0.7))) * TWO_PI, Math.sqrt(1 - 2 * 0.49), 1e-12)
    expect(codeOf(resonanceFrequency(k(3)))).toBe('no-resonance')
    expect(codeOf(resonanceFrequency(multiply(sPower(-1), resonator(1, 0.1))))).toBe('no-resonance')
  })

  it('is the lowest of equals', () => {
    const twin = multiply(divide(s, fromCoefficients([1, 0.01, 1])), divide(s, fromCoefficients([100, 0.1, 1])))
    const peak = valueOf(resonanceFrequency(twin)) * TWO_PI
    expectRelative(peak, 1, 1e-2)
  })

  it('needs a gain at low frequency for its height', () => {
    expect(codeOf(resonancePeak(divide(s, fromCoefficients([1, 0.1, 1]))))).toBe('no-low-gain')
    expectAbsolute(valueOf(resonancePeak(multiply(k(7), resonator(1, 0.1)))), 20 * Math.log10(1 / (0.2 * Math.sqrt(0.99))), 1e-12)
    expect(codeOf(resonancePeak(resonator(3, 0)))).toBe('unbounded-peak')
    expectRelative(valueOf(resonanceFrequency(resonator(3, 0))) * TWO_PI, 3, 1e-15)
  })
})

describe('natural frequency and damping', () => {
  it('are those of the complex pair with the least damping', () => {
    const h = multiply(multiply(resonator(10, 0.5), resonator(30, 0.05)), lags(1))
    expectRelative(valueOf(naturalFrequency(h)), 30, 1e-14)
    expectRelative(valueOf(dampingRatio(h)), 0.05, 1e-13)
    expectRelative(valueOf(qualityFactor(h)), 10, 1e-13)
  })

  it('are of two real poles where the order is two', () => {
    expectRelative(valueOf(naturalFrequency(lags(10, 40))), 20, 1e-14)
    expectRelative(valueOf(dampingRatio(lags(10, 40))), 1.25, 1e-14)
    expect(codeOf(dampingRatio(lags(1, 2, 3)))).toBe('no-complex-pair')
    expect(codeOf(naturalFrequency(lags(1)))).toBe('first-order')
    expect(codeOf(naturalFrequency(multiply(sPower(-1), lags(1))))).toBe('no-natural-frequency')
    expect(codeOf(naturalFrequency(fromCoefficients([1], [-1, 0, 1])))).toBe('no-natural-frequency')
  })

  it.each([
    [0, 'undamped'], [1e-12, 'underdamped'], [1 - 2e-9, 'underdamped'], [1 - 0.9e-9, 'critically damped'], [1, 'critically damped'],
    [1 + 0.9e-9, 'critically damped'], [1 + 2e-9, 'overdamped'], [50, 'overdamped'],
  ])('ζ = %d is %s', (zeta, expected) => {
    expect(valueOf(dampingClass(resonator(3e5, zeta)))).toBe(expected)
  })

  it('have a class for order two only, and for stable functions', () => {
    expect(codeOf(dampingClass(lags(1)))).toBe('not-second-order')
    expect(codeOf(dampingClass(multiply(resonator(1, 0.1), lags(1))))).toBe('not-second-order')
    expect(codeOf(dampingClass(resonator(1, -0.1)))).toBe('unstable')
    expect(codeOf(qualityFactor(resonator(1, 0)))).toBe('undamped')
  })
})

describe('asymptotes', () => {
  it('have slopes in exact multiples of 20 dB and meet at the corner', () => {
    const h = multiply(k(3), multiply(sPower(2), power(lags(1e4), 3)))
    expect(valueOf(lowSlope(h))).toBe(40)
    expect(valueOf(highSlope(h))).toBe(-20)
    const [low, high] = valueOf(asymptotes(h))
    const corner = valueOf(cornerFrequency(h))
    const levelAt = (line: { slope: number, gainAtOneHertz: number }) => line.gainAtOneHertz + line.slope * Math.log10(corner)
    expectAbsolute(levelAt(low), levelAt(high), 1e-10)
    expectRelative(corner * TWO_PI, 1e4, 1e-14)
  })

  it('do not meet where they are parallel', () => {
    expect(codeOf(cornerFrequency(divide(lags(1), lags(2))))).toBe('parallel-asymptotes')
    expect(codeOf(cornerFrequency(k(2)))).toBe('parallel-asymptotes')
    expect(codeOf(cornerFrequency(sPower(-1)))).toBe('parallel-asymptotes')
  })
})

describe('figures of the step', () => {
  it('need a stable function with a final value', () => {
    for (const figure of [overshoot, riseTime, (h: Rational) => settlingTime(h, 0.02)]) {
      expect(codeOf(figure(resonator(1, 0)))).toBe('not-settling')
      expect(codeOf(figure(resonator(1, -0.1)))).toBe('unstable')
      expect(codeOf(figure(multiply(sPower(-1), lags(1))))).toBe('not-settling')
      expect(codeOf(figure(multiply(s, lags(1))))).toBe('no-final-value')
      expect(codeOf(figure(fromCoefficients([1, 1, 1], [1, 1])))).toBe('improper')
    }
    expect(codeOf(settlingTime(lags(1), 0))).toBe('band-range')
  })

  it('are those of a constant for a constant', () => {
    expect(valueOf(stepResponse(k(-3), 2))).toBe(-3)
    expect(valueOf(overshoot(k(-3)))).toBe(0)
    expect(valueOf(riseTime(k(-3)))).toBe(0)
    expect(valueOf(settlingTime(k(-3), 0.01))).toBe(0)
    expect(valueOf(impulseResponse(k(-3), 2))).toBe(0)
  })

  it('go by the final value when that is negative', () => {
    const h = resonator(1, 0.2)
    const minus = multiply(k(-4), h)
    expectRelative(valueOf(overshoot(minus)), valueOf(overshoot(h)), 1e-13)
    expectRelative(valueOf(settlingTime(minus, 0.05)), valueOf(settlingTime(h, 0.05)), 1e-13)
    expectRelative(valueOf(stepPeak(minus))!.value, -4 * valueOf(stepPeak(h))!.value, 1e-13)
  })

  it('see a jump at t = 0', () => {
    const lead = divide(fromCoefficients([1, 3]), fromCoefficients([1, 1]))
    expect(valueOf(stepResponse(lead, 0))).toBe(3)
    expect(valueOf(overshoot(lead))).toBe(2)
    expectRelative(valueOf(settlingTime(lead, 0.02)), Math.log(100), 1e-12)
    expect(valueOf(stepResponse(lead, -1))).toBe(0)
  })

  it('follow ramps and growing responses as they are', () => {
    expectRelative(valueOf(stepResponse(sPower(-1), 7)), 7, 1e-14)
    expectRelative(valueOf(stepResponse(sPower(-3), 6)), 36, 1e-13)
    expectRelative(valueOf(stepResponse(multiply(sPower(-1), lags(2)), 3)), 3 - (1 - Math.exp(-6)) / 2, 1e-13)
    expectRelative(valueOf(stepResponse(fromCoefficients([1], [-1, 1]), 3)), Math.exp(3) - 1, 1e-13)
    expectRelative(valueOf(impulseResponse(sPower(-2), 5)), 5, 1e-14)
    expect(codeOf(stepResponse(fromCoefficients([1], [-1, 1]), 1e6))).toBe('response-range')
  })

  it('find an overshoot that comes late', () => {
    // A slow zero: rises past its final value after the fast part is over, and creeps back.
    const h = multiply(divide(fromCoefficients([1, 10.4]), fromCoefficients([1, 10])), lags(3))
    const peak = valueOf(stepPeak(h))!
    expect(peak.overshoot).toBeGreaterThan(0.03)
    expectAbsolute(valueOf(impulseResponse(h, peak.time)), 0, 1e-13)
  })
})

describe('margins', () => {
  it('are unbounded without a crossing', () => {
    expect(valueOf(gainMargin(lags(1, 2))).margin).toBe(Infinity)
    expect(valueOf(phaseMargin(multiply(k(0.5), lags(1)))).margin).toBe(Infinity)
    // Real at its peak, but positive: no crossing.
    expect(valueOf(gainMargin(divide(multiply(k(2), s), fromCoefficients([1, 0.2, 1])))).margin).toBe(Infinity)
  })

  it('of three equal lags are known', () => {
    // Each lag turns 60° at √3 and halves the gain: 8/K there.
    const loop = multiply(k(4), power(lags(1), 3))
    const found = valueOf(gainMargin(loop))
    expectAbsolute(found.margin, 20 * Math.log10(2), 1e-12)
    expectRelative(found.omega!, Math.sqrt(3), 1e-13)
    expectAbsolute(valueOf(phaseMargin(loop)).margin, 180 - 3 * Math.atan(Math.sqrt(4 ** (2 / 3) - 1)) * 180 / Math.PI, 1e-11)
  })

  it('are the smallest of several crossings', () => {
    const loop = multiply(multiply(k(20), sPower(-1)), resonator(60, 0.05))
    const found = valueOf(phaseMargin(loop))
    expect(found.margin).toBeLessThan(0)
    expectAbsolute(valueOf(gainMargin(loop)).margin, 20 * Math.log10(60 * 0.1 / 20), 1e-11)
  })

  it('turn with stability of the closed loop', () => {
    for (const gainOfLoop of [7.9, 8.1]) {
      const loop = multiply(k(gainOfLoop), power(lags(1), 3))
      const stable = valueOf(poles(feedback(loop))).every(p => p.re < 0)
      expect(valueOf(gainMargin(loop)).margin > 0).toBe(stable)
      expect(valueOf(phaseMargin(loop)).margin > 0).toBe(stable)
    }
  })

  it('are zero through the critical point, and refused where the gain is one throughout', () => {
    expect(valueOf(phaseMargin(sPower(-2))).margin).toBe(0)
    expect(valueOf(gainMargin(sPower(-2))).margin).toBe(0)
    expect(codeOf(phaseMargin(divide(fromCoefficients([1, -1]), fromCoefficients([1, 1]))))).toBe('gain-is-one')
  })

  it('see a constant that is negative', () => {
    expectAbsolute(valueOf(gainMargin(k(-0.5))).margin, 20 * Math.log10(2), 1e-12)
  })
})

describe('frequencies and levels', () => {
  it('are refused out of range', () => {
    for (const figure of [magnitude, gain, phase, groupDelay]) {
      expect(codeOf(figure(lags(1), -1))).toBe('frequency-range')
      expect(codeOf(figure(lags(1), NaN))).toBe('frequency-range')
    }
    expect(codeOf(magnitude(resonator(1, 0), 1))).toBe('pole-at-frequency')
    expect(codeOf(gain(sPower(-1), 0))).toBe('pole-at-frequency')
    expect(codeOf(gain(s, 0))).toBe('no-level')
    expect(valueOf(magnitude(s, 0))).toBe(0)
    expect(codeOf(gain(fromCoefficients([1, 0, 1]), 1))).toBe('no-level')
    expect(codeOf(groupDelay(fromCoefficients([1, 0, 1]), 1))).toBe('root-at-frequency')
  })

  it('have a group delay at zero frequency', () => {
    expectRelative(valueOf(groupDelay(resonator(5, 0.3), 0)), 2 * 0.3 / 5, 1e-14)
    expectRelative(valueOf(groupDelay(subtract(lags(2), k(0)), 0)), 0.5, 1e-14)
  })
})
