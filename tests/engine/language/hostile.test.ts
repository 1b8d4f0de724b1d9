/** Lines meant to break the engine become errors at their line; the rest computes. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { evaluateSheet } from '../../../shared/engine'
import { FUNCTION_NAMES } from '../../../shared/engine/syntax/words'
import { inputOf, last, sheet } from './support'

const nested = (n: number) => `${'('.repeat(n)}1${')'.repeat(n)}`
const doubling = (n: number) => ['f_0(x) = x + 1', ...Array.from({ length: n }, (_, k) => `f_${k + 1}(x) = f_${k}(x) + f_${k}(x)`), `f_${n}(1)`]

describe('hostile lines', () => {
  it.each([
    ['brackets', nested(500)],
    ['signs', `${'-'.repeat(3000)}1`],
    ['powers', Array.from({ length: 300 }, () => '9').join('^')],
    ['a long sum', Array.from({ length: 5000 }, () => '1').join('+')],
    ['a long list', `[${Array.from({ length: 5000 }, () => '1').join(',')}]`],
    ['lists within lists', `${'['.repeat(60)}1${']'.repeat(60)}`],
    ['an order beyond the limit', 'H(s) = 1/(1 + s*(1 ms))^1000'],
    ['code', 'constructor("return 1")()'],
    ['a prototype', '__proto__ = 2; x'],
    ['an import', 'import({pi: 3})'],
    ['the evaluator', 'evaluate("2+3")'],
    ['a reviver', 'reviver(1)'],
    ['a unit maker', 'createUnit("x")'],
    ['a long name', `${'a'.repeat(5000)} = 1`],
    ['a control character', 'x = 1\u0000'],
    ['half a surrogate', 'x = \ud835'],
  ])('%s', (_, line) => {
    const { lines } = sheet('a = 1', line, 'b = a + 1')
    expect(lines[1]?.status).toBe('error')
    expect(lines[1]?.problems[0]?.message).not.toBe('')
    expect(lines[2]?.value).toMatchObject({ si: 2 })
  })

  it('functions that double with every line', () => {
    expect(last(...doubling(40)).problems[0]?.code).toBe('too-much-work')
    expect(last(...doubling(8)).value).toMatchObject({ si: 512 })
  })

  it.each(['constructor', 'toString', 'hasOwnProperty', '__proto__', 'prototype', 'valueOf'])('%s is an ordinary free name', (word) => {
    expect(last(word).problems[0]?.code).toBe('unknown-name')
    expect(last(`${word} = 2`, `${word} + 1`).value).toMatchObject({ si: 3 })
    expect(last(`${word}(1)`).problems[0]?.code).toBe('unknown-name')
  })

  it('never throw, whatever is typed', () => {
    const piece = fc.oneof(
      fc.constantFrom('1', '2.5', '3 V', 'kHz', 'a', 'H', 's', 'pi', 'i', '(', ')', '[', ']', ',', '+', '-', '*', '/', '^', '.*', ' to ', '±', '<=', '>', '?', ':', '=', '%', '#', '°C', 'dB', ' ', 'E24', '0'),
      fc.constantFrom(...FUNCTION_NAMES.map(name => `${name}(`)),
      fc.string({ maxLength: 3, unit: 'grapheme' }),
    )
    fc.assert(fc.property(fc.array(piece, { maxLength: 14 }), fc.constantFrom('', 'x = ', 'G(s) = ', 'g(x) = '), (pieces, start) => {
      const { lines } = evaluateSheet(inputOf(['a = 2 V', 'H(s) = 1/(1 + s*(1 ms))', start + pieces.join('')]))
      const [, , line] = lines
      expect(['ok', 'warning', 'error']).toContain(line?.status)
      for (const problem of line?.problems ?? []) {
        expect(problem.message).not.toBe('')
        if (problem.at) expect(problem.at.from).toBeLessThanOrEqual(problem.at.to)
      }
      expect(JSON.stringify(line)).not.toMatch(/NaN|Infinity/)
    }), { numRuns: 800, seed: 99 })
  }, 60_000)
})
