/** L14 against the lists of IEC 60063 and vectors with ties (data/preferred-values.json, provenance beside each). */
import { describe, expect, it } from 'vitest'
import { preferredValue } from '../../../shared/engine/selection/preferred'
import { SERIES } from '../../../shared/engine/selection/series'
import type { Series } from '../../../shared/engine/selection/series'
import data from '../data/preferred-values.json'
import { refusal, valueIn } from './support'

interface Vector { nearest_ratio: number, below: number, above: number }

const names = Object.keys(SERIES) as Series[]

describe('preferred values', () => {
  it.each(names)('%s is the list of the standard', (name) => {
    const record = data.records.find(found => found.quantity === `${name} preferred values, one decade`)
    expect(SERIES[name]).toEqual(record?.value)
  })

  const vectors = data.records.find(record => record.quantity.startsWith('nearest'))?.value as unknown as ({ target: number } & Record<Series, Vector>)[]

  it.each(vectors)('around $target', (vector) => {
    for (const name of names) {
      const { nearest_ratio, below, above } = vector[name]
      expect(preferredValue(vector.target, name, 'nearest'), `${name} nearest`).toBeCloseTo(nearest_ratio, 9)
      expect(preferredValue(vector.target, name, 'below'), `${name} below`).toBeCloseTo(below, 9)
      expect(preferredValue(vector.target, name, 'above'), `${name} above`).toBeCloseTo(above, 9)
    }
  })

  it('keeps the unit and finds the decade', () => {
    expect(valueIn('kohm', 'preferred(3.4 kohm, E24)')).toBeCloseTo(3.3, 12)
    expect(valueIn('uF', 'preferredAbove(0.93 uF, E12)')).toBeCloseTo(1, 12)
    expect(valueIn('nF', 'preferredBelow(102 nF, E192)')).toBeCloseTo(102, 12)
    expect(valueIn('ohm', 'preferredBelow(0.99 ohm, E6)')).toBeCloseTo(0.68, 12)
  })

  it('sends a tie up', () => {
    expect(preferredValue(Math.sqrt(10 * 22), 'E3', 'nearest')).toBe(22)
  })

  it('counts a value within 1e-9 as equal', () => {
    expect(preferredValue(10 * (1 + 5e-10), 'E24', 'above')).toBe(10)
    expect(preferredValue(10 * (1 - 5e-10), 'E24', 'below')).toBe(10)
  })

  it('asks for a series', () => {
    expect(refusal('preferred(1 kohm, E25)').code).toBe('unknown-series')
    expect(refusal('E24').code).toBe('unknown-name')
  })
})
