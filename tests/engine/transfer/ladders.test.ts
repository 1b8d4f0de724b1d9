/**
 * Doubly terminated ladders from `data/ladders.json`: element values from the closed forms (Butterworth;
 * Orchard and Takahasi for equal ripple) or synthesised with mpmath (Bessel). The transfer function is
 * built up from impedances here, as an engineer would write it.
 */
import { describe, expect, it } from 'vitest'
import type { Rational } from '../../../shared/engine/transfer'
import {
  add, cutoffFrequency, gain, gainOverBand, groupDelay, highSlope, multiply, orderOf, poles, reciprocal, resonance,
} from '../../../shared/engine/transfer'
import { codeOf, expectAbsolute, expectRelative, k, readData, s, valueOf } from './support'

interface Ladder { quantity: string, value: number[], load_resistance: { shunt_C_first: number, series_L_first: number }, half_power_rad_s: number }
const { records } = readData('ladders.json') as { records: Ladder[] }

/** Source of 1 V behind 1 Ω, elements in order, load; the output over the load. */
function transfer(ladder: Ladder, first: 'shunt' | 'series'): Rational {
  const load = k(first === 'shunt' ? ladder.load_resistance.shunt_C_first : ladder.load_resistance.series_L_first)
  const elements = ladder.value.slice(0, -1).map((g, n) => ({ g, shunt: (n % 2 === 0) === (first === 'shunt') }))
  // Backwards from a unit load voltage: voltage and current at each node.
  let voltage = k(1)
  let current = reciprocal(load)
  for (const { g, shunt } of elements.reverse()) {
    const reactance = multiply(k(g), s)
    if (shunt) current = add(current, multiply(reactance, voltage))
    else voltage = add(voltage, multiply(reactance, current))
  }
  return reciprocal(add(voltage, current))
}

describe.each(records)('$quantity', (ladder) => {
  const order = ladder.value.length - 1

  it.each(['shunt', 'series'] as const)('has its edge with a %s element first', (first) => {
    const h = transfer(ladder, first)
    expect(orderOf(h)).toBe(order)
    expect(valueOf(highSlope(h))).toBe(-20 * order)
    expect(valueOf(poles(h)).every(p => p.re < 0)).toBe(true)
    const evenRipple = ladder.quantity.startsWith('cheb') && order % 2 === 0
    // With even order the passband begins in a trough, so half power counts from below the peaks.
    if (!evenRipple) expectRelative(valueOf(cutoffFrequency(h)) * 2 * Math.PI, ladder.half_power_rad_s, 1e-11)
    else expectAbsolute(valueOf(gain(h, ladder.half_power_rad_s)) - valueOf(gainOverBand(h, 0, 1)).greatest.gain, -3.010299956639812, 1e-10)
  })

  const ripple = /^cheb([\d.]+)/.exec(ladder.quantity)
  if (ripple) {
    it('ripples by as much as it should, and no more', () => {
      const h = transfer(ladder, 'shunt')
      const { least, greatest } = valueOf(gainOverBand(h, 0, 1))
      expectAbsolute(greatest.gain - least.gain, Number(ripple[1]), 1e-9)
      if (order === 1 || order % 2 === 1) expect(codeOf(resonance(h))).toBe('no-resonance')
      else expect(valueOf(resonance(h)).omega).toBeLessThan(1)
    })
  }

  if (ladder.quantity.startsWith('bessel_delay')) {
    it('has a delay of one second at low frequency', () => {
      expectRelative(valueOf(groupDelay(transfer(ladder, 'shunt'), 0)), 1, 1e-9)
    })
  }
})
