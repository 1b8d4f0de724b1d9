import { describe, expect, it } from 'vitest'
import type { FrequencyFunction, Rational } from '../../../shared/engine/transfer'
import {
  attenuation, cutoffFrequency, evaluateRational, fromCoefficients, gain, gainMargin, gainOverBand, generalAttenuation,
  generalCutoffFrequency, generalFrequencyCurve, generalGain, generalGainMargin, generalGainOverBand, generalGroupDelay, generalMagnitude,
  generalPhase, generalPhaseMargin, groupDelay, multiply, phase, phaseMargin, power, refuseNotRational,
} from '../../../shared/engine/transfer'
import * as c from '../../../shared/engine/numeric/complex'
import { codeOf, expectAbsolute, expectRelative, k, lags, resonator, s, sPower, valueOf } from './support'

const of = (r: Rational): FrequencyFunction => (re, im) => evaluateRational(r, re, im)
const delayed = (r: Rational, T: number): FrequencyFunction => (re, im) =>
  c.multiply(c.exponential(c.complex(-re * T, -im * T)), evaluateRational(r, re, im))
const rootOfS: FrequencyFunction = (re, im) => c.squareRoot(c.complex(re, im))
const degrees = 180 / Math.PI

describe('functions that are not rational', () => {
  const lag = delayed(multiply(k(5), lags(100)), 1e-3)

  it.each([1, 100, 1e4, 1e6])('unwrap a delay at %d rad/s', (omega) => {
    expectAbsolute(valueOf(generalPhase(lag, omega)), -(omega * 1e-3 + Math.atan(omega / 100)) * degrees, 1e-8)
    expectRelative(valueOf(generalGroupDelay(lag, omega)), 1e-3 + 0.01 / (1 + (omega / 100) ** 2), 1e-10)
    expectAbsolute(valueOf(generalGain(lag, omega)), valueOf(gain(multiply(k(5), lags(100)), omega)), 1e-12)
  })

  it('find the delay margin', () => {
    // |5/(1 + iω/100)| = 1 at ω = 100√24
    const omega = 100 * Math.sqrt(24)
    const margin = 180 - (omega * 1e-3 + Math.atan(Math.sqrt(24))) * degrees
    expectAbsolute(valueOf(generalPhaseMargin(lag)).margin, margin, 1e-9)
    const at = valueOf(generalGainMargin(lag))
    expectAbsolute((at.omega! * 1e-3 + Math.atan(at.omega! / 100)) * degrees, 180, 1e-9)
    expectAbsolute(at.margin, -valueOf(generalGain(lag, at.omega!)), 1e-11)
  })

  it('follow losses that go as the root of the frequency', () => {
    expectAbsolute(valueOf(generalPhase(rootOfS, 100)), 45, 1e-12)
    expectRelative(valueOf(generalMagnitude(rootOfS, 100)), 10, 1e-15)
    const line: FrequencyFunction = (re, im) => c.exponential(c.scale(c.squareRoot(c.complex(re, im)), -1e-3))
    expectAbsolute(valueOf(generalPhase(line, 1e6)), -1e-3 * Math.sqrt(1e6 / 2) * degrees, 1e-9)
    expectAbsolute(valueOf(generalAttenuation(line, 1e6, 1e7)).attenuation, 1e-3 * Math.sqrt(5e5) * 20 / Math.LN10, 1e-9)
    expectRelative(valueOf(generalCutoffFrequency(line)) * 2 * Math.PI, 2 * (Math.LN2 / 2 / 1e-3) ** 2, 1e-9)
  })

  it('need a reference for the attenuation where there is no gain at low frequency', () => {
    expect(codeOf(generalAttenuation(rootOfS, 1, 1))).toBe('no-passband')
    expectAbsolute(valueOf(generalAttenuation(rootOfS, 1, 1, 100)).attenuation, 20, 1e-12)
    const hold: FrequencyFunction = (re, im) => {
      const z = c.complex(re * 1e-3, im * 1e-3)
      return c.divide(c.subtract(c.ONE, c.exponential(c.negate(z))), z)
    }
    expectAbsolute(valueOf(generalAttenuation(hold, 1e3, 1e3)).attenuation, -20 * Math.log10(Math.sin(0.5) / 0.5), 1e-6)
  })

  it('say which figure needs poles', () => {
    expect(refuseNotRational('dampingRatio')).toMatchObject({ ok: false, code: 'not-rational' })
    expect(refuseNotRational('dampingRatio').message).toContain('dampingRatio')
  })

  it('refuse where they have no value', () => {
    const nowhere: FrequencyFunction = () => c.complex(NaN, NaN)
    for (const figure of [generalMagnitude, generalGain, generalPhase, generalGroupDelay]) {
      expect(codeOf(figure(nowhere, 1))).toBe('undefined-at-frequency')
      expect(codeOf(figure(lag, -1))).toBe('frequency-range')
    }
    expect(codeOf(generalGainMargin(nowhere))).toBe('undefined-at-frequency')
    expect(codeOf(generalPhaseMargin(nowhere))).toBe('undefined-at-frequency')
    expect(codeOf(generalGainOverBand(nowhere, 1, 2))).toBe('undefined-at-frequency')
    expect(codeOf(generalPhase(lag, 0))).toBe('frequency-range')
    expect(codeOf(generalCutoffFrequency(of(k(1))))).toBe('no-half-power')
    expect(codeOf(generalPhase(delayed(k(1), 1), 1e9))).toBe('not-resolved')
  })
})

