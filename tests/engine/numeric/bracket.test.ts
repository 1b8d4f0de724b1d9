import { describe, expect, it } from 'vitest'
import { rootBetween } from '../../../shared/engine/numeric/bracket'

describe('roots between two points', () => {
  it('finds them to the last digit', () => {
    expect(rootBetween(x => x * x - 2, 0, 2)).toBeCloseTo(Math.SQRT2, 15)
    expect(rootBetween(x => x - 1e-30, 0, 1)).toBeCloseTo(1e-30, 40)
  })

  it('copes with values near the smallest doubles', () => {
    expect(rootBetween(x => (x - 3e5) * 1e-300, 0, 1e9)).toBeCloseTo(3e5, 8)
  })

  it('never returns an end where there is no root', () => {
    expect(rootBetween(x => x * x + 1, 0, 2)).toBeUndefined()
    expect(rootBetween(x => x + 1, 0, 2)).toBeUndefined()
    expect(rootBetween(() => NaN, 0, 2)).toBeUndefined()
  })

  it('returns an end that is the root', () => {
    expect(rootBetween(x => x, 0, 2)).toBe(0)
    expect(rootBetween(x => x - 2, 0, 2)).toBe(2)
  })
})
