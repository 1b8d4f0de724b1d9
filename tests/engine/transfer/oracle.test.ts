/**
 * Functions that are hard on a calculation: high Q, equal and nearly equal poles, order forty, nine
 * decades, equal ripple, nulls, right half-plane zeros. Values from `data/responses.json`: computed
 * with mpmath 1.3.0 at 80 digits or more.
 */
import { describe, expect, it } from 'vitest'
import type { Rational } from '../../../shared/engine/transfer'
import {
  fromCoefficients, gain, gainMargin, groupDelay, halfPowerEdges, impulseResponse, multiply, overshoot, phase, phaseMargin, poles, power,
  reciprocal, resonance, resonancePeak, responseKind, riseTime, settlingTime, stepResponse, variable, constant,
} from '../../../shared/engine/transfer'
import { hypot } from '../../../shared/engine/numeric/math'
import { codeOf, expectAbsolute, expectRelative, readData, valueOf } from './support'

type Factors = [number[], number][]
interface Expected {
  'at': { omega: number, gain_dB: number, phase_deg: number, delay_s: number }[]
  'kind'?: string, 'resonance_omega'?: number | null, 'resonance_dB'?: number, 'half_power_omega'?: number[]
  'poles'?: [number, number][], 'step'?: [number, number][], 'impulse'?: [number, number][]
  'rise_s'?: number, 'overshoot'?: number, 'settling_0.02_s'?: number, 'settling_0.05_s'?: number
  'gain_margin'?: [number, number] | null, 'phase_margin'?: [number, number] | null
}
interface Case { name: string, gain: number, origin: number, numerator: Factors, denominator: Factors, expect: Expected }
const { cases } = readData('responses.json') as { cases: Case[] }

function build(c: Case): Rational {
  let h = multiply(constant(c.gain), power(variable(), c.origin))
  for (const [p, n] of c.numerator) h = multiply(h, power(fromCoefficients(p), n))
  for (const [p, n] of c.denominator) h = multiply(h, reciprocal(power(fromCoefficients(p), n)))
  return h
}

describe.each(cases)('$name', (c) => {
  const h = build(c)
  const e = c.expect

  it('has its gain, phase and delay', () => {
    const slowest = Math.max(...e.at.map(p => Math.abs(p.delay_s)))
    for (const p of e.at) {
      expectAbsolute(valueOf(gain(h, p.omega)), p.gain_dB, 1e-11 * Math.max(1, Math.abs(p.gain_dB)), `gain at ${p.omega}`)
      expectAbsolute(valueOf(phase(h, p.omega)), p.phase_deg, 1e-9, `phase at ${p.omega}`)
      expectAbsolute(valueOf(groupDelay(h, p.omega)), p.delay_s, 1e-10 * Math.abs(p.delay_s) + 1e-14 * slowest, `delay at ${p.omega}`)
    }
  })

  if (e.kind) it('has its kind, resonance and edges', () => {
    expect(valueOf(responseKind(h))).toBe(e.kind)
    if (e.resonance_omega === null) expect(codeOf(resonance(h))).toBe('no-resonance')
    else {
      expectRelative(valueOf(resonance(h)).omega, e.resonance_omega!, 1e-10)
      const peak = valueOf(gain(h, valueOf(resonance(h)).omega))
      expectAbsolute(peak, e.resonance_dB!, 1e-10)
      if (c.origin === 0) expectAbsolute(valueOf(resonancePeak(h)), e.resonance_dB! - valueOf(gain(h, 0)), 1e-10)
    }
    if (!e.half_power_omega) return
    const edges = valueOf(halfPowerEdges(h))
    expect(edges).toHaveLength(e.half_power_omega.length)
    edges.forEach((f, n) => expectRelative(2 * Math.PI * f, e.half_power_omega![n]!, 1e-11))
  })

  if (e.poles) it('has its poles', () => {
    const found = [...valueOf(poles(h))]
    for (const [re, im] of e.poles!) {
      const distances = found.map(p => hypot(p.re - re, p.im - im))
      const best = distances.indexOf(Math.min(...distances))
      expect(distances[best]).toBeLessThanOrEqual(1e-12 * hypot(re, im))
      found.splice(best, 1)
    }
  })

  if (e.step) it('has its step and impulse response', () => {
    const largest = Math.max(...e.step!.map(([, y]) => Math.abs(y)))
    const strongest = Math.max(...e.impulse!.map(([, y]) => Math.abs(y)))
    for (const [t, y] of e.step!) expectAbsolute(valueOf(stepResponse(h, t)), y, 1e-10 * largest, `step at ${t}`)
    for (const [t, y] of e.impulse!) expectAbsolute(valueOf(impulseResponse(h, t)), y, 1e-10 * strongest, `impulse at ${t}`)
  })

  if (e.rise_s !== undefined) it('has its overshoot, rise and settling', () => {
    expectAbsolute(valueOf(overshoot(h)), e.overshoot!, 1e-11 + 1e-10 * e.overshoot!)
    expectRelative(valueOf(riseTime(h)), e.rise_s!, 1e-9)
    expectRelative(valueOf(settlingTime(h, 0.02)), e['settling_0.02_s']!, 1e-9)
    expectRelative(valueOf(settlingTime(h, 0.05)), e['settling_0.05_s']!, 1e-9)
  })

  if (e.gain_margin !== undefined) it('has its margins', () => {
    const expected = [[gainMargin(h), e.gain_margin], [phaseMargin(h), e.phase_margin]] as const
    for (const [outcome, at] of expected) {
      const found = valueOf(outcome)
      if (!at) expect(found.margin).toBe(Infinity)
      else {
        expectAbsolute(found.margin, at[0], 1e-9)
        expectRelative(found.omega!, at[1], 1e-10)
      }
    }
  })
})
