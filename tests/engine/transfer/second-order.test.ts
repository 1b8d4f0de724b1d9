/**
 * Second-order sections against `data/second-order.json`: computed with SciPy 1.10.1 and mpmath 1.2.1
 * (40 digits), the circuits checked there against ngspice 39.
 */
import { describe, expect, it } from 'vitest'
import {
  bandwidth, cornerFrequency, cutoffFrequency, dampingClass, dampingRatio, fromCoefficients, gain, gainOverBand, highSlope, lowSlope,
  magnitude, naturalFrequency, overshoot, phase, poles, qualityFactor, reachTime, resonance, resonanceFrequency, resonancePeak,
  responseKind, riseTime, settlingTime, stepPeak, stepResponse,
} from '../../../shared/engine/transfer'
import { hypot } from '../../../shared/engine/numeric/math'
import { codeOf, expectAbsolute, expectRelative, readData, valueOf } from './support'

interface Metrics {
  omega0_rad_s: number, zeta: number, Q: number, poles_rad_s: [number, number][], regime: 'under' | 'over' | 'critical'
  peak_omega_rad_s: number | null, peak_f_Hz?: number, peak_gain_dB?: number, peak_over_passband_dB?: number
  half_power_f_Hz?: number[], half_power_bandwidth_Hz?: number
  H_at: { f_Hz: number, re: number, im: number, dB: number | null, deg: number | null }[]
  step_final: number, step_initial_0plus: number, step_peak_time_s?: number, step_peak_value?: number
  overshoot_percent?: number, rise_time_10_90_s?: number, delay_time_50_s?: number
  settling_2_percent_s?: number, settling_5_percent_s?: number
  decay_to_2_percent_of_peak_deviation_s?: number
}
interface Circuit { name: string, kind: 'LP' | 'HP' | 'BP' | 'BS', numerator_s_ascending: number[], denominator_s_ascending: number[], metrics: Metrics }
interface Row {
  zeta: number, peak_omega_rad_s: number | null, peak_gain_dB: number | null, overshoot_percent: number
  rise_time_10_90_s: number, delay_time_50_s: number, settling_2_percent_s: number, settling_5_percent_s: number, half_power_omega: number
}
const data = readData('second-order.json') as { circuits: Circuit[], normalised_low_pass_table: { rows: Row[] } }

const TWO_PI = 2 * Math.PI
const KINDS = { LP: 'low-pass', HP: 'high-pass', BP: 'band-pass', BS: 'other' } as const
const CLASSES = { under: 'underdamped', over: 'overdamped', critical: 'critically damped' } as const

