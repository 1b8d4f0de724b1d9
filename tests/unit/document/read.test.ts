import { describe, expect, it } from 'vitest'
import { linesInError, numberedRequirements, openHolds } from '../../../shared/document/read'
import type { LineNode, SheetDocument } from '../../../shared/document/types'
import type { LineResult, RequirementResult, Shown } from '../../../shared/engine/types'

const shown = (text: string, unit = 'dB'): Shown => ({ text, unit, latex: text })
const line = (id: string, source: string, status: LineNode['attrs']['status'] = null, reference = ''): LineNode => ({
  type: 'line',
  attrs: { id, status },
  content: [{ type: 'source', content: [{ type: 'text', text: source }] }, { type: 'reference', content: reference ? [{ type: 'text', text: reference }] : [] }],
})
const document: SheetDocument = { type: 'doc', content: [{ type: 'calculation', attrs: { id: 'c', reference: '' }, content: [
  line('a', 'P_in = 180 W # converter input power', 'hold', 'awaited from client'), line('b', 'R = 3 ohm', 'hold'), line('d', 'H(s) = 1', 'given'),
] }] }
const requirement = (margin: string, nominal: string): RequirementResult => ({ verdict: 'met', margin: shown(margin), marginSi: 1, nominalMargin: shown(nominal), nominalMarginSi: 1, subject: 'peak', untoleranced: [] })
const result = (id: string, changes: Partial<LineResult> = {}): LineResult => ({ id, status: 'ok', kind: 'value', problems: [], uses: [], typeset: {}, ...changes })

describe('the head of a sheet', () => {
  it('numbers requirements in reading order and says a nominal margin only where it differs', () => {
    const found = numberedRequirements({ lines: [result('x'), result('q', { requirement: requirement('1.2', '3.4') }), result('r', { requirement: requirement('2', '2') })] })
    expect(found.map(one => [one.number, one.lineId, one.margin, one.nominalMargin])).toEqual([[1, 'q', '1.2 dB', '3.4 dB'], [2, 'r', '2 dB', null]])
  })
  it('names holds by their note, else by their name, else as typed', () => {
    const lines = [result('a', { note: 'converter input power', defines: 'P_in' }), result('b', { defines: 'R' })]
    expect(openHolds(document, { lines })).toEqual([{ lineId: 'a', what: 'converter input power', from: 'awaited from client' }, { lineId: 'b', what: 'R', from: '' }])
    expect(openHolds(document, { lines: [] })[1]!.what).toBe('R = 3 ohm')
  })
  it('lists the lines that could not be computed', () => {
    expect(linesInError({ lines: [result('a'), result('b', { status: 'error' })] }).map(one => one.id)).toEqual(['b'])
  })
})