describe('swept figures of rational functions', () => {
  const functions: [string, Rational][] = [
    ['a resonant loop', multiply(multiply(k(20), sPower(-1)), resonator(60, 0.05))],
    ['three lags', multiply(k(40), lags(1, 2, 3))],
    ['a double integrator with lead', multiply(multiply(k(1e4), sPower(-2)), multiply(fromCoefficients([1, 0.02]), lags(2e3)))],
    ['a right half-plane zero', multiply(k(3), multiply(fromCoefficients([1, -0.01]), lags(5, 300)))],
    ['a high Q', resonator(1e4, 1e-4)],
  ]

  it.each(functions)('agree with those from poles and zeros: %s', (_, r) => {
    const f = of(r)
    for (const omega of [0.3, 7, 70, 3e3, 2e4]) {
      expectAbsolute(valueOf(generalPhase(f, omega)), valueOf(phase(r, omega)), 1e-7)
      expectAbsolute(valueOf(generalGroupDelay(f, omega)), valueOf(groupDelay(r, omega)), 1e-9 * Math.abs(valueOf(groupDelay(r, omega))) + 1e-15)
    }
    const margins = [[generalGainMargin(f), gainMargin(r)], [generalPhaseMargin(f), phaseMargin(r)]] as const
    for (const [swept, exact] of margins) {
      if (valueOf(exact).margin === Infinity) expect(valueOf(swept).margin).toBe(Infinity)
      else expectAbsolute(valueOf(swept).margin, valueOf(exact).margin, 1e-8)
    }
    const swept = valueOf(generalGainOverBand(f, 1, 1e3))
    const exact = valueOf(gainOverBand(r, 1, 1e3))
    expectAbsolute(swept.greatest.gain, exact.greatest.gain, 1e-9)
    expectAbsolute(swept.least.gain, exact.least.gain, 1e-9)
  })

  it('agree in attenuation and cut-off', () => {
    const r = lags(1e3, 5e3)
    expectRelative(valueOf(generalCutoffFrequency(of(r))), valueOf(cutoffFrequency(r)), 1e-12)
    expectAbsolute(valueOf(generalAttenuation(of(r), 2e3, 3e3)).attenuation, valueOf(attenuation(r, 2e3)).attenuation, 1e-11)
  })

  it('turn up through a null and down through a pole on the axis', () => {
    const notch = multiply(fromCoefficients([1, 0, 1]), power(lags(1), 2))
    expectAbsolute(valueOf(generalPhase(of(notch), 3)), valueOf(phase(notch, 3)), 1e-9)
    expectAbsolute(valueOf(generalPhase(of(resonator(1, 0)), 3)), -180, 1e-9)
    expectAbsolute(valueOf(generalPhase(of(multiply(s, resonator(1, 0))), 3)), -90, 1e-9)
  })
})

describe('their curves', () => {
  it('are continuous and end where they should', () => {
    const curve = valueOf(generalFrequencyCurve(delayed(lags(100), 1e-3), 1, 1e4, 200))
    expect(curve.frequency).toHaveLength(200)
    expect(curve.frequency[0]).toBe(1)
    expect(curve.frequency[199]).toBe(1e4)
    const omega = 2e4 * Math.PI
    expectAbsolute(curve.phase[199]!, -(omega * 1e-3 + Math.atan(omega / 100)) * degrees, 1e-8)
    expect(codeOf(generalFrequencyCurve(delayed(k(1), 1), 1e3, 1e9, 50))).toBe('not-resolved')
    expect(codeOf(generalFrequencyCurve(rootOfS, 10, 1, 50))).toBe('band-range')
  })
})