describe.each(data.circuits)('$name', (c) => {
  const h = fromCoefficients(c.numerator_s_ascending, c.denominator_s_ascending)
  const m = c.metrics

  it('has its natural frequency, damping and poles', () => {
    expectRelative(valueOf(naturalFrequency(h)), m.omega0_rad_s, 1e-14)
    expectRelative(valueOf(dampingRatio(h)), m.zeta, 1e-14)
    expectRelative(valueOf(qualityFactor(h)), m.Q, 1e-14)
    expect(valueOf(dampingClass(h))).toBe(CLASSES[m.regime])
    const tolerance = m.regime === 'critical' ? 1e-6 : 1e-13
    const found = [...valueOf(poles(h))]
    for (const [re, im] of m.poles_rad_s) {
      const distances = found.map(p => hypot(p.re - re, p.im - im))
      expect(Math.min(...distances)).toBeLessThanOrEqual(tolerance * hypot(re, im))
      found.splice(distances.indexOf(Math.min(...distances)), 1)
    }
  })

  it('has its response at each frequency', () => {
    expect(valueOf(responseKind(h))).toBe(KINDS[c.kind])
    for (const at of m.H_at) {
      const omega = at.f_Hz * TWO_PI
      const size = hypot(at.re, at.im)
      expectAbsolute(valueOf(magnitude(h, omega)), size, 1e-13 * Math.max(size, 1))
      if (at.dB === null || at.deg === null) continue
      expectAbsolute(valueOf(gain(h, omega)), at.dB, 1e-12)
      expectAbsolute(valueOf(phase(h, omega)), at.deg, 1e-11)
    }
  })

  it('has its peak and half-power edges, or none', () => {
    if (m.peak_f_Hz === undefined) expect(codeOf(resonanceFrequency(h))).toBe('no-resonance')
    else {
      expectRelative(valueOf(resonanceFrequency(h)), m.peak_f_Hz, 1e-12)
      expectAbsolute(valueOf(gainOverBand(h, 0, 1e12)).greatest.gain, m.peak_gain_dB!, 1e-11)
    }
    if (c.kind === 'LP' && m.peak_over_passband_dB !== undefined) expectAbsolute(valueOf(resonancePeak(h)), m.peak_over_passband_dB, 1e-12)
    if (c.kind === 'LP' || c.kind === 'HP') expectRelative(valueOf(cutoffFrequency(h)), halfPower(m, c), 1e-13)
    if (c.kind === 'BP') expectRelative(valueOf(bandwidth(h)), m.half_power_bandwidth_Hz!, 1e-12)
    if (c.kind === 'BS') expect(codeOf(bandwidth(h))).toBe('no-bandwidth')
  })

  it('has its step response', () => {
    expectAbsolute(valueOf(stepResponse(h, 0)), m.step_initial_0plus, 1e-13 * Math.max(1, Math.abs(m.step_initial_0plus)))
    if (m.step_peak_time_s !== undefined) expectRelative(valueOf(stepResponse(h, m.step_peak_time_s)), m.step_peak_value!, 1e-12)
    if (c.kind === 'HP' || c.kind === 'BP') expect(codeOf(overshoot(h))).toBe('no-final-value')
    if (c.kind !== 'LP') return
    expectAbsolute(valueOf(overshoot(h)) * 100, m.overshoot_percent!, 1e-11 * m.overshoot_percent!)
    if (m.overshoot_percent! > 0) expectRelative(valueOf(stepPeak(h))!.time, m.step_peak_time_s!, 1e-9)
    expectRelative(valueOf(riseTime(h)), m.rise_time_10_90_s!, 1e-12)
    expectRelative(valueOf(reachTime(h, 0.5)), m.delay_time_50_s!, 1e-12)
    expectRelative(valueOf(settlingTime(h, 0.02)), m.settling_2_percent_s!, 1e-11)
    expectRelative(valueOf(settlingTime(h, 0.05)), m.settling_5_percent_s!, 1e-11)
  })
})

/** One low-pass has its half-power point at exactly the natural frequency and leaves the list empty. */
function halfPower(m: Metrics, c: Circuit): number {
  if (m.half_power_f_Hz && m.half_power_f_Hz.length > 0) return m.half_power_f_Hz[0]!
  expect(c.name).toBe('series_A_butterworth_over_C')
  return m.omega0_rad_s / TWO_PI
}

describe.each(data.normalised_low_pass_table.rows)('1/(s² + 2ζs + 1), ζ = $zeta', (row) => {
  const h = fromCoefficients([1], [1, 2 * row.zeta, 1])

  it('agrees in frequency', () => {
    expectRelative(valueOf(bandwidth(h)) * TWO_PI, row.half_power_omega, 1e-13)
    expectRelative(valueOf(cornerFrequency(h)) * TWO_PI, 1, 1e-15)
    if (row.peak_omega_rad_s === null || row.peak_omega_rad_s === 0) expect(codeOf(resonance(h))).toBe('no-resonance')
    else {
      expectRelative(valueOf(resonance(h)).omega, row.peak_omega_rad_s, 1e-12)
      expectAbsolute(valueOf(resonancePeak(h)), row.peak_gain_dB!, 1e-12)
    }
    expect(valueOf(highSlope(h))).toBe(-40)
    expect(valueOf(lowSlope(h))).toBe(0)
  })

  it('agrees in time', () => {
    expectAbsolute(valueOf(overshoot(h)) * 100, row.overshoot_percent, 1e-11 * row.overshoot_percent + 1e-13)
    expectRelative(valueOf(riseTime(h)), row.rise_time_10_90_s, 1e-12)
    expectRelative(valueOf(reachTime(h, 0.5)), row.delay_time_50_s, 1e-12)
    expectRelative(valueOf(settlingTime(h, 0.02)), row.settling_2_percent_s, 1e-11)
    expectRelative(valueOf(settlingTime(h, 0.05)), row.settling_5_percent_s, 1e-11)
  })
})
