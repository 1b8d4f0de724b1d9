import { describe, expect, it } from 'vitest'
import { gainAxis, linearAxis, logRulings, phaseAxis } from '../../../components/plot/geometry/axes'
import { engineering, plainNumber } from '../../../components/plot/geometry/numbers'

describe('the ruling of semi-logarithmic paper', () => {
  it('rules every decade 1 to 9 and labels the powers of ten', () => {
    const rulings = logRulings(1e3, 1e6)
    expect(rulings).toHaveLength(28)
    expect(rulings.filter(one => one.major).map(one => one.label)).toEqual(['1 kHz', '10 kHz', '100 kHz', '1 MHz'])
    expect(rulings.filter(one => !one.major).every(one => one.label === null)).toBe(true)
  })

  it('labels 2 and 5 as well where there is hardly a decade', () => {
    expect(logRulings(150, 900).filter(one => one.label).map(one => one.label)).toEqual(['200 Hz', '500 Hz'])
  })

  it('keeps to the range', () => {
    const values = logRulings(20, 20e3).map(one => one.value)
    expect(Math.min(...values)).toBe(20)
    expect(Math.max(...values)).toBe(20e3)
  })
})

describe('gain axis', () => {
  it('holds all values in at most nine steps', () => {
    for (const low of [-1, -7, -33, -65, -118]) {
      const { range, step } = gainAxis([3.1, low])
      expect(range.to).toBeGreaterThan(3.1)
      expect(range.from).toBeLessThanOrEqual(low)
      expect((range.to - range.from) / step).toBeLessThanOrEqual(10)
    }
  })

  it('does not let a notch flatten the rest', () => {
    expect(gainAxis([0, -320]).range.from).toBeGreaterThanOrEqual(-160)
  })

  it('says + above zero and a true minus below', () => {
    const labels = gainAxis([10, -20]).rulings.map(one => one.label)
    expect(labels).toContain('+10')
    expect(labels).toContain('−20')
  })

  it('survives a curve without a finite value', () => {
    expect(gainAxis([Number.NEGATIVE_INFINITY]).rulings.length).toBeGreaterThan(2)
  })
})

describe('phase axis', () => {
  it('steps in parts of the circle', () => {
    expect(phaseAxis([0, -180]).rulings.map(one => one.label)).toEqual(['−180°', '−135°', '−90°', '−45°', '0°'])
    expect(phaseAxis([0, -1260]).step).toBe(360)
  })
  it('keeps a constant phase in the middle', () => {
    const { range } = phaseAxis([90, 90])
    expect(range.from).toBeLessThan(90)
    expect(range.to).toBeGreaterThan(90)
  })
})

describe('linear axis', () => {
  it('has round steps', () => {
    expect(linearAxis(0, 1.36, 6, value => value.toFixed(2)).step).toBeCloseTo(0.5, 12)
    expect(linearAxis(0, 1e-4, 8, String).step).toBeCloseTo(2e-5, 15)
  })
})

describe('numbers on a plot', () => {
  it.each([
    [13710, '13.71 kHz'], [999.96, '1000 Hz'], [0.5, '500 mHz'], [1e6, '1 MHz'], [23.2189e3, '23.22 kHz'], [0, '0 Hz'],
  ])('%d Hz is %s', (value, text) => expect(engineering(value, 'Hz')).toBe(text))
  it('drops zeros after the point only', () => {
    expect(plainNumber(100)).toBe('100')
    expect(plainNumber(-0.00123456)).toBe('−0.001235')
  })
})
