/** Extremes and crossings against brute force over random functions. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { Rational } from '../../../shared/engine/transfer'
import {
  constant, fromCoefficients, gain, gainOverBand, groupDelay, halfPowerEdges, impulseResponse, multiply, overshoot, phase, power, reciprocal,
  responseKind, riseTime, settlingTime, stepResponse, variable,
} from '../../../shared/engine/transfer'
import { valueOf } from './support'

const decade = fc.double({ min: -2, max: 2, noNaN: true }).map(x => 10 ** x)
const lag = decade.map(w => fromCoefficients([1, 1 / w]))
const pair = fc.tuple(decade, fc.double({ min: -2.5, max: 0.3, noNaN: true })).map(([w, z]) => fromCoefficients([1, 2 * 10 ** z / w, 1 / (w * w)]))
const factor = fc.oneof(lag, pair)
const product = (list: Rational[]) => list.reduce(multiply, constant(1))
const filter = fc.tuple(fc.array(factor, { minLength: 1, maxLength: 4 }), fc.array(factor, { maxLength: 2 }), fc.integer({ min: 0, max: 2 }))
  .map(([below, above, origin]) => multiply(multiply(product(above), reciprocal(product(below))), power(variable(), origin)))
const lowPass = fc.array(factor, { minLength: 1, maxLength: 4 }).map(below => reciprocal(product(below)))

const grid = Array.from({ length: 3001 }, (_, i) => 10 ** (-4 + 8 * i / 3000))

describe('extremes and crossings', () => {
  it('bound the gain at every frequency of a band', () => {
    fc.assert(fc.property(filter, (h) => {
      const { least, greatest } = valueOf(gainOverBand(h, 1e-4, 1e4))
      const levels = grid.map(w => valueOf(gain(h, w)))
      return levels.every(g => g <= greatest.gain + 1e-9 && g >= least.gain - 1e-9)
        && Math.abs(valueOf(gain(h, greatest.omega)) - greatest.gain) < 1e-9
    }), { numRuns: 150 })
  })

  it('leave no half-power crossing of a low-pass unseen', () => {
    fc.assert(fc.property(lowPass, (h) => {
      expect(valueOf(responseKind(h))).toBe('low-pass')
      const edge = valueOf(halfPowerEdges(h))[0]! * 2 * Math.PI
      const level = -10 * Math.log10(2)
      return Math.abs(valueOf(gain(h, edge)) - level) < 1e-9
        && grid.every(w => w > edge * (1 - 1e-9) || valueOf(gain(h, w)) > level - 1e-9)
    }), { numRuns: 150 })
  })

  it('agree between phase and group delay', () => {
    fc.assert(fc.property(filter, decade, (h, w) => {
      const step = 1e-5 * w
      const slope = -(valueOf(phase(h, w + step)) - valueOf(phase(h, w - step))) / (2 * step) * Math.PI / 180
      const delay = valueOf(groupDelay(h, w))
      return Math.abs(slope - delay) < 1e-3 * Math.abs(delay) + 1e-5 / w
    }), { numRuns: 200 })
  })
})

describe('the step response', () => {
  const times = Array.from({ length: 60 }, (_, i) => 10 ** (-3 + 5 * i / 59))

  it('has the impulse response as its derivative', () => {
    fc.assert(fc.property(lowPass, decade, (h, t) => {
      const step = 1e-4 * t
      const slope = (valueOf(stepResponse(h, t + step)) - valueOf(stepResponse(h, t - step))) / (2 * step)
      const impulse = valueOf(impulseResponse(h, t))
      const largest = Math.max(...times.map(x => Math.abs(valueOf(impulseResponse(h, x)))))
      return Math.abs(slope - impulse) < 1e-2 * largest
    }), { numRuns: 100 })
  })

  it('stays within what overshoot and settling say of it', () => {
    fc.assert(fc.property(lowPass, (h) => {
      const peak = valueOf(overshoot(h))
      const settled = valueOf(settlingTime(h, 0.05))
      const later = Array.from({ length: 400 }, (_, i) => settled * (1.0001 + i / 100))
      return later.every(t => Math.abs(valueOf(stepResponse(h, t)) - 1) <= 0.05 + 1e-9)
        && Math.abs(Math.abs(valueOf(stepResponse(h, settled)) - 1) - 0.05) < 1e-8
        && later.map(t => t / 3).every(t => valueOf(stepResponse(h, t)) <= 1 + peak + 1e-9)
        && valueOf(riseTime(h)) > 0
    }), { numRuns: 40 })
  })

  it('does not depend on whether poles are equal or next to it', () => {
    fc.assert(fc.property(fc.integer({ min: 2, max: 6 }), fc.integer({ min: 4, max: 14 }), decade, (n, digits, t) => {
      const equal = power(fromCoefficients([1], [1, 1]), n)
      let apart = constant(1)
      for (let i = 0; i < n; i++) apart = multiply(apart, fromCoefficients([1], [1, 1 + (i - (n - 1) / 2) * 10 ** -digits]))
      const difference = valueOf(stepResponse(equal, t)) - valueOf(stepResponse(apart, t))
      // The mean of the time constants is the same, so the responses differ in the second order only.
      return Math.abs(difference) < 1e-11 + 50 * 10 ** (-2 * digits)
    }), { numRuns: 200 })
  })
})
