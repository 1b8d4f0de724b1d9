import { describe, expect, it } from 'vitest'
import { submitFindings, unanswered } from '../../../../shared/document/findings'
import { rowHashes } from '../../../../shared/document/lineHashes'
import { holds, linesOf, references, sheetLines, tickableRows } from '../../../../shared/document/lines'
import type { LineNode, SheetBlock, SheetDocument } from '../../../../shared/document/types'
import { evaluateSheet } from '../../../../shared/engine'

function line(id: string, source: string, reference = '', status: LineNode['attrs']['status'] = null): LineNode {
  const text = (value: string) => (value ? { content: [{ type: 'text' as const, text: value }] } : {})
  return { type: 'line', attrs: { id, status }, content: [{ type: 'source', ...text(source) }, { type: 'reference', ...text(reference) }] }
}
const response = (over: object = {}): SheetBlock => ({
  type: 'response',
  attrs: { id: 'plot', reference: '', transfer: 'H', from: '', to: '', showPhase: true, showStep: false, showAsymptotes: false, duration: '', supply: '', rating: '', caption: '', ...over },
})
const sheet = (lines: LineNode[], ...blocks: SheetBlock[]): SheetDocument => ({
  type: 'doc',
  content: [
    { type: 'heading', attrs: { id: 'head', reference: '', level: 1 }, content: [{ type: 'text', text: 'Filter' }] },
    { type: 'paragraph', attrs: { id: 'prose', reference: '' }, content: [{ type: 'text', text: 'The filter.' }] },
    { type: 'paragraph', attrs: { id: 'empty', reference: '' } },
    { type: 'calculation', attrs: { id: 'block', reference: '' }, content: lines },
    ...blocks,
  ],
})
const LINES = [
  line('r', 'R = 1 kohm', 'data sheet', 'given'), line('c', 'C = 100 nF', '', 'hold'), line('tau', 'tau = R*C to us'),
  line('h', 'H(s) = 1/(1 + s*R*C)'), line('other', 'V = 5 V'), line('blank', ''), line('req', 'tau <= 1 ms', 'spec 4.2'),
]
const evaluate = (document: SheetDocument) => evaluateSheet({ lines: sheetLines(document), settings: { significantDigits: 4 } })
const hashes = (document: SheetDocument) => new Map(rowHashes(document, evaluate(document)).map(row => [row.lineId, row.hash]))

/** Rows whose hash differs between two sheets. */
function changed(before: SheetDocument, after: SheetDocument): string[] {
  const [one, other] = [hashes(before), hashes(after)]
  return [...other].filter(([id, hash]) => one.get(id) !== hash).map(([id]) => id)
}
const replace = (id: string, by: LineNode) => LINES.map(one => (one.attrs.id === id ? by : one))

it('is read line by line', () => {
  const document = sheet(LINES, response())
  expect(linesOf(document)[0]).toEqual({ id: 'r', source: 'R = 1 kohm', reference: 'data sheet', status: 'given', blockId: 'block', requirements: false })
  expect(holds(document).map(one => one.lineId)).toEqual(['c'])
  expect(references(document)).toEqual([{ id: 'r', text: 'data sheet' }, { id: 'req', text: 'spec 4.2' }])
})

it('has to be ticked in all but its headings and what is empty', () => {
  expect(tickableRows(sheet(LINES, response())).map(row => row.id)).toEqual(['prose', 'r', 'c', 'tau', 'h', 'other', 'req', 'plot'])
})

describe('a tick', () => {
  const before = sheet(LINES, response())

  it('falls on a line whose text changed and on those that take its value, and stays on the others', () => {
    expect(changed(before, sheet(replace('c', line('c', 'C = 120 nF', '', 'hold')), response()))).toEqual(['c', 'tau', 'h', 'req', 'plot'])
    expect(changed(before, sheet(replace('other', line('other', 'V = 6 V')), response()))).toEqual(['other'])
  })

  it('falls with the reference and with how an input came to be known', () => {
    expect(changed(before, sheet(replace('r', line('r', 'R = 1 kohm', 'data sheet, rev. C', 'given')), response()))).toEqual(['r'])
    expect(changed(before, sheet(replace('r', line('r', 'R = 1 kohm', 'data sheet', 'assumed')), response()))).toEqual(['r'])
  })

  it('stays where a formula is written otherwise above with the same value, but for that line', () => {
    expect(changed(before, sheet(replace('r', line('r', 'R = 1000 ohm', 'data sheet', 'given')), response()))).toEqual(['r'])
  })

  it('of a response falls with its own settings and with the values in them', () => {
    expect(changed(before, sheet(LINES, response({ to: '1 MHz' })))).toEqual(['plot'])
    const supplied = sheet(LINES, response({ supply: '2*V' }))
    expect(changed(supplied, sheet(replace('other', line('other', 'V = 6 V')), response({ supply: '2*V' })))).toEqual(['other', 'plot'])
  })

  it('stays when a line above is only moved in number', () => {
    expect(changed(before, sheet([line('new', '# A word before.'), ...LINES], response()))).toEqual(['new'])
  })
})

describe('before submission', () => {
  const find = (lines: LineNode[]) => {
    const document = sheet(lines)
    return submitFindings({ document, results: evaluate(document), cautions: [{ message: 'Hot.', lineId: 'r' }], responseProblems: [], missingPictures: [] })
  }

  it('errors, unmet requirements and missing references want an answer; holds and cautions are only told', () => {
    const findings = find([
      line('bad', 'x = y + 1'), line('r', 'R = 1 kohm', '', 'given'), line('c', 'C = 1 nF', 'the maker', 'hold'), line('req', 'R <= 500 ohm'),
    ])
    expect(findings.map(one => [one.kind, one.lineId])).toEqual([
      ['error', 'bad'], ['requirement', 'req'], ['reference', 'r'], ['reference', 'req'], ['hold', 'c'], ['caution', 'r'],
    ])
    expect(unanswered(findings, [])).toHaveLength(4)
    const accepted = findings.slice(0, 4).map(({ lineId, what }) => ({ lineId, what, reason: 'agreed' }))
    expect(unanswered(findings, accepted)).toEqual([])
    expect(unanswered(findings, accepted.map(one => ({ ...one, what: 'something else' })))).toHaveLength(4)
  })

  it('a sheet without anything to check cannot be accepted with a reason', () => {
    const document: SheetDocument = { type: 'doc', content: [] }
    const findings = submitFindings({ document, results: { lines: [] }, cautions: [], responseProblems: [], missingPictures: [] })
    expect(unanswered(findings, findings.map(({ lineId, what }) => ({ lineId, what, reason: 'agreed' })))).toHaveLength(1)
  })
})
