/** Whole sheets against independent computations (source in each case), and falsified ones, which must fail. */
import { createHash } from 'node:crypto'
import { mkdtempSync, readFileSync, readdirSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { afterAll, describe, expect, it } from 'vitest'
import { caseSchema, readCase } from '../../../scripts/check-sheets/case'
import type { SheetCase } from '../../../scripts/check-sheets/case'
import { runCase } from '../../../scripts/check-sheets/compare'
import { evaluateSheet, recordedResults } from '../../../shared/engine'
import { inputOf } from './support'

const folder = fileURLToPath(new URL('../data/sheets/', import.meta.url))
const files = readdirSync(folder).sort()

function load(file: string): SheetCase {
  return caseSchema.parse(JSON.parse(readFileSync(join(folder, file), 'utf8')))
}

describe('reference sheets', () => {
  it.each(files)('%s holds', (file) => {
    expect(runCase(load(file)).failures).toEqual([])
  })

  it.each(files)('%s fails when any one of its numbers is falsified', (file) => {
    const test = load(file)
    test.expect.forEach((expectation, index) => {
      const wrong = falsified(expectation)
      if (!wrong) return
      const failures = runCase({ ...test, expect: test.expect.with(index, wrong) }).failures
      expect(failures, JSON.stringify(wrong)).toHaveLength(1)
    })
  })
})

type Expectation = SheetCase['expect'][number]

function falsified(expectation: Expectation): Expectation | undefined {
  if ('line' in expectation) return { ...expectation, status: expectation.status === 'ok' ? 'error' : 'ok' }
  if ('requirement' in expectation) return { ...expectation, verdict: expectation.verdict === 'met' ? 'not met' : 'met' }
  const { is } = expectation
  const slack = 3 * Math.max(expectation.absolute ?? 0, (expectation.relative ?? 1e-9) * (typeof is === 'number' ? Math.abs(is) : 1))
  if (typeof is === 'number') return { ...expectation, is: is + Math.max(slack, 1e-12) }
  if (typeof is === 'string') return { ...expectation, is: `${is}?` }
  if (Array.isArray(is)) return { ...expectation, is: [...is, [1, 1]] as [number, number][] }
  return undefined
}

describe('a case', () => {
  const run = (lines: string[], expected: unknown[]) => runCase(caseSchema.parse({ name: 'case', lines, expect: expected })).failures

  it('takes lists in any order, complex values, text and bounds', () => {
    const lines = ['x = 2 ± 10 %', 'H(s) = 1/(1 + s*(1 ms) + (s*(1 ms))^2)']
    expect(run(lines, [
      { value: '[1, 2, 3]', unit: '', is: [[3, 0], [1, 0], [2, 0]], relative: 1e-12 },
      { value: '[1, 2, 3]', unit: '', is: [3, 1, 2], relative: 1e-12 },
      { value: '3 + 4i', unit: '', is: [3, 4], relative: 1e-12 },
      { value: 'dampingClass(H)', unit: '', is: 'underdamped' },
      { value: 'x', unit: '%', is: 200, low: 180, high: 220, relative: 1e-12 },
      { value: 'gainMargin(H)', is: 'unbounded' },
    ])).toEqual([])
    expect(run(lines, [{ value: 'x', unit: '', low: 1.9, relative: 1e-9 }])).toHaveLength(1)
    expect(run(lines, [{ value: '[1, 2]', unit: '', is: [[1, 0], [1, 0]], relative: 1e-9 }])).toHaveLength(1)
  })

  it('states margins in the given unit', () => {
    expect(run(['f = 33.9 kHz', 'f >= 30 kHz'], [{ requirement: 2, verdict: 'met', margin: 3.9, unit: 'kHz', relative: 1e-9 }])).toEqual([])
    expect(run(['f = 33.9 kHz', 'f >= 30 kHz'], [{ requirement: 2, verdict: 'met', margin: 3.9, unit: 'V' }])).toHaveLength(1)
    expect(run(['f = 33.9 kHz', 'f >= 30 kHz'], [{ requirement: 1, verdict: 'met' }])).toHaveLength(1)
  })

  it('fails where the unit does not fit, the line is missing or nothing comes out', () => {
    expect(run(['x = 1 V'], [{ value: 'x', unit: 'A', is: 1 }])).toHaveLength(1)
    expect(run(['x = 1 V'], [{ value: 'x', unit: '', is: 1 }])).toHaveLength(1)
    expect(run(['x = 1 V'], [{ value: 'x', unit: 'parsec', is: 1 }])).toHaveLength(1)
    expect(run(['x = 1 V'], [{ line: 2, status: 'ok' }])).toHaveLength(1)
    expect(run(['x = 1 V'], [{ value: 'y', unit: '', is: 1 }])).toHaveLength(1)
    expect(run(['x = 3 dB'], [{ value: 'x', unit: '', is: 3 }])).toHaveLength(1)
  })

  const place = mkdtempSync(join(tmpdir(), 'polewright-case-'))
  afterAll(() => rmSync(place, { recursive: true }))

  it.each([
    ['{', 'not JSON'], ['[]', 'the file'], ['{"name":"x","lines":["a = 1"],"expect":[]}', 'expects something'],
    ['{"name":"x","lines":[1],"expect":[{"line":1,"status":"ok"}]}', 'lines.0'],
    ['{"name":"x","lines":[],"expect":[{"line":1,"status":"fine"}]}', 'expect.0'],
    ['{"name":"x","lines":[],"expect":[{"value":"a","is":1,"relativ":1}]}', 'expect.0'],
  ])('is refused with words where it is malformed: %s', (text, words) => {
    const file = join(place, 'case.json')
    writeFileSync(file, text)
    const read = readCase(file)
    expect('malformed' in read && read.malformed).toContain(words)
  })
})

describe('recorded results', () => {
  /** Of the recorded results of every reference sheet: the same bytes on every machine. Changes only with ENGINE_VERSION. */
  const EXPECTED = '765112371b85e0fce8bce68fe2127ed9ce9d93048dfbdec3a14d233add692b1c'

  it('are the same bytes everywhere', () => {
    const hash = createHash('sha256')
    for (const file of files) hash.update(JSON.stringify(recordedResults(evaluateSheet(inputOf(load(file).lines)))))
    expect(hash.digest('hex')).toBe(EXPECTED)
  })

  it('do not depend on the digits shown', () => {
    const lines = ['R = 4.7 kohm ± 5 %', 'H(s) = 1/(1 + s*R*(1 uF))', 'attenuation(H, band(1 kHz, 1 MHz)) >= 20 dB', 'p = poles(H)']
    const input = inputOf(lines)
    const few = recordedResults(evaluateSheet({ ...input, settings: { significantDigits: 2 } }))
    expect(few).toEqual(recordedResults(evaluateSheet({ ...input, settings: { significantDigits: 9 } })))
  })
})
