/** Lines without units against mathjs's own evaluation, where the language does not refuse or redefine them. */
import fc from 'fast-check'
import { evaluate } from 'mathjs'
import { describe, expect, it } from 'vitest'
import { expression } from './support'

const leaf = fc.oneof(
  fc.integer({ min: 1, max: 99 }).map(String),
  fc.double({ min: 0.01, max: 99, noNaN: true }).map(x => x.toFixed(3)),
  fc.constantFrom('pi', 'e', 'x', 'y'),
)

const { tree } = fc.letrec<{ tree: string }>(tie => ({
  tree: fc.oneof(
    { maxDepth: 4, depthIdentifier: 'tree' },
    leaf,
    fc.tuple(tie('tree'), fc.constantFrom('+', '-', '*', '/'), tie('tree')).map(([a, operator, b]) => `(${a}) ${operator} (${b})`),
    fc.tuple(leaf, fc.constantFrom('+', '-', '*', '/'), leaf).map(([a, operator, b]) => `${a} ${operator} ${b}`),
    fc.tuple(tie('tree'), fc.integer({ min: -3, max: 4 })).map(([a, n]) => `(${a})^${n}`),
    fc.tuple(fc.constantFrom('sqrt', 'cbrt', 'abs', 'exp', 'log', 'log10', 'sin', 'cos', 'atan', 'tanh', 'floor', 'ceil', 'round', 'sign'), tie('tree')).map(([name, a]) => `${name}(${a})`),
    fc.tuple(fc.constantFrom('max', 'min', 'hypot', 'atan2'), tie('tree'), tie('tree')).map(([name, a, b]) => `${name}(${a}, ${b})`),
    tie('tree').map(a => `-(${a})`),
    fc.tuple(tie('tree'), tie('tree'), tie('tree')).map(([a, b, c]) => `((${a}) > (${b}) ? (${c}) : 1)`),
    fc.tuple(leaf, fc.constantFrom('x', 'y', 'pi')).map(([a, b]) => `${/^[a-z]/.test(a) ? `${a}*` : `${a} `}${b}`),
  ),
}))

/** What mathjs makes of it; undefined where it refuses, as it does to order complex numbers. */
function evaluated(source: string): unknown {
  try {
    return evaluate(source, { x: 1.75, y: 3.5 })
  }
  catch {
    return undefined
  }
}

describe('plain numbers', () => {
  it('come out as mathjs evaluates them', () => {
    let compared = 0
    fc.assert(fc.property(tree, (source) => {
      const result = expression(source, 'x = 1.75', 'y = 3.5')
      const reference = evaluated(source)
      if (typeof reference !== 'number' || !Number.isFinite(reference) || Math.abs(reference) > 1e200) {
        expect(result.status).toBe('error')
        return
      }
      if (result.status === 'error' || result.value?.type !== 'number') {
        // Rounding may turn on one side where it does not on the other only at the edge of a domain.
        expect(result.problems[0]?.code).toMatch(/real-domain|divide-by-zero|not-finite|argument/)
        return
      }
      compared += 1
      const { si } = result.value
      expect(Math.abs(si - reference)).toBeLessThanOrEqual(1e-9 * Math.max(1, Math.abs(reference)))
    }), { numRuns: 400, seed: 4711 })
    expect(compared).toBeGreaterThan(250)
  })

  it.each([
    ['2^3^2', 512], ['-2^2', -4], ['2*3^2', 18], ['10/2/5', 1], ['2 - 3 - 4', -5], ['6/2*3', 9], ['-3^0.5*2', -3.4641016151377544], ['1 - -2', 3],
  ])('%s keeps the precedence of mathjs', (source, is) => {
    expect(evaluate(source)).toBeCloseTo(is, 12)
    expect(expression(source).value).toMatchObject({ si: expect.closeTo(is, 12) })
  })
})

describe('dimensions', () => {
  const unit = fc.constantFrom('V', 'A', 'ohm', 'H', 'F', 's', 'W', 'K', 'm')
  it('a sum of different kinds is always found', () => {
    const vector = new Map([['V', 1], ['A', 2], ['ohm', 3], ['H', 4], ['F', 5], ['s', 6], ['W', 7], ['K', 8], ['m', 9]])
    fc.assert(fc.property(unit, unit, fc.integer({ min: 1, max: 9 }), fc.constantFrom('+', '-'), (a, b, n, sign) => {
      const result = expression(`(${n} ${a})*2 ${sign} (3 ${b})/${n}`)
      expect(result.status === 'error').toBe(vector.get(a) !== vector.get(b))
    }), { numRuns: 200, seed: 11 })
  })
})
