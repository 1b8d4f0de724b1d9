/** Lines of one shape are compiled once: that must not show in any result, nor must an edit that moves values only. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { createSheetEngine, evaluateSheet, recordedResults } from '#shared/engine'
import type { SheetInput } from '#shared/engine'
import { Sheet } from '../../../shared/engine/graph/sheet'

const settings = { significantDigits: 4 }
const asInput = (sources: readonly string[]): SheetInput => ({ lines: sources.map((source, i) => ({ id: `l${i}`, source })), settings })
/** Everything a person sees, looked at now. */
const seen = (result: object): unknown => JSON.parse(JSON.stringify(result))

const NAMES = ['a', 'b', 'R_1', 'R_2', 'C', 'V', 'x']
const name = fc.constantFrom(...NAMES)
const right = fc.oneof(
  fc.tuple(fc.integer({ min: 1, max: 99 }), fc.constantFrom('V', 'kohm', 'nF', 'ms', 'ohm', '%', 'dB', 'degC', 'rad/s', '')).map(([n, unit]) => `${n / 10} ${unit}`.trim()),
  fc.tuple(name, fc.constantFrom('*', '/', ' + ', ' - ', ' '), name).map(([x, sign, y]) => `${x}${sign}${y}`),
  fc.tuple(name, name).map(([x, y]) => `1/(2*pi*${x}*${y}) to kHz`),
  fc.tuple(name, name).map(([x, y]) => `sqrt(${x}/${y})`),
  name.map(x => `${x}/(2 V) to mA`),
  name.map(x => `2 ${x}`),
  name.map(x => `5 V/${x}`),
  name.map(x => `${x}^2`),
  name.map(x => `10 V ± ${x}`),
  name.map(x => `1/(${x} - 1 V)`),
)
const line = fc.tuple(name, right).map(([defined, value]) => `${defined} = ${value}`)
const sheet = fc.array(line, { minLength: 1, maxLength: 14 })

describe('lines of one shape', () => {
  it('give what they give when each is compiled by itself', () => {
    fc.assert(fc.property(sheet, (sources) => {
      const input = asInput(sources)
      expect(seen(new Sheet().evaluate(input))).toEqual(seen(new Sheet(false).evaluate(input)))
    }), { numRuns: 600, seed: 20_261_201 })
  }, 60_000)

  it('are told apart where a name is a unit too', () => {
    const sources = ['V = 2 V', 'C = 3 nF', 'x = 5 V', 'y = 5 C', 'z = 20 mA/(1 V)', 'w = (20 mA)/V', 'q = C*V to nC']
    expect(seen(new Sheet().evaluate(asInput(sources)))).toEqual(seen(new Sheet(false).evaluate(asInput(sources))))
  })
})

describe('an edit', () => {
  it('gives what a fresh evaluation of the edited sheet gives', () => {
    const edits = fc.array(fc.tuple(fc.nat(13), line), { minLength: 1, maxLength: 8 })
    fc.assert(fc.property(sheet, edits, (sources, changes) => {
      const engine = createSheetEngine(settings)
      engine.update(asInput(sources))
      const now = [...sources]
      for (const [at, source] of changes) {
        const index = at % now.length
        now[index] = source
        engine.edit(`l${index}`, source).results()
      }
      const fresh = evaluateSheet(asInput(now))
      const kept = engine.evaluate(asInput(now))
      expect(JSON.stringify(recordedResults(kept))).toBe(JSON.stringify(recordedResults(fresh)))
      expect(seen(kept)).toEqual(seen(fresh))
    }), { numRuns: 400, seed: 20_261_201 })
  }, 60_000)

  it('computes the line and those that rest on it, no others', () => {
    const engine = createSheetEngine(settings)
    engine.update(asInput(['a = 2 V', 'b = 3 kohm', 'c = a/b to mA', 'd = 2*c to mA', 'g = 2*b to kohm']))
    const edited = engine.edit('l0', 'a = 4 V')
    expect(edited.results().map(({ id, value }) => [id, value?.type === 'number' ? value.shown.text : value])).toEqual([['l0', '4.000'], ['l2', '1.333'], ['l3', '2.667']])
    expect(engine.edit('l1', 'b = 2 V').results().map(({ id, status }) => [id, status])).toEqual([['l1', 'ok'], ['l2', 'error'], ['l3', 'error'], ['l4', 'error']])
  })
})

describe('a further evaluation', () => {
  /** Every line has a name of its own and may use those above. */
  const rightOf = (index: number) => fc.oneof(
    fc.integer({ min: 1, max: 99 }).map(n => `${n / 10} V`),
    ...index === 0 ? [] : [fc.tuple(fc.nat(index - 1), fc.nat(index - 1), fc.constantFrom('2*x', 'x + y', 'x*y/(1 V)', 'x - y', 'x/(x - y)*(1 V)', 'x ± 5 %')).map(([x, y, form]) => form.replaceAll('x', `n_${x}`).replaceAll('y', `n_${y}`))],
  )
  const named = (index: number) => rightOf(index).map(value => `n_${index} = ${value}`)
  const COUNT = 9
  const start = fc.tuple(...Array.from({ length: COUNT }, (_, i) => named(i)))
  const change = fc.nat(COUNT - 1).chain(index => named(index).map(source => ({ index, source })))

  it('gives what a fresh one gives, whatever was changed and in whichever way', () => {
    fc.assert(fc.property(start, fc.array(fc.tuple(change, fc.boolean()), { minLength: 1, maxLength: 6 }), (sources, changes) => {
      const engine = createSheetEngine(settings)
      engine.evaluate(asInput(sources))
      const now: string[] = [...sources]
      for (const [{ index, source }, edited] of changes) {
        now[index] = source
        if (edited) engine.edit(`l${index}`, source)
        expect(seen(engine.evaluate(asInput(now)))).toEqual(seen(evaluateSheet(asInput(now))))
      }
    }), { numRuns: 300, seed: 20_261_201 })
  }, 60_000)

  it('leaves nothing behind where an edit met a line without a value half-way', () => {
    const engine = createSheetEngine(settings)
    engine.evaluate(asInput(['a = 2 V', 'b = 1 V', 'c = a/(a - b)*(1 V)', 'd = 2*a']))
    engine.edit('l0', 'a = 1 V')
    const now = asInput(['a = 1 V', 'b = 1 V', 'c = a/(a - b)*(1 V)', 'd = 2*a'])
    expect(seen(engine.evaluate(now))).toEqual(seen(evaluateSheet(now)))
  })
})
