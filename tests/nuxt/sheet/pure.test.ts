import { describe, expect, it } from 'vitest'
import { findKinds } from '~/components/sheet/insertKinds'
import { answerKey, missingForSubmission } from '~/components/sheet/submission'
import { rangeOf } from '~/components/sheet/views/highlight'
import { outputParts, spokenResult } from '~/components/sheet/views/output'
import { createSheetEditorHub, numberRequirements } from '~/composables/useSheetEditorHub'
import type { LineResult } from '#shared/engine/types'
import type { SubmitFinding, SubmitReview } from '#shared/types/api'

const shown = (text: string, unit = '') => ({ text, unit, latex: text })
const requirement: LineResult = {
  id: 'r', status: 'ok', kind: 'requirement', problems: [], uses: [], typeset: {},
  requirement: { verdict: 'not met at worst case', margin: shown('-0.2', 'dB'), marginSi: -0.2, nominalMargin: shown('1.1', 'dB'), nominalMarginSi: 1.1, subject: 'stop band', untoleranced: [] },
}
const value: LineResult = {
  id: 'v', status: 'ok', kind: 'value', problems: [], uses: [], typeset: {},
  value: { type: 'number', si: 4700, dimension: [0, 0, 0, 0, 0, 0, 0], shown: shown('4.700', 'kΩ'), bounds: { low: 1, high: 2, shownLow: shown('4.653', 'kΩ'), shownHigh: shown('4.747', 'kΩ'), method: 'searched' } },
}

describe('the Output column', () => {
  const text = (result: LineResult) => outputParts(result).map(part => part.textContent)

  it('shows value, unit and bounds', () => {
    expect(text(value)).toEqual(['4.700 kΩ', '4.653 … 4.747'])
    expect(outputParts(value)[1]?.dataset.method).toBe('searched')
  })
  it('says the verdict first, then the margin at worst case, then the nominal one', () => {
    expect(text(requirement)).toEqual(['not met at worst case', 'margin -0.2 dB', 'nominal 1.1 dB'])
  })
  it('shows nothing beside a line in error, whose words are read out', () => {
    const failed: LineResult = { ...value, status: 'error', problems: [{ code: 'x', severity: 'error', message: 'No such name.', hint: 'Define it above.' }] }
    expect(text(failed)).toEqual([])
    expect(spokenResult(failed)).toBe('Error: No such name. Define it above.')
  })
})

describe('the hub of the rows', () => {
  it('tells only the rows whose figures changed', () => {
    const hub = createSheetEditorHub(() => Promise.resolve(null))
    const told: string[] = []
    hub.subscribe('r', () => told.push('r'))
    hub.subscribe('v', () => told.push('v'))
    hub.setResults([requirement, value])
    hub.setResults([requirement, { ...value }])
    expect(told).toEqual(['r', 'v', 'v'])
  })
  it('tells a requirement whose number moved', () => {
    const hub = createSheetEditorHub(() => Promise.resolve(null))
    hub.setResults([requirement])
    let number: number | null = null
    hub.subscribe('r', () => { number = hub.row('r').requirement })
    hub.setResults([{ ...requirement, id: 'q' }, requirement])
    expect(number).toBe(2)
    expect([...numberRequirements([value, requirement])]).toEqual([['r', 1]])
  })
  it('forgets a row that has gone', () => {
    const hub = createSheetEditorHub(() => Promise.resolve(null))
    let told = 0
    const leave = hub.subscribe('v', () => { told += 1 })
    leave()
    hub.setResults([value])
    expect(told).toBe(0)
  })
})

describe('the place of a problem', () => {
  it('counts only the text that was typed, not the carets of colleagues', () => {
    const host = document.createElement('div')
    host.innerHTML = 'x = <span data-caret><span>TR</span></span>R + C'
    expect(rangeOf(host, { from: 4, to: 9 })?.cloneContents().textContent?.endsWith('R + C')).toBe(true)
    expect(rangeOf(host, { from: 4, to: 90 })).toBeNull()
  })
})

describe('kinds of block', () => {
  it('are found by their name or by other words for them', () => {
    expect(findKinds('req')[0]?.kind).toBe('requirements')
    expect(findKinds('plot').map(kind => kind.kind)).toEqual(['response'])
    expect(findKinds('nothing of the sort')).toEqual([])
  })
})

describe('what is missing before a sheet is submitted', () => {
  const finding = (kind: SubmitFinding['kind'], mustMend = false): SubmitFinding => ({ lineId: 'a', kind, what: `${kind} ${mustMend}`, mustMend })
  const review = (...findings: SubmitFinding[]): SubmitReview => ({ findings, hash: 'f'.repeat(64), seq: 1, editors: [] })
  const missing = (given: SubmitReview | null, reasons = {}, checkerId = 'c') => missingForSubmission({ review: given, reasons, checkerId })

  it('is an answer to every finding that needs one, and a checker', () => {
    const unmet = finding('requirement')
    expect(missing(null)).toBe('the sheet is being computed')
    expect(missing(review(finding('error', true)))).toContain('mended')
    expect(missing(review(unmet))).toBe('one finding is neither mended nor accepted')
    expect(missing(review(unmet), { [answerKey(unmet)]: ' x ' })).toBe('one finding is neither mended nor accepted')
    expect(missing(review(unmet), { [answerKey(unmet)]: 'agreed' })).toBeNull()
    expect(missing(review(finding('hold'), finding('caution')))).toBeNull()
    expect(missing(review(), {}, '')).toBe('the checker is missing')
    expect(missing({ ...review(), hash: null })).toBe('the sheet cannot be frozen as it is')
  })
})
