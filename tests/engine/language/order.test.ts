/** Order and dependencies: defined above, once, and the rest still computes. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { createSheetEngine, evaluateSheet, recordedResults } from '../../../shared/engine'
import { inputOf, last, refusal, sheet } from './support'

describe('names', () => {
  it('are defined once', () => {
    const { lines } = sheet('V_1 = 5 V', 'V_1 = 6 V', 'x = V_1*2')
    expect(lines[1]?.problems[0]).toMatchObject({ code: 'defined-twice', message: expect.stringContaining('line 1') })
    expect(lines[2]?.value).toMatchObject({ si: 10 })
  })

  it('are defined above their use', () => {
    expect(sheet('x = y*2', 'y = 3').lines[0]?.problems[0]).toMatchObject({ code: 'defined-below', message: expect.stringContaining('line 2'), at: { from: 4, to: 5 } })
  })

  it('are not defined by themselves, nor in a circle', () => {
    expect(refusal('x = x + 1').code).toBe('self-reference')
    const { lines } = sheet('a = b', 'b = a')
    expect(lines.map(line => line.problems[0]?.code)).toEqual(['defined-below', 'depends-on-error'])
  })

  it('of values and functions share one space', () => {
    expect(refusal('f = 2', 'f(x) = x').code).toBe('defined-twice')
    expect(refusal('H = 2', 'H(s) = 1').code).toBe('defined-twice')
  })
})

describe('a failed line', () => {
  it('is named by what depends on it, and leaves the rest alone', () => {
    const { lines } = sheet('a = 1 V + 1 A', 'b = 2*a', 'c = b + 1', 'd = 4')
    expect(lines.map(line => line.status)).toEqual(['error', 'error', 'error', 'ok'])
    expect(lines[1]?.problems[0]).toMatchObject({ code: 'depends-on-error', message: expect.stringContaining('line 1') })
  })

  it('keeps its name also where it cannot be read', () => {
    expect(sheet('a = 2 +', 'b = a*2').lines[1]?.problems[0]?.code).toBe('depends-on-error')
  })

  it('that only repeats a name does not spoil the first', () => {
    expect(last('a = 1', 'a = 2 +', 'a*3').value).toMatchObject({ si: 3 })
  })
})

describe('uses and notes', () => {
  it('lists the names used directly, in order of first use', () => {
    expect(last('R = 1 ohm', 'I = 2 A', 'V_1 = R*I + I*R # drop')).toMatchObject({ uses: ['R', 'I'], defines: 'V_1', note: 'drop', kind: 'value' })
  })

  it('tells empty lines, notes and the other kinds apart', () => {
    expect(sheet('', '# note', 'a = 1', 'f(x) = x', 'H(s) = 1', '1 <= 2', '$').lines.map(line => line.kind)).toEqual(['empty', 'note', 'value', 'function', 'transfer', 'requirement', 'error'])
  })
})

describe('incremental evaluation', () => {
  it('computes anew only what depends on a change', () => {
    const engine = createSheetEngine({ significantDigits: 4 })
    const lines = ['a = 1', 'b = 2', 'c = a + 1', 'd = b + 1', 'e_1 = c + d']
    const first = engine.evaluate(inputOf(lines))
    expect(engine.recomputed()).toBe(5)
    const second = engine.evaluate(inputOf(lines.with(0, 'a = 5')))
    expect(engine.recomputed()).toBe(3)
    expect(second.lines[1]).toBe(first.lines[1])
    expect(second.lines[3]).toBe(first.lines[3])
    expect(second.lines[4]?.value).toMatchObject({ si: 9 })
  })

  it('notices that a word turns from a unit to a name', () => {
    const engine = createSheetEngine({ significantDigits: 4 })
    const input = inputOf(['x = 1', 'y = 12 V*A'])
    expect(engine.evaluate(input).lines[1]?.status).toBe('ok')
    expect(engine.evaluate({ ...input, lines: [{ id: 'l1', source: 'A = 1' }, ...input.lines.slice(1)] }).lines[1]?.problems[0]?.code).toBe('unit-or-name')
  })

  const words = ['a', 'b', 'c', 'd', 'H']
  const source = fc.oneof(
    fc.tuple(fc.constantFrom(...words.slice(0, 4)), fc.constantFrom('1 V', '2 V ± 5 %', '3', 'a + 1 V', 'b*2', 'c + a', '1 V + 1 A', 'd/2', 'x', '2 +', 'f(a)', 'low(b)')).map(([name, value]) => `${name} = ${value}`),
    fc.constantFrom('H(s) = 1/(1 + s*(1 ms))', 'gain(H, 1 kHz) <= a', 'a >= b', 'f(x) = x + a', '# note', '', 'c = magnitude(H, 1 kHz)*(1 V)'),
  )
  const edits = fc.array(fc.tuple(fc.nat(9), fc.constantFrom('replace', 'insert', 'remove'), source), { minLength: 1, maxLength: 12 })

  it('gives what a fresh evaluation gives, whatever is edited', () => {
    fc.assert(fc.property(fc.array(source, { maxLength: 10 }), edits, (start, changes) => {
      const engine = createSheetEngine({ significantDigits: 4 })
      let lines = start.map((text, index) => ({ id: `s${index}`, source: text }))
      engine.evaluate({ lines, settings: { significantDigits: 4 } })
      changes.forEach(([at, kind, text], index) => {
        const place = Math.min(at, lines.length)
        if (kind === 'insert') lines = lines.toSpliced(place, 0, { id: `n${index}`, source: text })
        else if (kind === 'remove') lines = lines.toSpliced(place, 1)
        else lines = lines.map((line, i) => i === place ? { ...line, source: text } : line)
        const input = { lines, settings: { significantDigits: 4 } }
        const kept = engine.evaluate(input)
        expect(kept).toEqual(evaluateSheet(input))
        expect(JSON.stringify(recordedResults(kept))).toBe(JSON.stringify(recordedResults(evaluateSheet(input))))
      })
    }), { numRuns: 60, seed: 20_261_201 })
  }, 60_000)
})
