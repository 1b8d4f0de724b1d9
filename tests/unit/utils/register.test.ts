import { describe, expect, it } from 'vitest'
import type { RegisterRow } from '../../../shared/types/api'
import { compareNaturally, filterRows, sortRows } from '../../../shared/utils/register'

const row = (changes: Partial<RegisterRow>): RegisterRow => ({
  sheetId: 's', revisionId: 'r', projectId: 'p', jobNumber: '2638', projectTitle: 'Terminal', number: 'C-1', title: 'Filter', revision: 'P1', state: 'draft',
  preparedBy: null, checkedBy: null, approvedBy: null, checker: null, awaiting: null, since: '2026-12-01T00:00:00Z', due: null, age: 0,
  ticked: null, lines: null, openMustChange: 0, returnReason: null, issuedAt: null, purpose: null, code: null, ...changes,
})
const numbers = (rows: readonly RegisterRow[]) => rows.map(one => one.number)

describe('sorting a register', () => {
  it('puts 2 before 10', () => {
    expect(numbers(sortRows([row({ number: 'C-10' }), row({ number: 'C-2' })], 'number', false))).toEqual(['C-2', 'C-10'])
    expect(numbers(sortRows([row({ number: 'C-2' }), row({ number: 'C-10' })], 'number', true))).toEqual(['C-10', 'C-2'])
  })
  it('puts what has no due date after what has one', () => {
    const rows = [row({ number: 'none' }), row({ number: 'late', due: '2026-12-09' }), row({ number: 'soon', due: '2026-12-02' })]
    expect(numbers(sortRows(rows, 'due', false))).toEqual(['soon', 'late', 'none'])
  })
  it('goes by the course of a revision, not by its word', () => {
    const rows = [row({ number: 'b', state: 'issued' }), row({ number: 'a', state: 'for_checking' }), row({ number: 'c', state: 'draft' })]
    expect(numbers(sortRows(rows, 'state', false))).toEqual(['c', 'a', 'b'])
  })
  it('orders equals by sheet number and leaves the list as given for an unknown column', () => {
    const rows = [row({ number: 'C-3' }), row({ number: 'C-1' })]
    expect(numbers(sortRows(rows, 'title', false))).toEqual(['C-1', 'C-3'])
    expect(numbers(sortRows(rows, 'nonsense', false))).toEqual(['C-3', 'C-1'])
    expect(numbers(rows)).toEqual(['C-3', 'C-1'])
  })
  it('compares text the same in both directions', () => {
    for (const [a, b] of [['A9', 'a10'], ['', 'x'], ['P1', 'P1'], ['B', 'AA']] as const) expect(Math.sign(compareNaturally(a, b))).toBe(-Math.sign(compareNaturally(b, a)) + 0)
  })
})

describe('narrowing a register', () => {
  const marta = { id: 'm', name: 'Marta Lindqvist', initials: 'ML' }
  const rows = [row({ number: 'C-1', title: 'Input filter', state: 'for_checking', awaiting: marta }), row({ number: 'C-2', title: 'Output filter' })]
  it('wants every word, wherever it stands', () => {
    expect(numbers(filterRows(rows, { search: 'filter LINDQVIST', state: '' }))).toEqual(['C-1'])
    expect(filterRows(rows, { search: 'filter ladder', state: '' })).toEqual([])
  })
  it('goes by state and by who is awaited', () => {
    expect(numbers(filterRows(rows, { search: '', state: 'draft' }))).toEqual(['C-2'])
    expect(numbers(filterRows(rows, { search: '', state: '', person: 'm' }))).toEqual(['C-1'])
  })
})
